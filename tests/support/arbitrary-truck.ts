import fc from 'fast-check'
import type {
  AirCooler,
  Build,
  Cooler,
  Fluid,
  HeatInput,
  Load,
  Segment,
  TankCooler,
} from '#shared/schemas/heat-input'

/**
 * Random trucks and duties that the input schema accepts and that somebody could own: the numbers hang together
 * (torque with power, stall with idle, a rating with the flows it was taken at), everything else is free. Draws are
 * uniform over a grid, because fast-check's doubles are uniform over bit patterns and would crowd near zero.
 */

const GRID = 20_000

/** A number drawn evenly from a closed range; shrinks toward `min`. */
export function evenly(min: number, max: number): fc.Arbitrary<number> {
  return fc.integer({ min: 0, max: GRID }).map((step) => min + ((max - min) * step) / GRID)
}

/** A number drawn evenly in its logarithm; shrinks toward `min`. */
export function evenlyInLog(min: number, max: number): fc.Arbitrary<number> {
  return evenly(Math.log(min), Math.log(max)).map(Math.exp)
}

/** An object whose `required` fields are always there and whose other fields may be missing. */
function record<T extends object, K extends keyof T>(
  fields: { [F in keyof T]-?: fc.Arbitrary<NonNullable<T[F]>> },
  required: readonly K[],
) {
  return fc.record(fields, { requiredKeys: [...required] }) as unknown as fc.Arbitrary<T>
}

const efficiency = evenly(0.92, 1)

const engine = fc
  .record({
    fuel: fc.constantFrom('petrol' as const, 'diesel' as const),
    induction: fc.constantFrom('natural' as const, 'forced' as const),
    idleRpm: evenly(550, 900),
    torqueAboveIdle: evenly(600, 3000),
    powerAboveTorque: evenly(0, 2000),
    redlineAbovePower: evenly(0, 1200),
    peakTorqueNm: evenly(180, 1200),
    powerShare: evenly(0.6, 1),
    curve: fc.option(
      fc.array(fc.record({ gap: evenly(0.1, 1), share: evenly(0.4, 1) }), { minLength: 2, maxLength: 6 }),
      { nil: undefined, freq: 3 },
    ),
    coolantHeatRatio: fc.option(evenly(0.4, 1.2), { nil: undefined, freq: 4 }),
  })
  .map((draw): Build['engine'] => {
    const peakTorqueRpm = draw.idleRpm + draw.torqueAboveIdle
    const peakPowerRpm = peakTorqueRpm + draw.powerAboveTorque
    const redlineRpm = peakPowerRpm + draw.redlineAbovePower
    const made: Build['engine'] = {
      fuel: draw.fuel,
      induction: draw.induction,
      peakTorqueNm: draw.peakTorqueNm,
      peakTorqueRpm,
      peakPowerW: draw.powerShare * draw.peakTorqueNm * ((peakPowerRpm * Math.PI) / 30),
      peakPowerRpm,
      idleRpm: draw.idleRpm,
      redlineRpm,
    }
    if (draw.curve !== undefined) {
      const whole = draw.curve.reduce((sum, { gap }) => sum + gap, 0)
      let rpm = draw.idleRpm
      made.curve = draw.curve.map(({ gap, share }) => {
        const point = { rpm, torqueNm: share * draw.peakTorqueNm }
        rpm += (gap / whole) * (redlineRpm - draw.idleRpm)
        return point
      })
    }
    if (draw.coolantHeatRatio !== undefined) made.coolantHeatRatio = draw.coolantHeatRatio
    return made
  })

const gears = fc
  .record({
    first: evenly(2.2, 5),
    last: evenly(0.55, 1.1),
    efficiency,
    others: fc.array(fc.record({ step: evenly(0.5, 1), efficiency }), { maxLength: 7 }),
  })
  .map(({ first, last, efficiency: firstEfficiency, others }) => {
    // From first to last gear in steps whose logarithms are in the drawn proportions.
    const whole = others.reduce((sum, { step }) => sum + step, 0)
    let ratio = first
    return [
      { ratio, efficiency: firstEfficiency },
      ...others.map((gear) => {
        ratio *= (last / first) ** (gear.step / whole)
        return { ratio, efficiency: gear.efficiency }
      }),
    ]
  })

