import { describe, expect, it } from 'vitest'
import { chartFormats } from '../../../shared/charts/formats'
import {
  drawGradeChart,
  gradeChartSummary,
  gradeChartTitle,
  gradeDashes,
  gradeTableRows,
  readGradeAt,
  type GradeChartData,
  type GradePoint,
} from '../../../shared/charts/grade-chart'

const formats = chartFormats('us')
const point = (percent: number, sumpC: number, locked: boolean, speedHeld = true): GradePoint => ({
  grade: percent / 100,
  sumpC,
  coolerInletC: sumpC + 25,
  speedMps: speedHeld ? 20.1168 : 15,
  speedHeld,
  gear: locked ? 4 : 3,
  locked,
})
/** Locked up to 4 %, unlocked from there: the pan jumps by 30 K. */
const present = [
  point(0, 70, true),
  point(2, 75, true),
  point(4, 80, true),
  point(4.01, 110, false),
  point(8, 130, false, false),
]
const limits = {
  sumpC: [
    { rung: 'watch' as const, fromC: 93, name: 'Watch' },
    { rung: 'ease-off' as const, fromC: 104, name: 'Ease off' },
    { rung: 'stop' as const, fromC: 116, name: 'Stop' },
  ],
  coolerInletC: [{ rung: 'ease-off' as const, fromC: 121, name: 'Sustained' }],
}
const data: GradeChartData = {
  series: [
    { id: 'now', name: 'As it is', kind: 'present', points: present },
    { id: 'lock', name: 'If it locks', kind: 'other-lock', points: present.slice(0, 3) },
    { id: 'endless', name: 'Endless climb', kind: 'endless', points: present },
    { id: 's1', name: 'Big plate core', kind: 'set-up', points: present },
    { id: 's2', name: 'Two cores', kind: 'set-up', points: present },
    { id: 's3', name: 'Drive it differently', kind: 'set-up', points: present },
  ],
  limits,
  speedMps: 20.1168,
  climbM: 8046.72,
  held: { grade: 0.0629, endedBy: 'sumpC', maxGrade: 0.2 },
  hillGrade: 0.06,
  maxGrade: 0.12,
}

