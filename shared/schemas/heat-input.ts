import { z } from 'zod'

/**
 * What the heat model takes: one truck, one load, one drive cycle. Every object refuses fields it does not know, every
 * number says what range it must lie in and a value that would do. Input is kept as typed: defaults are not filled in
 * here but in `shared/heat/resolve.ts`. SI units; temperatures in °C; the unit is in the name where a person could err.
 */

/** A finite number in a closed range, with one message that names the range and a hint a builder understands. */
export function boundedNumber(min: number, max: number, unit: string, hint?: string) {
  const range = `must be a number from ${min} to ${max}${unit === '' ? '' : ` ${unit}`}`
  const error = hint === undefined ? range : `${range}; ${hint}`
  return z.number({ error }).min(min, { error }).max(max, { error })
}

/** A whole number in a closed range. */
export function boundedInteger(min: number, max: number, hint?: string) {
  const error = `must be a whole number from ${min} to ${max}${hint === undefined ? '' : `; ${hint}`}`
  return z.number({ error }).int({ error }).min(min, { error }).max(max, { error })
}

function oneOf<const T extends readonly [string, ...string[]]>(values: T) {
  return z.enum(values, { error: `must be one of: ${values.join(', ')}` })
}

const flag = z.boolean({ error: 'must be true or false' })
const efficiency = (what: string) => boundedNumber(0.5, 1, `(${what}, as a fraction)`, '0.97 means 97 %')
const fraction = (what: string, example: string) => boundedNumber(0, 1, `(${what}, as a fraction)`, example)
const temperatureC = (min: number, max: number, what: string) => boundedNumber(min, max, '°C', what)
const heatCapacityJK = (example: string) => boundedNumber(100, 5e6, 'J/K', example)

/* ------------------------------------------------------------------ build */

export const VehicleSchema = z.strictObject({
  massKg: boundedNumber(
    200,
    100_000,
    'kg',
    'the truck alone as it drives, without cargo and trailer; 2350 kg is 5180 lb',
  ),
  dragAreaM2: boundedNumber(0.05, 30, 'm²', 'drag coefficient times frontal area; a pickup has about 1.3'),
  tyreRadiusM: boundedNumber(0.15, 1, 'm rolling radius', 'a 33 in tire is about 0.41'),
})

export const TorquePointSchema = z.strictObject({
  rpm: boundedNumber(0, 20_000, 'rev/min'),
  torqueNm: boundedNumber(0, 10_000, 'N·m at full throttle, sea level'),
})

export const EngineSchema = z
  .strictObject({
    fuel: oneOf(['petrol', 'diesel']),
    induction: oneOf(['natural', 'forced']),
    peakTorqueNm: boundedNumber(10, 10_000, 'N·m', '455 N·m is 336 lb·ft'),
    peakTorqueRpm: boundedNumber(200, 20_000, 'rev/min'),
    peakPowerW: boundedNumber(1000, 3e6, 'W', '198000 W is 266 hp'),
    peakPowerRpm: boundedNumber(200, 20_000, 'rev/min'),
    idleRpm: boundedNumber(200, 5000, 'rev/min', 'usually 600 to 800'),
    redlineRpm: boundedNumber(500, 20_000, 'rev/min'),
    curve: z
      .array(TorquePointSchema, { error: 'must be a list of { rpm, torqueNm }' })
      .min(2, { error: 'needs at least two points' })
      .max(100, { error: 'takes at most 100 points' })
      .optional(),
    coolantHeatRatio: boundedNumber(
      0,
      5,
      '',
      'heat to coolant per engine power; petrol about 0.95, diesel 0.65',
    ).optional(),
  })
  .superRefine((engine, context) => {
    const order = (path: string, message: string) =>
      context.addIssue({ code: 'custom', path: [path], message })
    if (engine.peakTorqueRpm <= engine.idleRpm)
      order('peakTorqueRpm', `must be above idle (${engine.idleRpm} rev/min)`)
    if (engine.peakPowerRpm < engine.peakTorqueRpm)
      order('peakPowerRpm', `must not be below the speed of peak torque (${engine.peakTorqueRpm} rev/min)`)
    if (engine.redlineRpm < engine.peakPowerRpm)
      order('redlineRpm', `must not be below the speed of peak power (${engine.peakPowerRpm} rev/min)`)
    engine.curve?.forEach((point, index) => {
      const previous = engine.curve?.[index - 1]
      if (previous !== undefined && point.rpm <= previous.rpm)
        context.addIssue({
          code: 'custom',
          path: ['curve', index, 'rpm'],
          message: `engine speeds must rise from point to point; needs more than ${previous.rpm}`,
        })
    })
    if (engine.curve !== undefined && engine.curve.every((point) => point.torqueNm === 0))
      order('curve', 'needs a torque above 0 somewhere')
  })