const fluid: fc.Arbitrary<Fluid> = fc.oneof(
  fc
    .constantFrom('atf-standard' as const, 'atf-low' as const, 'atf-ultra-low' as const)
    .map((name) => ({ class: name })),
  // Two-point viscosities as real oils have them, from thin transmission fluid to a heavy universal oil.
  fc
    .record({ kv40: evenly(18, 110), bend: evenly(0.85, 1.15), density: evenly(820, 890) })
    .map(({ kv40, bend, density }) => ({
      kv40MmSqS: kv40,
      kv100MmSqS: kv40 ** 0.55 * bend,
      density15KgM3: density,
    })),
)

const FLUID_DENSITY15 = { 'atf-standard': 855, 'atf-low': 850, 'atf-ultra-low': 845 } as const

/** Heat a rating may claim: `effectiveness` of what the smaller stream could carry at the rating's conditions. */
function heatOfRating(effectiveness: number, oilCapacity: number, sinkCapacity: number, differenceK: number) {
  return effectiveness * Math.min(oilCapacity, sinkCapacity) * differenceK
}

/** Oil capacity rate of a rating, from the density and heat capacity lines of the model. */
function ratedOilCapacity(density15: number, oilFlowM3S: number, oilInC: number) {
  return (density15 - 0.62 * (oilInC - 15)) * oilFlowM3S * (1800 + 4 * oilInC)
}

interface CoolerDraw {
  construction: AirCooler['construction'] | 'in-tank'
  position: AirCooler['position']
  faceAreaM2: number
  effectiveness: number
  inletDifferenceK: number
  oilFlowM3S: number
  airVelocityMps: number
  coolantFlowM3S: number
  pressureDropPa: number
  oilInC: number | undefined
  parallel: boolean | undefined
  blockedFraction: number | undefined
  airShare: number | undefined
  ramFraction: number | undefined
  fanFlowM3S: number | undefined
}

const coolerDraw: fc.Arbitrary<CoolerDraw> = fc.record({
  construction: fc.constantFrom(
    'stacked-plate' as const,
    'plate-fin' as const,
    'tube-fin' as const,
    'in-tank' as const,
  ),
  position: fc.constantFrom('ahead-of-condenser' as const, 'behind-condenser' as const, 'remote' as const),
  faceAreaM2: evenly(0.01, 0.14),
  effectiveness: evenly(0.1, 0.8),
  inletDifferenceK: evenly(20, 80),
  oilFlowM3S: evenly(0.6e-4, 2.5e-4),
  airVelocityMps: evenly(1.5, 8),
  coolantFlowM3S: evenly(0.8e-3, 3e-3),
  pressureDropPa: evenlyInLog(4e3, 9e4),
  oilInC: fc.option(evenly(70, 125), { nil: undefined }),
  parallel: fc.option(fc.boolean(), { nil: undefined, freq: 3 }),
  blockedFraction: fc.option(evenly(0, 0.9), { nil: undefined, freq: 3 }),
  airShare: fc.option(evenly(0.2, 0.85), { nil: undefined, freq: 3 }),
  ramFraction: fc.option(evenly(0, 0.5), { nil: undefined }),
  fanFlowM3S: fc.option(evenly(0, 0.5), { nil: undefined }),
})

