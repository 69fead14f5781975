import { describe, expect, it } from 'vitest'
import { ARCHETYPES, createArchetypeSheet } from '../../../shared/build-sheet/archetypes'
import { simpleBand } from '../../../shared/build-sheet/band'
import { setSheetValue } from '../../../shared/build-sheet/sheet'
import { listSpreads, SPREAD_NAMES, type RelativeSpreads } from '../../../shared/build-sheet/spreads'
import { AppError } from '../../../shared/errors'
import { estimate } from '../../../shared/heat'
import type { HeatInput } from '../../../shared/schemas/heat-input'

const input: HeatInput = {
  build: ARCHETYPES[0]!.build,
  load: { trailerMassKg: 1500, trailerDragAreaM2: 1.3 },
  duty: {
    ambientC: 35,
    altitudeM: 300,
    start: { sumpC: 80, coolantC: 92, axleC: 60 },
    segments: [{ kind: 'steady', speedMps: 20, grade: 0.05, distanceM: 6000 }],
  },
}
const none = Object.fromEntries(SPREAD_NAMES.map((name) => [name, 0])) as RelativeSpreads

describe('the simple band', () => {
  it('stands around the answer itself', () => {
    const { peakSumpC } = simpleBand({ input })
    expect(peakSumpC.value).toBe(estimate(input).peakSumpC)
    expect(peakSumpC.low).toBeLessThan(peakSumpC.value)
    expect(peakSumpC.high - peakSumpC.value).toBeCloseTo(peakSumpC.value - peakSumpC.low, 9)
    expect(peakSumpC.open).toEqual([])
    expect(peakSumpC.parts.map(({ share }) => share).reduce((a, b) => a + b)).toBeCloseTo(1, 9)
    const sizes = peakSumpC.parts.map(({ effect }) => Math.abs(effect))
    expect(sizes).toEqual([...sizes].sort((a, b) => b - a))
  })

  it('adds independent doubts as a root of squares', () => {
    // A measure whose exact spread is known: product of powers of two scales, each log-normal.
    const measure = ({ calibration }: HeatInput) => ({
      logarithm: 3 * Math.log(calibration?.heatScale ?? 1) + 4 * Math.log(calibration?.flowScale ?? 1),
    })
    const { logarithm } = simpleBand({
      input,
      measure,
      spreads: { ...none, generatedHeat: 0.1, coolerFlow: 0.1 },
    })
    // sqrt(0.3² + 0.4²) = 0.5; 1.28 standard deviations to the 90th percentile of a normal distribution (1.2816).
    expect(logarithm.high).toBeCloseTo(1.28 * 0.5, 9)
    expect(logarithm.low).toBeCloseTo(-1.28 * 0.5, 9)
    expect(logarithm.parts.slice(0, 2).map(({ name, share }) => [name, share])).toEqual([
      ['coolerFlow', expect.closeTo(0.64, 9)],
      ['generatedHeat', expect.closeTo(0.36, 9)],
    ])
  })

  it('is nothing where nothing is in doubt', () => {
    const { peakCoolerInletC } = simpleBand({ input, spreads: none })
    expect(peakCoolerInletC.low).toBe(peakCoolerInletC.high)
    expect(peakCoolerInletC.parts.every(({ share }) => share === 0)).toBe(true)
  })

  it('narrows with a scale ticket', () => {
    const sheet = createArchetypeSheet(ARCHETYPES[0]!)
    const weighed = setSheetValue(sheet, { path: 'vehicle.massKg', value: 2240, origin: 'measured' })
    const wide = simpleBand({ input, spreads: listSpreads(sheet) }).peakSumpC
    const narrow = simpleBand({ input, spreads: listSpreads(weighed) }).peakSumpC
    expect(narrow.high - narrow.low).toBeLessThan(wide.high - wide.low)
  })

  it('turns round where one side is refused, and says what it could not move', () => {
    const refuseAbove = (limit: number) => (moved: HeatInput) => {
      const mass = moved.build.vehicle.massKg
      if (mass > limit) throw new AppError('cannot_climb_grade')
      return { mass }
    }
    const { massKg } = input.build.vehicle
    const turned = simpleBand({
      input,
      measure: refuseAbove(massKg * 1.01),
      spreads: { ...none, mass: 0.05 },
    })
    expect(turned.mass.parts[0]?.effect).toBeCloseTo(massKg * (1 - Math.exp(-0.05)), 6)
    expect(turned.mass.open).toEqual([])
    const narrowOnly = (moved: HeatInput) => {
      if (moved.build.vehicle.massKg !== massKg) throw new AppError('cannot_climb_grade')
      return { mass: 1 }
    }
    expect(simpleBand({ input, measure: narrowOnly, spreads: { ...none, mass: 0.05 } }).mass.open).toEqual([
      'mass',
    ])
  })

  it('lets the model’s own refusal of the input through', () => {
    const impossible = { ...input, load: { trailerMassKg: 200_000, trailerDragAreaM2: 2 } }
    expect(() => simpleBand({ input: impossible })).toThrow(AppError)
  })

  it('does not hide a fault that is not a refusal', () => {
    const broken = (moved: HeatInput) => {
      if (moved.build.vehicle.massKg !== input.build.vehicle.massKg) throw new TypeError('broken')
      return { one: 1 }
    }
    expect(() => simpleBand({ input, measure: broken })).toThrow(TypeError)
  })
})