export const LockupSchema = z
  .strictObject({
    fitted: flag,
    minGear: boundedInteger(1, 12, 'the lowest gear in which the converter may lock').optional(),
    minSpeedMps: boundedNumber(0, 80, 'm/s', '16 m/s is 36 mph').optional(),
    maxTurbineTorqueNm: boundedNumber(1, 50_000, 'N·m').optional(),
    slipRpm: boundedNumber(0, 1000, 'rev/min', '0 for a clutch that locks solid').optional(),
  })
  .superRefine((lockup, context) => {
    if (!lockup.fitted) return
    for (const field of ['minGear', 'minSpeedMps'] as const)
      if (lockup[field] === undefined)
        context.addIssue({
          code: 'custom',
          path: [field],
          message: `is needed when lock-up is fitted; ${field === 'minGear' ? '3' : '16'} is usual`,
        })
  })

/** Coupling point where none is given, for the rule below; `shared/heat/resolve.ts` fills in the same. */
const USUAL_COUPLING_POINT = 0.88

export const ConverterSchema = z
  .strictObject({
    stallRpm: boundedNumber(300, 10_000, 'rev/min', 'stock converters stall at 1600 to 2200'),
    stallTorqueNm: boundedNumber(1, 10_000, 'N·m at the impeller').optional(),
    stallTorqueRatio: boundedNumber(1, 5, '', 'usually 1.8 to 2.3'),
    couplingPoint: boundedNumber(0.3, 1, '(speed ratio)', 'usually 0.88').optional(),
    heatCapacityJK: heatCapacityJK('usually 12000').optional(),
    oilShare: fraction('share of the oil in the converter', 'usually 0.35').optional(),
    lockup: LockupSchema.optional(),
  })
  .superRefine((converter, context) => {
    // Torque ratio falls in a straight line from TR0 at stall to 1 at the coupling point c. Its power ratio TR·SR peaks
    // between them at TR0² c / 4 (TR0 - 1) when TR0 is over 2: past 1 the converter would give more power than it takes.
    const { stallTorqueRatio, couplingPoint } = converter
    const coupling = couplingPoint ?? USUAL_COUPLING_POINT
    if (stallTorqueRatio <= 2 || stallTorqueRatio ** 2 * coupling <= 4 * (stallTorqueRatio - 1) * (1 + 1e-9))
      return
    const highest = (4 * (stallTorqueRatio - 1)) / stallTorqueRatio ** 2
    const largest = (2 * (1 + Math.sqrt(1 - coupling))) / coupling
    const field = couplingPoint === undefined ? 'stallTorqueRatio' : 'couplingPoint'
    const most = couplingPoint === undefined ? largest : highest
    context.addIssue({
      code: 'custom',
      path: [field],
      message: `together with ${couplingPoint === undefined ? `a coupling point of ${coupling}` : `a stall torque ratio of ${stallTorqueRatio}`} the converter would give more power than it takes: must be at most ${(Math.floor(most * 100) / 100).toFixed(2)}`,
    })
  })

export const GearSchema = z.strictObject({
  ratio: boundedNumber(0.1, 30, '', '1st is about 2.5 to 4.5, overdrive about 0.7'),
  efficiency: efficiency('efficiency of this gear'),
})

