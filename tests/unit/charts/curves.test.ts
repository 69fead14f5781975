import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { interpolateAt, linePath, splitAtBreaks, splitByRung, thinCurve } from '../../../shared/charts/curves'
import { rungAt, type RungLimit } from '../../../shared/charts/rungs'

const LIMITS: RungLimit[] = [
  { rung: 'watch', fromC: 93, name: 'Watch' },
  { rung: 'ease-off', fromC: 104, name: 'Ease off' },
  { rung: 'stop', fromC: 116, name: 'Stop' },
]
const curve = fc
  .array(fc.double({ min: 40, max: 180, noNaN: true }), { minLength: 2, maxLength: 40 })
  .map((temps) => temps.map((y, x) => ({ x, y })))

describe('rungAt', () => {
  it('begins a rung on its limit, and the hottest one reached counts', () => {
    expect(rungAt(92.999, LIMITS)).toBe('fine')
    expect(rungAt(93, LIMITS)).toBe('watch')
    expect(rungAt(104, LIMITS)).toBe('ease-off')
    expect(rungAt(200, LIMITS)).toBe('stop')
    expect(rungAt(200, [])).toBe('fine')
  })
})

describe('splitByRung', () => {
  it('puts the crossing where a straight line passes the limit, and lets the strokes meet there', () => {
    const stretches = splitByRung(
      [
        { x: 0, y: 83 },
        { x: 10, y: 103 },
      ],
      LIMITS,
    )
    expect(stretches.map(({ rung }) => rung)).toEqual(['fine', 'watch'])
    expect(stretches[0]?.points.at(-1)).toEqual({ x: 5, y: 93 })
    expect(stretches[1]?.points[0]).toEqual({ x: 5, y: 93 })
  })

  it('passes several limits in one step, in the order of travel, also on the way down', () => {
    const down = splitByRung(
      [
        { x: 0, y: 120 },
        { x: 1, y: 80 },
      ],
      LIMITS,
    )
    expect(down.map(({ rung }) => rung)).toEqual(['stop', 'ease-off', 'watch', 'fine'])
  })

  it('keeps every point, joins its strokes, and gives each the rung its middle stands on', () => {
    fc.assert(
      fc.property(curve, (points) => {
        const stretches = splitByRung(points, LIMITS)
        const drawn = stretches.flatMap((stretch) => stretch.points)
        for (const point of points) expect(drawn).toContainEqual(point)
        for (let index = 1; index < stretches.length; index += 1)
          expect(stretches[index]?.points[0]).toEqual(stretches[index - 1]?.points.at(-1))
        for (const { rung, points: own } of stretches)
          for (let index = 1; index < own.length; index += 1) {
            const [a, b] = [own[index - 1]?.y ?? 0, own[index]?.y ?? 0]
            if (Math.abs(a - b) > 1e-6) expect(rungAt((a + b) / 2, LIMITS)).toBe(rung)
          }
      }),
    )
  })
})

describe('splitAtBreaks', () => {
  it('loses no item and breaks exactly where it is told', () => {
    expect(splitAtBreaks([1, 2, 5, 6, 9], (a, b) => b - a > 1)).toEqual([[1, 2], [5, 6], [9]])
    expect(splitAtBreaks([], () => true)).toEqual([])
  })
})

describe('thinCurve', () => {
  it('never draws a peak lower than it was, keeps the ends and the order', () => {
    fc.assert(
      fc.property(
        fc.array(fc.double({ min: -50, max: 250, noNaN: true }), { minLength: 1, maxLength: 600 }),
        fc.integer({ min: 4, max: 120 }),
        (temps, most) => {
          const points = temps.map((y, x) => ({ x, y }))
          const thin = thinCurve(points, most, (point) => point.y)
          expect(thin.length).toBeLessThanOrEqual(Math.max(most, 1))
          expect(thin[0]).toEqual(points[0])
          expect(thin.at(-1)).toEqual(points.at(-1))
          expect(Math.max(...thin.map(({ y }) => y))).toBe(Math.max(...temps))
          expect(Math.min(...thin.map(({ y }) => y))).toBe(Math.min(...temps))
          expect(thin.every((point, index) => index === 0 || point.x > (thin[index - 1]?.x ?? 0))).toBe(true)
        },
      ),
    )
  })
})

describe('interpolateAt', () => {
  it('reads between points and nothing outside them', () => {
    const points = [
      { x: 0, y: 10 },
      { x: 2, y: 20 },
    ]
    expect(interpolateAt(points, 1)).toBe(15)
    expect(interpolateAt(points, 2)).toBe(20)
    expect(interpolateAt(points, 2.1)).toBeUndefined()
    expect(interpolateAt([], 0)).toBeUndefined()
  })
})

describe('linePath', () => {
  it('draws nothing for a single point', () => {
    expect(linePath([{ x: 1, y: 2 }])).toBe('')
    expect(
      linePath([
        { x: 1, y: 2 },
        { x: 3.04, y: 4 },
      ]),
    ).toBe('M1,2L3,4')
  })
})
