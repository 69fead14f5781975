/**
 * The relative luminance of an sRGB color, 0 (black) to 1 (white).
 * @param hex - `#rrggbb`; anything else throws
 * Source: W3C, Web Content Accessibility Guidelines 2.2, "relative luminance".
 */
export function relativeLuminance(hex: string): number {
  if (!/^#[0-9a-f]{6}$/i.test(hex)) throw new RangeError(`not a color: ${hex}`)
  const [red = 0, green = 0, blue = 0] = [1, 3, 5].map((start) => {
    const channel = Number.parseInt(hex.slice(start, start + 2), 16) / 255
    return channel <= 0.04045 ? channel / 12.92 : ((channel + 0.055) / 1.055) ** 2.4
  })
  return 0.2126 * red + 0.7152 * green + 0.0722 * blue
}

/**
 * The contrast of two colors, 1 (the same) to 21 (black on white), whichever is in front.
 * Source: W3C, Web Content Accessibility Guidelines 2.2, "contrast ratio": (L1 + 0.05) / (L2 + 0.05).
 */
export function contrastRatio(first: string, second: string): number {
  const [dark = 0, light = 0] = [relativeLuminance(first), relativeLuminance(second)].sort((a, b) => a - b)
  return (light + 0.05) / (dark + 0.05)
}