export const FLUID_CLASSES = ['atf-standard', 'atf-low', 'atf-ultra-low'] as const

export const FluidSchema = z
  .strictObject({
    class: oneOf(FLUID_CLASSES).optional(),
    kv40MmSqS: boundedNumber(3, 2000, 'mm²/s at 40 °C', 'usually 24 to 36').optional(),
    kv100MmSqS: boundedNumber(1, 200, 'mm²/s at 100 °C', 'usually 5 to 7.6').optional(),
    density15KgM3: boundedNumber(600, 1300, 'kg/m³ at 15 °C', 'usually 845 to 860').optional(),
  })
  .superRefine((fluid, context) => {
    const numbers = ['kv40MmSqS', 'kv100MmSqS', 'density15KgM3'] as const
    const given = numbers.filter((field) => fluid[field] !== undefined)
    if (fluid.class !== undefined) {
      for (const field of given)
        context.addIssue({
          code: 'custom',
          path: [field],
          message: 'give either a class or the three numbers of a data sheet, not both',
        })
      return
    }
    if (given.length === 0)
      context.addIssue({
        code: 'custom',
        path: ['class'],
        message: `give a class (${FLUID_CLASSES.join(', ')}) or kv40MmSqS, kv100MmSqS and density15KgM3`,
      })
    else
      for (const field of numbers)
        if (fluid[field] === undefined)
          context.addIssue({
            code: 'custom',
            path: [field],
            message: 'is needed beside the other two numbers of the data sheet',
          })
    if (
      fluid.kv40MmSqS !== undefined &&
      fluid.kv100MmSqS !== undefined &&
      fluid.kv40MmSqS <= fluid.kv100MmSqS
    )
      context.addIssue({
        code: 'custom',
        path: ['kv100MmSqS'],
        message: `oil is thinner hot than cold: must be below kv40MmSqS (${fluid.kv40MmSqS})`,
      })
  })

export const PumpSchema = z
  .strictObject({
    displacementM3PerRev: boundedNumber(1e-7, 1e-3, 'm³/rev', '20e-6 is 20 cm³/rev'),
    linePressureMinPa: boundedNumber(1e4, 1e7, 'Pa', '0.55e6 is 80 psi'),
    linePressureMaxPa: boundedNumber(1e4, 1e7, 'Pa', '1.5e6 is 218 psi'),
  })
  .superRefine((pump, context) => {
    if (pump.linePressureMaxPa < pump.linePressureMinPa)
      context.addIssue({
        code: 'custom',
        path: ['linePressureMaxPa'],
        message: `must not be below linePressureMinPa (${pump.linePressureMinPa})`,
      })
  })

export const TransmissionSchema = z
  .strictObject({
    gears: z
      .array(GearSchema, { error: 'must be a list of { ratio, efficiency }, 1st gear first' })
      .min(1, { error: 'needs at least one gear' })
      .max(12, { error: 'takes at most 12 gears' }),
    fluid: FluidSchema,
    fluidVolumeM3: boundedNumber(5e-4, 0.5, 'm³', '0.0128 is 12.8 L or 13.5 qt'),
    dryMassKg: boundedNumber(2, 3000, 'kg'),
    caseAreaM2: boundedNumber(0.02, 20, 'm²', 'usually 0.7').optional(),
    shiftStyle: oneOf(['tow', 'economy']).optional(),
    ratedInputTorqueNm: boundedNumber(10, 20_000, 'N·m').optional(),
    pump: PumpSchema.optional(),
  })
  .superRefine((transmission, context) => {
    transmission.gears.forEach((gear, index) => {
      const previous = transmission.gears[index - 1]
      if (previous !== undefined && gear.ratio >= previous.ratio)
        context.addIssue({
          code: 'custom',
          path: ['gears', index, 'ratio'],
          message: `1st gear comes first and ratios fall from gear to gear: must be below ${previous.ratio}`,
        })
    })
  })

