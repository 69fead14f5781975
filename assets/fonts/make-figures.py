"""Makes lexend-figures.woff2: the ten figures of Lexend at one width, over the whole range of weights.

The font has figures of different widths and no feature to even them out, so columns of numbers would not line up. Each
figure keeps its outline and is only centered in a cell of the same width. Needs fonttools and brotli (Python), and is
run by hand from the root of the repository when Lexend moves to another version:

    python3 assets/fonts/make-figures.py
"""

from fontTools import subset
from fontTools.ttLib import TTFont

SOURCE = "node_modules/@fontsource-variable/lexend/files/lexend-latin-wght-normal.woff2"
TARGET = "assets/fonts/lexend-figures.woff2"
FIGURES = "0123456789"
# Thousandths of the size: the cell at the default weight, and how much wider it gets up to the boldest. Between those of
# the narrow and the wide figures of the font, so that neither looks spaced out.
CELL = 580
CELL_GROWTH = 105

font = TTFont(SOURCE)
options = subset.Options(flavor="woff2", layout_features=[], drop_tables=["HVAR", "GSUB", "GPOS", "GDEF"], notdef_outline=True)
subsetter = subset.Subsetter(options)
subsetter.populate(text=FIGURES)
subsetter.subset(font)

names = font.getBestCmap()
glyf, gvar, hmtx = font["glyf"], font["gvar"], font["hmtx"]
for figure in FIGURES:
    name = names[ord(figure)]
    width, _ = hmtx[name]
    glyph = glyf[name]
    glyph.coordinates.translate((round((CELL - width) / 2), 0))
    glyph.recalcBounds(glyf)
    hmtx[name] = (CELL, glyph.xMin)
    for variation in gvar.variations[name]:
        # The last four points are phantoms; the second of them carries the advance width.
        *outline, left, right, top, bottom = variation.coordinates
        growth = CELL_GROWTH if variation.axes["wght"][1] > 0 else 0
        shift = round((growth - right[0]) / 2)
        variation.coordinates = [(x + shift, y) for x, y in outline] + [left, (growth, right[1]), top, bottom]

for record in font["name"].names:
    if record.nameID in (1, 3, 4, 6, 16):
        record.string = "LexendFigures" if record.nameID == 6 else "Lexend Figures"
font.flavor = "woff2"
font.save(TARGET)
