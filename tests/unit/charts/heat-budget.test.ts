import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { chartFormats } from '../../../shared/charts/formats'
import { drawHeatBudget, heatBudgetTitle, type HeatBudgetData } from '../../../shared/charts/heat-budget'

const data: HeatBudgetData = {
  moment: 'at the top of the climb',
  sources: { converterW: 12_000, gearW: 3000, spinW: 900, pumpW: 1100, shiftW: 0 },
  coolers: [
    { name: 'Radiator tank', heatW: 6000 },
    { name: 'Front cooler', heatW: 4000 },
  ],
  panCaseW: 1000,
}

describe('heat budget', () => {
  it('shows every watt that comes in as gone or as stored', () => {
    const watts = fc.double({ min: 0, max: 60_000, noNaN: true })
    fc.assert(
      fc.property(
        fc.record({ converterW: watts, gearW: watts, spinW: watts, pumpW: watts, shiftW: watts }),
        fc.array(fc.double({ min: -9000, max: 30_000, noNaN: true }), { maxLength: 5 }),
        watts,
        (sources, coolers, panCaseW) => {
          const { rows } = drawHeatBudget({
            moment: '',
            sources,
            coolers: coolers.map((heatW, index) => ({ name: `Cooler ${index}`, heatW })),
            panCaseW,
          })
          const sum = (side: 'in' | 'out') =>
            rows.filter((row) => row.side === side).reduce((total, row) => total + row.heatW, 0)
          // Rows under 5 W are left off, at most a dozen of them.
          expect(Math.abs(sum('in') - sum('out'))).toBeLessThan(60)
          expect(rows.every((row) => row.heatW >= 0 && row.share >= 0 && row.share <= 1)).toBe(true)
        },
      ),
    )
  })

  it('puts a radiator tank that warms the oil on the side that comes in', () => {
    const cold = drawHeatBudget({ ...data, coolers: [{ name: 'Radiator tank', heatW: -800 }] })
    expect(cold.rows.find(({ name }) => name === 'Radiator tank warms the oil')?.side).toBe('in')
  })

  it('is titled by the largest source and whether the heat stays', () => {
    const title = heatBudgetTitle(data, chartFormats('metric')).replaceAll('\u00a0', ' ')
    expect(title).toBe('17.0 kW of heat, 71 % from converter slip; 6.00 kW of it still stays in')
    const balanced = heatBudgetTitle({ ...data, panCaseW: 7000 }, chartFormats('metric'))
    expect(balanced).toContain('as much leaves as comes in')
    const cooling = heatBudgetTitle({ ...data, panCaseW: 12_000 }, chartFormats('metric'))
    expect(cooling).toContain('more leaves than comes in')
    const none = { converterW: 0, gearW: 0, spinW: 0, pumpW: 0, shiftW: 0 }
    expect(heatBudgetTitle({ ...data, sources: none, coolers: [], panCaseW: 0 }, chartFormats('us'))).toBe(
      'No heat is made at this moment',
    )
  })
})