export const TransferCaseSchema = z.strictObject({
  highRatio: boundedNumber(
    0.1,
    20,
    '',
    '1 unless the high range is geared; 1 where there is no transfer case',
  ),
  lowRatio: boundedNumber(0.1, 20, '', 'usually 2 to 4; 1 where there is no low range'),
  efficiencyHigh: efficiency('efficiency in high range'),
  efficiencyLow: efficiency('efficiency in low range'),
  surfaceM2: boundedNumber(0.01, 20, 'm²', 'usually 0.4').optional(),
  heatCapacityJK: heatCapacityJK('usually 25000').optional(),
})

export const AxleSchema = z.strictObject({
  ratio: boundedNumber(0.5, 40, '', 'a 4.10 axle is 4.1'),
  efficiency: efficiency('efficiency of the axle'),
  surfaceM2: boundedNumber(0.01, 50, 'm²', 'usually 1.1').optional(),
  heatCapacityJK: heatCapacityJK('usually 45000').optional(),
})

const name = z
  .string({ error: 'must be a text' })
  .min(1, { error: 'must not be empty' })
  .max(120, { error: 'must be at most 120 characters' })
const ratingFields = {
  heatW: boundedNumber(1, 1e6, 'W', '4700 W is 16000 BTU/h'),
  inletDifferenceK: boundedNumber(
    0.5,
    300,
    'K',
    'oil inlet minus air (or coolant) inlet; 100 °F of difference is 55.56',
  ),
  oilFlowM3S: boundedNumber(1e-7, 0.01, 'm³/s', '1.26e-4 is 2 gal/min'),
  pressureDropPa: boundedNumber(1, 1e7, 'Pa', '26000 Pa is 3.8 psi'),
  oilInC: temperatureC(-20, 250, 'oil inlet temperature of the rating, usually 93.3').optional(),
}

export const AirRatingSchema = z.strictObject({
  ...ratingFields,
  airVelocityMps: boundedNumber(0.05, 100, 'm/s at the face', '4 m/s is 790 ft/min'),
})

export const TankRatingSchema = z.strictObject({
  ...ratingFields,
  coolantFlowM3S: boundedNumber(1e-6, 0.1, 'm³/s', '0.0018 is 29 gal/min'),
})

export const AIR_CONSTRUCTIONS = ['stacked-plate', 'plate-fin', 'tube-fin'] as const
export const AIR_POSITIONS = ['ahead-of-condenser', 'behind-condenser', 'remote'] as const
export const AirConstructionSchema = oneOf(AIR_CONSTRUCTIONS)
export const AirPositionSchema = oneOf(AIR_POSITIONS)

export const AirCoolerSchema = z
  .strictObject({
    name,
    construction: AirConstructionSchema,
    position: AirPositionSchema,
    faceAreaM2: boundedNumber(1e-4, 5, 'm²', '0.05 m² is 78 in²'),
    ramFraction: fraction('share of road speed that reaches a remote cooler', 'usually 0.12').optional(),
    fanFlowM3S: boundedNumber(0, 20, 'm³/s', '0.22 is 470 ft³/min').optional(),
    blockedFraction: fraction('blocked share of the face', '0 when clean').optional(),
    parallelWithPrevious: flag.optional(),
    airShare: fraction('air side share of the thermal resistance', 'usually 0.55').optional(),
    rating: AirRatingSchema,
  })
  .superRefine((cooler, context) => {
    if (cooler.position === 'remote') return
    for (const field of ['ramFraction', 'fanFlowM3S'] as const)
      if (cooler[field] !== undefined)
        context.addIssue({
          code: 'custom',
          path: [field],
          message: 'belongs to a remote cooler only; leave it out, or set position to remote',
        })
  })

export const TankCoolerSchema = z.strictObject({
  name,
  construction: z.literal('in-tank'),
  position: z.literal('radiator-tank', { error: 'an in-tank cooler sits in the radiator-tank' }),
  parallelWithPrevious: flag.optional(),
  rating: TankRatingSchema,
})

export const CoolerSchema = z.discriminatedUnion('construction', [AirCoolerSchema, TankCoolerSchema], {
  error: `must have a construction: ${AIR_CONSTRUCTIONS.join(', ')} or in-tank`,
})

