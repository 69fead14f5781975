import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { LONG_PULL, roadHeight, roadPath } from '../../../utils/grade-line'

describe('a road', () => {
  it('passes through its points', () => {
    for (const point of LONG_PULL) expect(roadHeight(LONG_PULL, point.along)).toBeCloseTo(point.height, 9)
  })

  it('never leaves the heights of the two points around it', () => {
    fc.assert(
      fc.property(fc.double({ min: 0, max: 1, noNaN: true }), (along) => {
        const right = LONG_PULL.findIndex((point) => point.along >= along)
        const neighbors = LONG_PULL.slice(Math.max(0, right - 1), right + 1).map((point) => point.height)
        const height = roadHeight(LONG_PULL, along)
        expect(height).toBeGreaterThanOrEqual(Math.min(...neighbors) - 1e-9)
        expect(height).toBeLessThanOrEqual(Math.max(...neighbors) + 1e-9)
      }),
    )
  })

  it('is level before its first and after its last point, and flat without any', () => {
    const road = [
      { along: 0.2, height: 0.3 },
      { along: 0.8, height: 0.9 },
    ]
    expect(roadHeight(road, 0)).toBe(0.3)
    expect(roadHeight(road, 1)).toBe(0.9)
    expect(roadHeight([], 0.5)).toBe(0)
  })

  it('is drawn upward, inside its box, from end to end', () => {
    const path = roadPath(LONG_PULL, { width: 1000, height: 100, inset: 3 })
    const points = [...path.matchAll(/[ML]([\d.]+) ([\d.]+)/g)].map(
      ([, x, y]) => [Number(x), Number(y)] as const,
    )
    expect(points[0]?.[0]).toBe(0)
    expect(points.at(-1)?.[0]).toBe(1000)
    for (const [, y] of points) {
      expect(y).toBeGreaterThanOrEqual(3)
      expect(y).toBeLessThanOrEqual(97)
    }
    const summit = points.reduce((best, point) => (point[1] < best[1] ? point : best))
    expect(summit[0] / 1000).toBeCloseTo(0.885, 2)
  })

  it('is cut where it is asked to be', () => {
    const size = { width: 100, height: 10, inset: 0 }
    expect(roadPath(LONG_PULL, size, 0.5, 0.75)).toMatch(/^M50\.00 .* L75\.00 [\d.]+$/)
  })
})
