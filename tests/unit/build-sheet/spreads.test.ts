import { describe, expect, it } from 'vitest'
import { ARCHETYPES, createArchetypeSheet } from '../../../shared/build-sheet/archetypes'
import { setSheetValue } from '../../../shared/build-sheet/sheet'
import {
  findSpreadOfPath,
  listSpreads,
  relativeSpreadOf,
  SPREAD_NAMES,
  SPREADS,
  spreadFactor,
} from '../../../shared/build-sheet/spreads'
import { HeatInputSchema, type HeatInput } from '../../../shared/schemas/heat-input'

const sheet = createArchetypeSheet(ARCHETYPES[1]!)
const input: HeatInput = {
  build: ARCHETYPES[1]!.build,
  load: { cargoMassKg: 200, trailerMassKg: 4000, trailerDragAreaM2: 2 },
  duty: {
    ambientC: 35,
    altitudeM: 300,
    segments: [
      { kind: 'steady', speedMps: 20, grade: 0.06, distanceM: 8000 },
      { kind: 'steady', speedMps: 8, grade: 0, surface: 'sand', durationS: 60 },
      { kind: 'idle', rollingResistance: 0.03, durationS: 60 },
    ],
  },
  calibration: { coolerScale: 0.9 },
}

describe('the eleven doubts', () => {
  it('have the widths of the method', () => {
    // Judgement, as the method page states them; one standard deviation of a log-normal.
    expect(listSpreads()).toEqual({
      mass: 0.05,
      dragArea: 0.08,
      rollingResistance: 0.15,
      stallSpeed: 0.06,
      gearLosses: 0.15,
      underbodyRise: 0.4,
      coolerUa: 0.12,
      faceVelocity: 0.2,
      coolerFlow: 0.15,
      generatedHeat: 0.08,
      coolantHeat: 0.15,
    })
    expect(listSpreads(sheet)).toEqual(listSpreads())
  })

  it('are log-normal about a median of 1', () => {
    expect(spreadFactor(0.4, 0)).toBe(1)
    expect(spreadFactor(0.4, 1) * spreadFactor(0.4, -1)).toBeCloseTo(1, 12)
    expect(Math.log(spreadFactor(0.05, 2))).toBeCloseTo(0.1, 12)
  })

  it.each(SPREAD_NAMES)('%s: a factor of 1 changes nothing the model sees', (name) => {
    const same = SPREADS[name].apply(input, 1)
    expect(HeatInputSchema.safeParse(same).success).toBe(true)
    expect(same.build.vehicle).toEqual(input.build.vehicle)
    expect(same.load).toEqual(input.load)
    expect(same.build.converter).toEqual(input.build.converter)
    same.build.transmission.gears.forEach((gear, index) =>
      expect(gear.efficiency).toBeCloseTo(input.build.transmission.gears[index]?.efficiency ?? 0, 12),
    )
  })

  it.each(SPREAD_NAMES)('%s: two deviations either way stay an input the model takes', (name) => {
    const copy = structuredClone(input)
    for (const deviations of [-2, 2]) {
      const moved = SPREADS[name].apply(input, spreadFactor(SPREADS[name].relative, deviations))
      expect(HeatInputSchema.safeParse(moved).error?.issues).toBeUndefined()
      expect(moved).not.toEqual(input)
    }
    expect(input).toEqual(copy)
  })

  it('move what they are called after', () => {
    const by = 1.2
    expect(SPREADS.mass.apply(input, by).build.vehicle.massKg).toBeCloseTo(input.build.vehicle.massKg * by, 9)
    expect(SPREADS.mass.apply(input, by).load).toEqual({
      cargoMassKg: 240,
      trailerMassKg: 4800,
      trailerDragAreaM2: 2,
    })
    expect(SPREADS.dragArea.apply(input, by).load?.trailerDragAreaM2).toBeCloseTo(2.4, 9)
    const rolling = SPREADS.rollingResistance.apply(input, by).duty.segments
    expect(rolling.map(({ rollingResistance }) => rollingResistance)).toEqual([
      expect.closeTo(0.01 * by, 9),
      expect.closeTo(0.2 * by, 9),
      expect.closeTo(0.03 * by, 9),
    ])
    expect(SPREADS.stallSpeed.apply(input, by).build.converter.stallRpm).toBeCloseTo(
      input.build.converter.stallRpm * by,
      9,
    )
    const losses = SPREADS.gearLosses.apply(input, by).build.transmission.gears
    losses.forEach((gear, index) =>
      expect(1 - gear.efficiency).toBeCloseTo(
        (1 - (input.build.transmission.gears[index]?.efficiency ?? 0)) * by,
        9,
      ),
    )
    expect(SPREADS.underbodyRise.apply(input, by).build.cooling.underbodyRiseK).toBeCloseTo(18, 9)
    expect(SPREADS.coolerUa.apply(input, by).calibration).toEqual({ coolerScale: expect.closeTo(1.08, 9) })
    expect(SPREADS.coolerFlow.apply(input, by).calibration).toEqual({ coolerScale: 0.9, flowScale: by })
    expect(SPREADS.generatedHeat.apply(input, by).calibration).toEqual({ coolerScale: 0.9, heatScale: by })
    const { stack } = SPREADS.faceVelocity.apply(input, by).build.cooling
    expect(stack.ramFraction).toBeCloseTo(0.18 * by, 9)
    expect(stack.fan.faceVelocityMps).toBeCloseTo(4.8 * by, 9)
    expect(SPREADS.coolantHeat.apply(input, by).build.engine.coolantHeatRatio).toBeCloseTo(0.65 * by, 9)
  })

  it('start from the model’s own defaults where the build is silent', () => {
    const { underbodyRiseK: _rise, ...cooling } = input.build.cooling
    const { coolantHeatRatio: _ratio, ...engine } = input.build.engine
    const silent = { ...input, build: { ...input.build, cooling, engine } }
    expect(SPREADS.underbodyRise.apply(silent, 2).build.cooling.underbodyRiseK).toBeCloseTo(30, 9)
    expect(SPREADS.coolantHeat.apply(silent, 2).build.engine.coolantHeatRatio).toBeCloseTo(1.3, 9)
  })
})