const temperatureWindow = (min: number, max: number, usual: string) =>
  z
    .strictObject({
      openC: temperatureC(min, max, `where it begins to open, ${usual}`),
      fullC: temperatureC(min, max, 'where it is fully open'),
    })
    .superRefine((window, context) => {
      if (window.fullC < window.openC + 0.1)
        context.addIssue({
          code: 'custom',
          path: ['fullC'],
          message: `must be at least 0.1 K above openC (${window.openC}); a wax element takes about 10 K`,
        })
    })

export const RadiatorSchema = z.strictObject({
  faceAreaM2: boundedNumber(0.005, 20, 'm²', 'usually 0.3 to 0.6'),
  rating: z.strictObject({
    heatW: boundedNumber(100, 1e7, 'W'),
    inletDifferenceK: boundedNumber(0.5, 300, 'K', 'coolant inlet minus air inlet, usually 60'),
    airVelocityMps: boundedNumber(0.05, 100, 'm/s at the face'),
    coolantFlowM3S: boundedNumber(1e-6, 0.1, 'm³/s', '0.0028 is 44 gal/min'),
    pumpRpm: boundedNumber(
      100,
      20_000,
      'rev/min of the engine at that coolant flow',
      'usually 3000',
    ).optional(),
  }),
  thermostat: temperatureWindow(-40, 200, 'usually 88').optional(),
})

export const CoolingSchema = z.strictObject({
  coolers: z
    .array(CoolerSchema, { error: 'must be a list of coolers, in the order the oil meets them' })
    .max(6, { error: 'takes at most 6 coolers' }),
  lines: z.strictObject({
    innerDiameterM: boundedNumber(0.001, 0.1, 'm', '0.0095 is 3/8 in'),
    lengthM: boundedNumber(0, 200, 'm out and back'),
    fittingsK: boundedNumber(0, 5000, 'velocity heads', 'usually 6').optional(),
    roughnessM: boundedNumber(0, 0.002, 'm', 'usually 1e-5').optional(),
  }),
  feed: z
    .strictObject({
      pressureMaxPa: boundedNumber(100, 1e7, 'Pa', '200000 is 29 psi'),
      saturationRpm: boundedNumber(50, 20_000, 'rev/min', 'usually 1500'),
      openFlowM3S: boundedNumber(1e-7, 0.02, 'm³/s', '1.6e-4 is 2.5 gal/min'),
    })
    .optional(),
  bypass: temperatureWindow(-60, 250, 'usually 71').optional(),
  stack: z.strictObject({
    ramFraction: fraction('share of road speed that reaches the stack', 'usually 0.18').optional(),
    blockedFraction: fraction('blocked share of the stack', '0 when clean').optional(),
    fan: z.strictObject({
      drive: oneOf(['engine', 'electric']),
      faceVelocityMps: boundedNumber(0, 50, 'm/s at the stack face', 'usually 2.5 to 4; 0 for no fan'),
    }),
  }),
  radiator: RadiatorSchema,
  condenserW: boundedNumber(0, 100_000, 'W', 'usually 6000').optional(),
  underbodyRiseK: boundedNumber(0, 150, 'K above ambient', 'usually 15').optional(),
  coolantHeatCapacityJK: boundedNumber(1000, 1e8, 'J/K', 'usually 150000').optional(),
})

export const BuildSchema = z
  .strictObject({
    vehicle: VehicleSchema,
    engine: EngineSchema,
    converter: ConverterSchema,
    transmission: TransmissionSchema,
    transferCase: TransferCaseSchema,
    axle: AxleSchema,
    cooling: CoolingSchema,
  })
  .superRefine((build, context) => {
    const { idleRpm, redlineRpm } = build.engine
    const { stallRpm, lockup } = build.converter
    if (stallRpm <= idleRpm || stallRpm > redlineRpm)
      context.addIssue({
        code: 'custom',
        path: ['converter', 'stallRpm'],
        message: `must lie between idle (${idleRpm}) and redline (${redlineRpm}) of the engine`,
      })
    const gears = build.transmission.gears.length
    if (lockup?.minGear !== undefined && lockup.minGear > gears)
      context.addIssue({
        code: 'custom',
        path: ['converter', 'lockup', 'minGear'],
        message: `the transmission has ${gears} gears: must be at most ${gears}`,
      })
  })

