import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { shortenName, spreadLabels } from '../../../shared/charts/labels'

describe('spreadLabels', () => {
  it('leaves labels that have room where they want to be', () => {
    const placed = spreadLabels(
      [
        { id: 'a', y: 20, height: 16 },
        { id: 'b', y: 60, height: 16 },
      ],
      0,
      100,
    )
    expect(placed.get('a')).toBe(20)
    expect(placed.get('b')).toBe(60)
  })

  it('shares the way when two want the same place', () => {
    const placed = spreadLabels(
      [
        { id: 'a', y: 50, height: 16 },
        { id: 'b', y: 50, height: 16 },
      ],
      0,
      100,
    )
    expect(placed.get('a')).toBe(42)
    expect(placed.get('b')).toBe(58)
  })

  it('covers none, keeps the order, and stays inside whenever all fit', () => {
    fc.assert(
      fc.property(fc.array(fc.double({ min: -50, max: 250, noNaN: true }), { maxLength: 10 }), (wishes) => {
        const labels = wishes.map((y, index) => ({ id: String(index), y, height: 17 }))
        const placed = spreadLabels(labels, 0, 200)
        const sorted = [...labels].sort((a, b) => a.y - b.y).map(({ id }) => placed.get(id) ?? Number.NaN)
        for (const middle of sorted) {
          expect(middle).toBeGreaterThanOrEqual(17 / 2 - 1e-9)
          expect(middle).toBeLessThanOrEqual(200 - 17 / 2 + 1e-9)
        }
        for (let index = 1; index < sorted.length; index += 1)
          expect((sorted[index] ?? 0) - (sorted[index - 1] ?? 0)).toBeGreaterThanOrEqual(17 - 1e-6)
      }),
    )
  })

  it('lets labels touch rather than leave when there are too many', () => {
    const placed = spreadLabels(
      Array.from({ length: 12 }, (_, index) => ({ id: String(index), y: 50, height: 17 })),
      0,
      100,
    )
    expect(Math.min(...placed.values())).toBeGreaterThan(0)
    expect(Math.max(...placed.values())).toBeLessThan(100)
  })
})

describe('shortenName', () => {
  it('cuts long names at the end and leaves short ones', () => {
    expect(shortenName('Pan', 10)).toBe('Pan')
    expect(shortenName('Big plate core in front of the condenser', 12)).toBe('Big plate c…')
  })
})