function makeCooler(draw: CoolerDraw, index: number, density15: number): Cooler {
  const oil = ratedOilCapacity(density15, draw.oilFlowM3S, draw.oilInC ?? 93.3)
  const shared = {
    inletDifferenceK: draw.inletDifferenceK,
    oilFlowM3S: draw.oilFlowM3S,
    pressureDropPa: draw.pressureDropPa,
    ...(draw.oilInC === undefined ? {} : { oilInC: draw.oilInC }),
  }
  const parallel = draw.parallel === undefined ? {} : { parallelWithPrevious: draw.parallel }
  if (draw.construction === 'in-tank') {
    const coolant = draw.coolantFlowM3S * 1035 * 3600
    const made: TankCooler = {
      name: `cooler ${index + 1}`,
      construction: 'in-tank',
      position: 'radiator-tank',
      ...parallel,
      rating: {
        heatW: heatOfRating(draw.effectiveness, oil, coolant, draw.inletDifferenceK),
        ...shared,
        coolantFlowM3S: draw.coolantFlowM3S,
      },
    }
    return made
  }
  const air = 1.184 * draw.faceAreaM2 * draw.airVelocityMps * 1006
  const made: AirCooler = {
    name: `cooler ${index + 1}`,
    construction: draw.construction,
    position: draw.position,
    faceAreaM2: draw.faceAreaM2,
    ...parallel,
    rating: {
      heatW: heatOfRating(draw.effectiveness, oil, air, draw.inletDifferenceK),
      ...shared,
      airVelocityMps: draw.airVelocityMps,
    },
  }
  if (draw.blockedFraction !== undefined) made.blockedFraction = draw.blockedFraction
  if (draw.airShare !== undefined) made.airShare = draw.airShare
  if (draw.position === 'remote') {
    if (draw.ramFraction !== undefined) made.ramFraction = draw.ramFraction
    if (draw.fanFlowM3S !== undefined) made.fanFlowM3S = draw.fanFlowM3S
  }
  return made
}

const radiator = fc
  .record({
    faceAreaM2: evenly(0.2, 0.6),
    effectiveness: evenly(0.2, 0.8),
    inletDifferenceK: evenly(40, 80),
    airVelocityMps: evenly(2, 9),
    coolantFlowM3S: evenly(1e-3, 4e-3),
    pumpRpm: fc.option(evenly(2000, 5000), { nil: undefined }),
    thermostat: fc.option(
      fc
        .record({ openC: evenly(70, 95), span: evenly(4, 15) })
        .map(({ openC, span }) => ({ openC, fullC: openC + span })),
      { nil: undefined },
    ),
  })
  .map((draw): Build['cooling']['radiator'] => {
    const air = 1.184 * draw.faceAreaM2 * draw.airVelocityMps * 1006
    const coolant = draw.coolantFlowM3S * 1035 * 3600
    return {
      faceAreaM2: draw.faceAreaM2,
      rating: {
        heatW: heatOfRating(draw.effectiveness, coolant, air, draw.inletDifferenceK),
        inletDifferenceK: draw.inletDifferenceK,
        airVelocityMps: draw.airVelocityMps,
        coolantFlowM3S: draw.coolantFlowM3S,
        ...(draw.pumpRpm === undefined ? {} : { pumpRpm: draw.pumpRpm }),
      },
      ...(draw.thermostat === undefined ? {} : { thermostat: draw.thermostat }),
    }
  })

const lines = record<Build['cooling']['lines'], 'innerDiameterM' | 'lengthM'>(
  {
    innerDiameterM: evenly(0.006, 0.016),
    lengthM: evenly(0.5, 12),
    fittingsK: evenly(0, 20),
    roughnessM: evenly(0, 5e-5),
  },
  ['innerDiameterM', 'lengthM'],
)

const stack = fc.record(
  {
    ramFraction: evenly(0.05, 0.35),
    blockedFraction: evenly(0, 0.8),
    fan: fc.record({
      drive: fc.constantFrom('engine' as const, 'electric' as const),
      faceVelocityMps: evenly(0, 5),
    }),
  },
  { requiredKeys: ['fan'] },
)

const transferCase = record<
  Build['transferCase'],
  'highRatio' | 'lowRatio' | 'efficiencyHigh' | 'efficiencyLow'
>(
  {
    highRatio: fc.oneof(fc.constant(1), evenly(0.9, 1.3)),
    lowRatio: evenly(1.5, 4),
    efficiencyHigh: efficiency,
    efficiencyLow: efficiency,
    surfaceM2: evenly(0.1, 1),
    heatCapacityJK: evenly(8000, 60_000),
  },
  ['highRatio', 'lowRatio', 'efficiencyHigh', 'efficiencyLow'],
)