/* ------------------------------------------------------------- load, duty */

export const LoadSchema = z.strictObject({
  cargoMassKg: boundedNumber(0, 200_000, 'kg').optional(),
  trailerMassKg: boundedNumber(0, 300_000, 'kg').optional(),
  trailerDragAreaM2: boundedNumber(0, 50, 'm²', 'a box travel trailer adds 2 to 3.5').optional(),
})

export const StartSchema = z.strictObject({
  sumpC: temperatureC(-60, 250, 'pan temperature at the start').optional(),
  coolantC: temperatureC(-60, 200, 'coolant temperature at the start').optional(),
  axleC: temperatureC(-60, 250, 'axle oil temperature at the start').optional(),
})

export const SURFACES = ['pavement', 'gravel', 'dirt', 'rock', 'mud', 'sand'] as const

/** What any segment of a drive cycle may say about the road, the wind and the levers. */
export const segmentFields = {
  surface: oneOf(SURFACES).optional(),
  rollingResistance: boundedNumber(
    0,
    1,
    '(coefficient)',
    'pavement 0.010, gravel 0.020, sand 0.200',
  ).optional(),
  headwindMps: boundedNumber(-80, 80, 'm/s', 'against the truck; negative from behind').optional(),
  range: oneOf(['high', 'low']).optional(),
  topGear: boundedInteger(1, 12, 'the highest gear the driver allows').optional(),
}

/** Lowest road speed that counts as driving; below it a segment is standing still. */
const speedMps = boundedNumber(0.1, 100, 'm/s', '20 m/s is 45 mph; to stand still use an idle segment')
const grade = boundedNumber(-1.5, 1.5, '(rise over run)', '0.06 is a 6 % grade')
const durationS = boundedNumber(0.01, 1e6, 's')

export const SteadySegmentSchema = z
  .strictObject({
    kind: z.literal('steady'),
    speedMps,
    grade,
    durationS: durationS.optional(),
    distanceM: boundedNumber(0.01, 1e7, 'm', '12000 m is 7.5 miles').optional(),
    ...segmentFields,
  })
  .superRefine((segment, context) => {
    if ((segment.durationS === undefined) === (segment.distanceM === undefined))
      context.addIssue({
        code: 'custom',
        path: [segment.durationS === undefined ? 'durationS' : 'distanceM'],
        message: 'give either durationS or distanceM, one of the two',
      })
  })

export const StopGoSegmentSchema = z.strictObject({
  kind: z.literal('stopGo'),
  speedMps,
  stopsPerKm: boundedNumber(0.01, 200, 'stops per km', '2 in town'),
  grade: grade.optional(),
  accelerationMps2: boundedNumber(0.05, 10, 'm/s²', 'usually 1').optional(),
  idleS: boundedNumber(0, 36_000, 's at each stop', 'usually 15').optional(),
  inGear: flag.optional(),
  durationS,
  ...segmentFields,
})

export const StallSegmentSchema = z.strictObject({
  kind: z.literal('stall'),
  throttle: fraction('throttle', '1 is full throttle'),
  durationS,
  ...segmentFields,
})

export const IdleSegmentSchema = z.strictObject({
  kind: z.literal('idle'),
  inGear: flag.optional(),
  durationS,
  ...segmentFields,
})

export const SegmentSchema = z.discriminatedUnion(
  'kind',
  [SteadySegmentSchema, StopGoSegmentSchema, StallSegmentSchema, IdleSegmentSchema],
  { error: 'must have a kind: steady, stopGo, stall or idle' },
)

export const ambientC = temperatureC(-70, 80, 'outside air')