describe('grade chart', () => {
  it('gives every curve a dash of its own', () => {
    const dashes = gradeDashes(data.series)
    expect(new Set(dashes).size).toBe(data.series.length)
  })

  it('draws the end of lock-up as a break: no stroke joins both sides, and the place is named', () => {
    for (const panel of drawGradeChart(data, { width: 900, formats }).panels) {
      const curve = panel.curves.find(({ id }) => id === 'now')
      const left = panel.xAxis.at(0.04)
      const right = panel.xAxis.at(0.0401)
      for (const { path } of curve?.strokes ?? []) {
        const xs = [...path.matchAll(/[ML](-?[\d.]+),/g)].map((match) => Number(match[1]))
        expect(Math.min(...xs) <= left + 0.06 && Math.max(...xs) >= right + 1).toBe(false)
      }
      expect(panel.breaks.map(({ text }) => text)).toContain('lock-up ends')
    }
  })

  it('weighs the present set-up by its rung and leaves the others even', () => {
    const sump = drawGradeChart(data, { width: 900, formats }).panels.find(({ place }) => place === 'sumpC')
    const now = sump?.curves.find(({ kind }) => kind === 'present')
    expect(now?.strokes.map(({ rung }) => rung)).toEqual(['fine', 'ease-off', 'stop'])
    expect(now?.strokes.at(-1)?.weight).toBe(4)
    const setUp = sump?.curves.find(({ kind }) => kind === 'set-up')
    expect(new Set(setUp?.strokes.map(({ weight }) => weight)).size).toBe(1)
  })

  it('stands side by side on a desk and one under the other on a phone, everything inside the drawing', () => {
    for (const width of [320, 358, 760, 1100]) {
      const drawing = drawGradeChart(data, { width, formats })
      const [first, second] = drawing.panels
      if (width >= 760) expect(second?.top).toBe(first?.top)
      else expect(second?.top).toBeGreaterThan((first?.top ?? 0) + (first?.height ?? 0))
      for (const panel of drawing.panels) {
        expect(panel.width).toBeGreaterThan(150)
        expect(panel.left + panel.width).toBeLessThan(drawing.width)
        expect(panel.top + panel.height).toBeLessThan(drawing.height)
        const rows = panel.curves.map(({ label }) => label?.y ?? 0).sort((a, b) => a - b)
        rows.forEach((y, index) => {
          if (index > 0) expect(y - (rows[index - 1] ?? 0)).toBeGreaterThanOrEqual(15)
        })
      }
    }
  })

  it('leads the label of a curve that leaves through the top back to where it leaves', () => {
    const hot: GradeChartData = {
      ...data,
      series: [
        {
          id: 'now',
          name: 'As it is',
          kind: 'present',
          points: [point(0, 70, false), point(6, 250, false), point(10, 370, false)],
        },
      ],
    }
    const sump = drawGradeChart(hot, { width: 900, formats }).panels.find(({ place }) => place === 'sumpC')
    const label = sump?.curves[0]?.label
    expect(label?.fromY).toBe(sump?.top)
    // It leaves far from its name: an arrow says so, and no line leads across the plot.
    expect(label?.fromX).toBeLessThan(sump?.xAxis.at(0.09) ?? 0)
    expect(label?.leader).toBe(false)
    expect(label?.text).toBe('As it is ↑')
    // The hill of the drive cycle stays in the picture all the same.
    expect(sump?.yAxis.at(250)).toBeGreaterThan(sump?.top ?? Infinity)
  })

  it('names the limit that decides where two names would run into one another', () => {
    const wide: GradeChartData = {
      ...data,
      hillGrade: 0.1,
      series: [
        {
          id: 'now',
          name: 'As it is',
          kind: 'present',
          points: [point(0, 70, false), point(10, 900, false)],
        },
      ],
    }
    const sump = drawGradeChart(wide, { width: 900, formats }).panels.find(({ place }) => place === 'sumpC')
    expect(sump?.limits.map(({ text }) => text.replaceAll('\u00a0', ' '))).toEqual(['', 'Ease off 219', ''])
  })

  it('is titled by what it says, for every way it can end', () => {
    const title = (grade: number | null, endedBy: GradeChartData['held']['endedBy']) =>
      gradeChartTitle({ ...data, held: { grade, endedBy, maxGrade: 0.2 } }, formats).replaceAll('\u00a0', ' ')
    expect(title(0.0629, 'sumpC')).toBe('Holds 6.2 % at 45 mph for 5 mi; steeper, the pan is too hot')
    expect(title(0.0629, 'coolerInletC')).toBe(
      'Holds 6.2 % at 45 mph for 5 mi; steeper, the to-cooler line is too hot',
    )
    expect(title(0.0629, 'speed')).toBe('Holds 6.2 % at 45 mph for 5 mi; steeper, it slows down')
    expect(title(0.2, 'none')).toBe('Holds 20 % at 45 mph for 5 mi, the steepest looked at')
    expect(title(null, 'sumpC')).toBe('Too hot even on the flat at 45 mph for 5 mi')
    expect(title(null, 'speed')).toBe('Does not hold 45 mph even on the flat')
  })

  it('sums itself up in one sentence', () => {
    const summary = gradeChartSummary(data, formats).replaceAll('\u00a0', ' ')
    expect(summary).toBe(
      'From 0 % to 8 % the pan goes from 158 °F to 266 °F, the to-cooler line from 203 °F to 311 °F; the converter unlocks at 4 %; it slows down from 8 %.',
    )
    expect(gradeChartSummary({ ...data, series: [] }, formats)).toContain('no grade')
  })

  it('has a table equal to the series', () => {
    for (const series of data.series) expect(gradeTableRows(series)).toEqual(series.points)
  })

  it('reads every curve at a grade without reading across the break, and says where a truck cannot climb', () => {
    const [now, lock] = readGradeAt(data, 0.03)
    expect(now?.sumpC).toBeCloseTo(77.5, 9)
    expect(now?.nearest?.locked).toBe(true)
    expect(lock?.coolerInletC).toBeCloseTo(102.5, 9)
    const [beyond] = readGradeAt(data, 0.1)
    expect(beyond?.sumpC).toBeUndefined()
  })

  it('draws an empty chart without a stroke and without failing', () => {
    const drawing = drawGradeChart({ ...data, series: [] }, { width: 358, formats })
    expect(drawing.panels).toHaveLength(2)
    expect(drawing.panels.every(({ curves }) => curves.length === 0)).toBe(true)
  })
})