const axle = record<Build['axle'], 'ratio' | 'efficiency'>(
  {
    ratio: evenly(2.7, 5.5),
    efficiency,
    surfaceM2: evenly(0.3, 2),
    heatCapacityJK: evenly(10_000, 90_000),
  },
  ['ratio', 'efficiency'],
)

/**
 * Highest coupling point at which a torque ratio that falls in a straight line from TR0 to 1 never delivers more power than
 * it takes: SR (1 + a (1 - SR/c)) has its maximum (1 + a)² c / 4a inside when a = TR0 - 1 > 1.
 */
export function couplingLimit(stallTorqueRatio: number): number {
  const a = stallTorqueRatio - 1
  return a <= 1 ? 1 : (4 * a) / (1 + a) ** 2
}

/** Which parts of a truck a property needs to hold still. */
export interface TruckShape {
  /** A bypass may be drawn. */
  bypass?: boolean
  minCoolers?: number
  maxCoolers?: number
}

/** A truck that hangs together. */
export function arbitraryBuild(shape: TruckShape = {}): fc.Arbitrary<Build> {
  return fc
    .record({
      vehicle: fc.record({
        massKg: evenly(1200, 5500),
        dragAreaM2: evenly(0.8, 4),
        tyreRadiusM: evenly(0.3, 0.5),
      }),
      engine,
      converter: fc.record({
        stallPlace: evenly(0.25, 0.8),
        stallTorqueShare: fc.option(evenly(0.4, 1.1), { nil: undefined, freq: 2 }),
        stallTorqueRatio: fc.oneof(fc.constant(1), evenly(1.5, 2.6)),
        optional: record<{ couplingPoint?: number; heatCapacityJK?: number; oilShare?: number }, never>(
          {
            couplingPoint: evenly(0.75, 1),
            heatCapacityJK: evenly(4000, 25_000),
            oilShare: evenly(0, 0.7),
          },
          [],
        ),
      }),
      lockup: fc.option(
        fc.record({
          fitted: fc.boolean(),
          minGearPlace: evenly(0, 1),
          minSpeedMps: evenly(0, 25),
          maxTurbineTorqueNm: fc.option(evenly(60, 1500), { nil: undefined }),
          slipRpm: fc.option(evenly(0, 80), { nil: undefined }),
        }),
        { nil: undefined, freq: 5 },
      ),
      gears,
      fluid,
      transmission: fc.record(
        {
          fluidVolumeM3: evenly(0.006, 0.02),
          dryMassKg: evenly(50, 160),
          caseAreaM2: evenly(0.3, 1.5),
          shiftStyle: fc.constantFrom('tow' as const, 'economy' as const),
          ratedInputTorqueNm: evenly(150, 1500),
          pump: fc
            .record({ displacement: evenly(10e-6, 30e-6), low: evenly(0.3e6, 0.8e6), more: evenly(0, 1.2e6) })
            .map(({ displacement, low, more }) => ({
              displacementM3PerRev: displacement,
              linePressureMinPa: low,
              linePressureMaxPa: low + more,
            })),
        },
        { requiredKeys: ['fluidVolumeM3', 'dryMassKg'] },
      ),
      transferCase,
      axle,
      coolers: fc.array(coolerDraw, {
        minLength: shape.minCoolers ?? 0,
        maxLength: shape.maxCoolers ?? 4,
      }),
      lines,
      feed: fc.option(
        fc.record({
          pressureMaxPa: evenly(0.8e5, 5e5),
          saturationRpm: evenly(600, 3000),
          openFlowM3S: evenly(0.8e-4, 4e-4),
        }),
        { nil: undefined },
      ),
      bypass:
        shape.bypass === false
          ? fc.constant(undefined)
          : fc.option(
              fc
                .record({ openC: evenly(40, 90), span: evenly(1, 25) })
                .map(({ openC, span }) => ({ openC, fullC: openC + span })),
              { nil: undefined, freq: 2 },
            ),
      stack,
      radiator,
      rest: record<{ condenserW?: number; underbodyRiseK?: number; coolantHeatCapacityJK?: number }, never>(
        {
          condenserW: evenly(0, 10_000),
          underbodyRiseK: evenly(0, 40),
          coolantHeatCapacityJK: evenly(60_000, 300_000),
        },
        [],
      ),
    })
    .map((draw): Build => {
      const density15 =
        draw.fluid.class === undefined ? (draw.fluid.density15KgM3 ?? 855) : FLUID_DENSITY15[draw.fluid.class]
      const { idleRpm, redlineRpm, peakTorqueNm } = draw.engine
      const converter: Build['converter'] = {
        stallRpm: idleRpm + draw.converter.stallPlace * (Math.min(redlineRpm, 3500) - idleRpm),
        stallTorqueRatio: draw.converter.stallTorqueRatio,
        ...draw.converter.optional,
      }
      // TR·SR would pass 1 between stall and coupling: a converter that makes power.
      if (converter.couplingPoint !== undefined)
        converter.couplingPoint = Math.min(converter.couplingPoint, couplingLimit(converter.stallTorqueRatio))
      if (draw.converter.stallTorqueShare !== undefined)
        converter.stallTorqueNm = draw.converter.stallTorqueShare * peakTorqueNm
      if (draw.lockup !== undefined) {
        const { fitted, minGearPlace, minSpeedMps, maxTurbineTorqueNm, slipRpm } = draw.lockup
        converter.lockup = {
          fitted,
          minGear: 1 + Math.round(minGearPlace * (draw.gears.length - 1)),
          minSpeedMps,
          ...(maxTurbineTorqueNm === undefined ? {} : { maxTurbineTorqueNm }),
          ...(slipRpm === undefined ? {} : { slipRpm }),
        }
      }
      return {
        vehicle: draw.vehicle,
        engine: draw.engine,
        converter,
        transmission: { gears: draw.gears, fluid: draw.fluid, ...draw.transmission },
        transferCase: draw.transferCase,
        axle: draw.axle,
        cooling: {
          coolers: draw.coolers.map((cooler, index) => makeCooler(cooler, index, density15)),
          lines: draw.lines,
          ...(draw.feed === undefined ? {} : { feed: draw.feed }),
          ...(draw.bypass === undefined ? {} : { bypass: draw.bypass }),
          stack: draw.stack,
          radiator: draw.radiator,
          ...draw.rest,
        },
      }
    })
}