export const DutySchema = z.strictObject({
  ambientC,
  altitudeM: boundedNumber(-500, 9000, 'm above sea level', '1600 m is 5250 ft'),
  airConditioning: flag.optional(),
  start: StartSchema.optional(),
  segments: z
    .array(SegmentSchema, { error: 'must be a list of segments' })
    .min(1, { error: 'needs at least one segment' })
    .max(500, { error: 'takes at most 500 segments' }),
})

export const CalibrationSchema = z.strictObject({
  heatScale: boundedNumber(0.01, 100, '(factor)', '1 for an uncalibrated truck').optional(),
  coolerScale: boundedNumber(0.01, 100, '(factor)', '1 for an uncalibrated truck').optional(),
  flowScale: boundedNumber(0.01, 100, '(factor)', '1 for an uncalibrated truck').optional(),
})

export const FluidLifeSchema = z.strictObject({
  referenceLifeM: boundedNumber(1000, 1e12, 'm', '160934400 m is 100,000 miles').optional(),
  referenceC: temperatureC(-50, 300, 'below it fluid lasts no longer, usually 79.444 (175 °F)').optional(),
  halvingK: boundedNumber(0.5, 500, 'K', 'rise that halves the life, usually 11.111 (20 °F)').optional(),
  referenceSpeedMps: boundedNumber(0.1, 100, 'm/s', 'usually 15.6464 (35 mph)').optional(),
})

export const HeatInputSchema = z
  .strictObject({
    build: BuildSchema,
    load: LoadSchema.optional(),
    duty: DutySchema,
    calibration: CalibrationSchema.optional(),
    fluidLife: FluidLifeSchema.optional(),
  })
  .superRefine((input, context) => {
    const gears = input.build.transmission.gears.length
    input.duty.segments.forEach((segment, index) => {
      if (segment.topGear !== undefined && segment.topGear > gears)
        context.addIssue({
          code: 'custom',
          path: ['duty', 'segments', index, 'topGear'],
          message: `the transmission has ${gears} gears: must be at most ${gears}`,
        })
    })
  })

export type Vehicle = z.infer<typeof VehicleSchema>
export type TorquePoint = z.infer<typeof TorquePointSchema>
export type Engine = z.infer<typeof EngineSchema>
export type Lockup = z.infer<typeof LockupSchema>
export type Converter = z.infer<typeof ConverterSchema>
export type Gear = z.infer<typeof GearSchema>
export type Fluid = z.infer<typeof FluidSchema>
export type FluidClass = (typeof FLUID_CLASSES)[number]
export type Pump = z.infer<typeof PumpSchema>
export type Transmission = z.infer<typeof TransmissionSchema>
export type TransferCase = z.infer<typeof TransferCaseSchema>
export type Axle = z.infer<typeof AxleSchema>
export type AirRating = z.infer<typeof AirRatingSchema>
export type TankRating = z.infer<typeof TankRatingSchema>
export type AirConstruction = z.infer<typeof AirConstructionSchema>
export type AirPosition = z.infer<typeof AirPositionSchema>
export type AirCooler = z.infer<typeof AirCoolerSchema>
export type TankCooler = z.infer<typeof TankCoolerSchema>
export type Cooler = z.infer<typeof CoolerSchema>
export type Radiator = z.infer<typeof RadiatorSchema>
export type Cooling = z.infer<typeof CoolingSchema>
export type Build = z.infer<typeof BuildSchema>
export type Load = z.infer<typeof LoadSchema>
export type Start = z.infer<typeof StartSchema>
export type Surface = (typeof SURFACES)[number]
export type SteadySegment = z.infer<typeof SteadySegmentSchema>
export type StopGoSegment = z.infer<typeof StopGoSegmentSchema>
export type StallSegment = z.infer<typeof StallSegmentSchema>
export type IdleSegment = z.infer<typeof IdleSegmentSchema>
export type Segment = z.infer<typeof SegmentSchema>
export type Duty = z.infer<typeof DutySchema>
export type Calibration = z.infer<typeof CalibrationSchema>
export type FluidLife = z.infer<typeof FluidLifeSchema>
export type HeatInput = z.infer<typeof HeatInputSchema>