describe('what was measured', () => {
  it('narrows its doubt, and a stated spread counts before that', () => {
    const measured = setSheetValue(sheet, { path: 'vehicle.massKg', value: 3700, origin: 'measured' })
    expect(listSpreads(measured).mass).toBe(0.005)
    const stated = setSheetValue(sheet, {
      path: 'vehicle.massKg',
      value: 3700,
      origin: 'typical',
      relativeSpread: 0.08,
    })
    expect(listSpreads(stated).mass).toBe(0.08)
  })

  it('does not narrow because a maker said so', () => {
    const maker = setSheetValue(sheet, { path: 'converter.stallRpm', value: 1900, origin: 'maker' })
    expect(listSpreads(maker).stallSpeed).toBe(0.06)
  })

  it('speaks for all gears only when all were measured', () => {
    const one = setSheetValue(sheet, {
      path: 'transmission.gears.0.efficiency',
      value: 0.96,
      origin: 'measured',
    })
    expect(listSpreads(one).gearLosses).toBe(0.15)
    const all = [0, 1, 2, 3, 4, 5].reduce(
      (done, gear) =>
        setSheetValue(done, {
          path: `transmission.gears.${gear}.efficiency`,
          value: 0.96,
          origin: 'measured',
        }),
      sheet,
    )
    expect(listSpreads(all).gearLosses).toBe(SPREADS.gearLosses.measuredRelative)
  })

  it('belongs to the doubt of its path', () => {
    expect(findSpreadOfPath('cooling.coolers.3.rating.heatW')?.name).toBe('coolerUa')
    expect(findSpreadOfPath('cooling.coolers.3.rating.oilInC')).toBeUndefined()
    expect(findSpreadOfPath('vehicle')).toBeUndefined()
    expect(relativeSpreadOf({ path: 'axle.ratio', value: 4.1, origin: 'maker' })).toBeUndefined()
  })
})