const road = {
  surface: fc.constantFrom(
    'pavement' as const,
    'gravel' as const,
    'dirt' as const,
    'rock' as const,
    'mud' as const,
    'sand' as const,
  ),
  rollingResistance: evenly(0.005, 0.1),
  headwindMps: evenly(-15, 15),
  range: fc.constantFrom('high' as const, 'low' as const),
  topGearPlace: evenly(0, 1),
}
type RoadDraw = {
  surface?: Segment['surface']
  rollingResistance?: number
  headwindMps?: number
  range?: 'high' | 'low'
  topGearPlace?: number
}
// Each wish alone now and then, rather than all of them half of the time: most roads are plain pavement.
const roadDraw: fc.Arbitrary<RoadDraw> = fc.oneof(
  { arbitrary: fc.constant<RoadDraw>({}), weight: 3 },
  { arbitrary: fc.record({ headwindMps: road.headwindMps }), weight: 1 },
  { arbitrary: fc.record(road, { requiredKeys: [] }), weight: 2 },
)

/** One segment of any kind; which gears the truck has decides what `topGear` may say. */
export function arbitrarySegment(
  gearCount: number,
  kinds: readonly Segment['kind'][] = ['steady', 'stopGo', 'stall', 'idle'],
): fc.Arbitrary<Segment> {
  const withRoad = <T extends object>(fields: fc.Arbitrary<T>) =>
    fc.tuple(fields, roadDraw).map(([own, { topGearPlace, ...rest }]) => ({
      ...own,
      ...rest,
      ...(topGearPlace === undefined ? {} : { topGear: 1 + Math.round(topGearPlace * (gearCount - 1)) }),
    }))
  const durationS = evenly(20, 2400)
  const steady = fc
    .record({
      kind: fc.constant('steady' as const),
      speedMps: evenly(1, 34),
      grade: fc.oneof(fc.constant(0), evenly(-0.09, 0.12)),
      length: evenly(60, 2400),
      byDistance: fc.boolean(),
    })
    .map(({ length, byDistance, ...own }) => ({
      ...own,
      ...(byDistance ? { distanceM: length * own.speedMps } : { durationS: length }),
    }))
  const made: Record<Segment['kind'], fc.Arbitrary<Segment>> = {
    steady: withRoad(steady),
    stopGo: withRoad(
      fc.record(
        {
          kind: fc.constant('stopGo' as const),
          speedMps: evenly(2, 20),
          stopsPerKm: evenlyInLog(0.3, 12),
          grade: evenly(-0.03, 0.06),
          accelerationMps2: evenly(0.4, 2),
          idleS: evenly(0, 60),
          inGear: fc.boolean(),
          durationS,
        },
        { requiredKeys: ['kind', 'speedMps', 'stopsPerKm', 'durationS'] },
      ),
    ),
    stall: withRoad(
      fc.record({ kind: fc.constant('stall' as const), throttle: evenly(0, 1), durationS: evenly(1, 30) }),
    ),
    idle: withRoad(
      fc.record(
        { kind: fc.constant('idle' as const), inGear: fc.boolean(), durationS },
        { requiredKeys: ['kind', 'durationS'] },
      ),
    ),
  }
  const weights: Record<Segment['kind'], number> = { steady: 5, stopGo: 2, stall: 1, idle: 2 }
  return fc.oneof(...kinds.map((kind) => ({ arbitrary: made[kind], weight: weights[kind] })))
}

const load = record<Load, never>(
  { cargoMassKg: evenly(0, 1200), trailerMassKg: evenly(0, 5000), trailerDragAreaM2: evenly(0, 3) },
  [],
)

export interface DutyShape {
  kinds?: readonly Segment['kind'][]
  maxSegments?: number
}

/** A whole input: truck, load and duty from sea level to a high pass, from deep cold to desert heat. */
export function arbitraryInput(shape: TruckShape & DutyShape = {}): fc.Arbitrary<HeatInput> {
  return arbitraryBuild(shape)
    .chain((build) =>
      fc.record({
        build: fc.constant(build),
        load: fc.option(load, { nil: undefined }),
        ambientC: evenly(-30, 50),
        altitudeM: fc.oneof(evenly(0, 4500), fc.constant(0)),
        airConditioning: fc.option(fc.boolean(), { nil: undefined }),
        start: fc.option(
          fc.record(
            { sumpC: evenly(-30, 130), coolantC: evenly(-30, 115), axleC: evenly(-30, 130) },
            { requiredKeys: [] },
          ),
          { nil: undefined },
        ),
        segments: fc.array(arbitrarySegment(build.transmission.gears.length, shape.kinds), {
          minLength: 1,
          maxLength: shape.maxSegments ?? 3,
        }),
        calibration: fc.option(
          fc.record(
            { heatScale: evenly(0.6, 1.6), coolerScale: evenly(0.6, 1.6), flowScale: evenly(0.6, 1.6) },
            { requiredKeys: [] },
          ),
          { nil: undefined, freq: 3 },
        ),
      }),
    )
    .map(
      ({ build, load: drawnLoad, calibration, ambientC, altitudeM, airConditioning, start, segments }) => ({
        build,
        ...(drawnLoad === undefined ? {} : { load: drawnLoad }),
        duty: {
          ambientC,
          altitudeM,
          ...(airConditioning === undefined ? {} : { airConditioning }),
          ...(start === undefined ? {} : { start }),
          segments,
        },
        ...(calibration === undefined ? {} : { calibration }),
      }),
    )
}
