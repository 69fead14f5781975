import { CONSTRUCTION_WORDS } from '../build-sheet/generic-cooler'
import { GENERIC_COOLERS } from '../heat/reference-point'
import { AIR_CONSTRUCTIONS } from '../schemas/heat-input'
import { STANDARD_GRAVITY, roadForce } from '../heat/road-load'
import { kinematicViscosity, makeOil } from '../heat/fluids'
import { oilCapacityRate } from '../heat/coolers'
import type { Quantity } from '../units/display'
import type { Reading } from './explain-reading'
import { FLOW_TEST_OIL_C, predictIdleFlow } from './idle-flow'

/** How each number of an answer comes about: equation, source, and the inputs it rests on. */

/** A number on the way to the result. */
export interface ExplainPart {
  label: string
  si: number
  quantity: Quantity
}

export interface Topic {
  title: string
  quantity: Quantity
  /** Of one stretch of the drive cycle, or of all of it. */
  of: 'drive' | 'stretch'
  /** Plain text, one line each; SI, temperatures in °C. */
  equation: readonly string[]
  /** What the letters mean. */
  where: string
  source: string
  /**
   * Paths it rests on most directly, `*` for any place in a list, `@` for the stretch, `@gear` for its gear, `@cooler` for
   * the cooler asked about.
   */
  inputs: readonly string[]
  /** What it is read from; numbers of one kind are worked out together. An estimate unless said. */
  from?: 'grade' | 'sizing'
  read: (reading: Reading) => number | null
  parts?: (reading: Reading) => ExplainPart[]
}

const part = (label: string, si: number, quantity: Quantity): ExplainPart => ({ label, si, quantity })

const ROAD = [
  'vehicle.massKg',
  'vehicle.dragAreaM2',
  'load.cargoMassKg',
  'load.trailerMassKg',
  'load.trailerDragAreaM2',
  'duty.segments.@.speedMps',
  'duty.segments.@.grade',
  'duty.segments.@.surface',
  'duty.segments.@.rollingResistance',
  'duty.segments.@.headwindMps',
  'duty.ambientC',
  'duty.altitudeM',
] as const
const DRIVELINE = [
  'vehicle.tyreRadiusM',
  'axle.ratio',
  'axle.efficiency',
  'transferCase.highRatio',
  'transferCase.lowRatio',
  'duty.segments.@.range',
  'duty.segments.@.topGear',
  'transmission.gears.@gear.ratio',
  'transmission.gears.@gear.efficiency',
  'transmission.shiftStyle',
] as const
const ENGINE = [
  'engine.peakTorqueNm',
  'engine.peakTorqueRpm',
  'engine.peakPowerW',
  'engine.peakPowerRpm',
  'engine.idleRpm',
  'engine.redlineRpm',
  'engine.induction',
] as const
const CONVERTER = [
  'converter.stallRpm',
  'converter.stallTorqueNm',
  'converter.stallTorqueRatio',
  'converter.couplingPoint',
  'converter.lockup.fitted',
  'converter.lockup.minGear',
  'converter.lockup.minSpeedMps',
  'converter.lockup.maxTurbineTorqueNm',
  'converter.lockup.slipRpm',
] as const
const PUMP = [
  'transmission.pump.displacementM3PerRev',
  'transmission.pump.linePressureMinPa',
  'transmission.pump.linePressureMaxPa',
  'transmission.ratedInputTorqueNm',
] as const
const FLUID = [
  'transmission.fluid.class',
  'transmission.fluid.kv40MmSqS',
  'transmission.fluid.kv100MmSqS',
  'transmission.fluid.density15KgM3',
] as const
const COOLERS = [
  'cooling.coolers.*.rating.heatW',
  'cooling.coolers.*.rating.inletDifferenceK',
  'cooling.coolers.*.rating.oilFlowM3S',
  'cooling.coolers.*.rating.airVelocityMps',
  'cooling.coolers.*.rating.coolantFlowM3S',
  'cooling.coolers.*.position',
] as const
const FLOW = [
  'cooling.feed.openFlowM3S',
  'cooling.feed.pressureMaxPa',
  'cooling.feed.saturationRpm',
  'cooling.lines.innerDiameterM',
  'cooling.lines.lengthM',
  'cooling.lines.fittingsK',
  'cooling.coolers.*.rating.pressureDropPa',
] as const
const AIR = [
  'cooling.stack.ramFraction',
  'cooling.stack.blockedFraction',
  'cooling.stack.fan.faceVelocityMps',
  'cooling.stack.fan.drive',
  'cooling.condenserW',
  'duty.airConditioning',
] as const
const RADIATOR = [
  'cooling.radiator.faceAreaM2',
  'cooling.radiator.rating.heatW',
  'cooling.radiator.rating.inletDifferenceK',
  'cooling.radiator.rating.airVelocityMps',
  'cooling.radiator.rating.coolantFlowM3S',
  'cooling.radiator.thermostat.openC',
  'cooling.radiator.thermostat.fullC',
] as const
const BYPASS = ['cooling.bypass.openC', 'cooling.bypass.fullC'] as const
const FIRST_OF_ALL = [
  ...ROAD,
  'converter.stallRpm',
  'converter.lockup.fitted',
  'transmission.gears.@gear.ratio',
  'transmission.gears.@gear.efficiency',
  'axle.ratio',
  'vehicle.tyreRadiusM',
  'cooling.coolers.*.rating.heatW',
  'cooling.coolers.*.position',
  'cooling.feed.openFlowM3S',
  ...BYPASS,
  'cooling.stack.ramFraction',
  'cooling.stack.fan.faceVelocityMps',
  'cooling.underbodyRiseK',
  'engine.coolantHeatRatio',
  'transmission.fluidVolumeM3',
  'transmission.dryMassKg',
  'transmission.caseAreaM2',
  'duty.start.sumpC',
] as const

const BALANCE =
  'Energy balance, each body of one temperature. Oil density and heat capacity: fitted to tables of Incropera and others, Fundamentals of Heat and Mass Transfer. Surfaces in the air under the body: judgement.'
const EXCHANGER =
  'Effectiveness and transfer units (ε-NTU) of a cross-flow exchanger with both streams unmixed: W. M. Kays and A. L. London, Compact Heat Exchangers; closed form in Incropera and others, equation 11.32. How it follows air and flow by construction: exponents after Kays and London, split between the sides judgement.'
const CONVERTER_SOURCE =
  'Similarity of fluid couplings (torque goes with speed squared). Capacity by speed ratio: a blend of two published converter tables up to 0.9, judgement above.'
const LIFE_SOURCE =
  'Common practice of the trade, no primary source: 100,000 miles at 175 °F (79 °C), half as long for each 20 °F (11 °C) above. Others say 10 °C, or 25 °F.'

/** What the oil flow carries per degree, at the pan’s temperature [W/K]. */
function oilRate({ input, end }: Reading): number {
  return oilCapacityRate(makeOil(input.build.transmission.fluid), end.sumpC, end.coolerFlowM3S)
}

const heatOfSource =
  (source: 'converterW' | 'gearW' | 'spinW' | 'pumpW' | 'shiftW') =>
  ({ stretch }: Reading): number =>
    stretch.heat[source]

function settled({ stretch }: Reading, read: (state: NonNullable<typeof stretch.equilibrium>) => number) {
  return stretch.equilibrium === null
    ? []
    : [part('Where it would settle on this stretch', read(stretch.equilibrium), 'temperature')]
}

/** "2900 W/(m² K) stacked plate, …". */
const GENERIC_UA = AIR_CONSTRUCTIONS.map(
  (one) => `${GENERIC_COOLERS[one].uaPerAreaWM2K} W/(m² K) ${CONSTRUCTION_WORDS[one]}`,
).join(', ')

export const TOPICS = {
  'peak-pan': {
    title: 'Pan, peak',
    quantity: 'temperature',
    of: 'drive',
    equation: [
      'C_pan · dT_pan/dt = gears + shifts + drag + pump + C_oil (T_return − T_pan) − pan surface − to the case',
      'C_case · dT_case/dt = from the oil − case surface',
      'peak = the highest T_pan along the drive cycle',
    ],
    where:
      'C_pan and C_case: heat that fluid and metal store per degree; C_oil: what the oil flow carries per degree; T_return: what comes back from the coolers.',
    source: BALANCE,
    inputs: FIRST_OF_ALL,
    read: ({ answer }) => answer.peakSumpC,
    parts: (reading) => [
      part('Heat made', reading.end.heatGeneratedW, 'heatRate'),
      part('Heat the coolers take', reading.end.heatCoolersW, 'heatRate'),
      part('Heat pan and case give to the air', reading.end.heatPanCaseW, 'heatRate'),
      ...settled(reading, ({ sumpC }) => sumpC),
    ],
  },
  'peak-hot-line': {
    title: 'To-cooler line (hot line), peak',
    quantity: 'temperature',
    of: 'drive',
    equation: [
      'C_converter · dT_line/dt = converter heat − C_oil (T_line − T_pan)',
      'settled: T_line = T_pan + converter heat / C_oil',
      'peak = the highest T_line along the drive cycle',
    ],
    where:
      'C_converter: heat that converter and its oil store per degree; C_oil = ρ q c_p of the oil flow q.',
    source: BALANCE,
    inputs: [...FIRST_OF_ALL, 'converter.heatCapacityJK'],
    read: ({ answer }) => answer.peakCoolerInletC,
    parts: (reading) => [
      part('Pan', reading.end.sumpC, 'temperature'),
      part('Converter heat', reading.stretch.heat.converterW, 'heatRate'),
      part('What the oil flow carries per degree', oilRate(reading), 'conductance'),
      ...settled(reading, ({ coolerInletC }) => coolerInletC),
    ],
  },
  'return-line': {
    title: 'Return line, peak',
    quantity: 'temperature',
    of: 'drive',
    equation: [
      'T_return = T_line − heat the coolers take / C_oil',
      'with a bypass, what went round the coolers is mixed in',
      'peak = the highest T_return along the drive cycle',
    ],
    where: 'T_line: the to-cooler line; C_oil = ρ q c_p of the whole oil flow q.',
    source: BALANCE,
    inputs: [...COOLERS, ...FLOW, ...BYPASS, ...AIR, 'duty.ambientC'],
    read: (reading) => reading.peak('coolerReturnC'),
    parts: (reading) => [
      part('To-cooler line', reading.end.coolerInletC, 'temperature'),
      part('Heat the coolers take', reading.end.heatCoolersW, 'heatRate'),
      part('What the oil flow carries per degree', oilRate(reading), 'conductance'),
    ],
  },
  coolant: {
    title: 'Coolant, peak',
    quantity: 'temperature',
    of: 'drive',
    equation: [
      'C_coolant · dT_coolant/dt = 4000 W + k · engine power + heat of the radiator tank’s cooler − radiator heat',
      'radiator air = outside air + (condenser heat + heat of the front coolers) / (ρ A V c_p)',
      'peak = the highest T_coolant along the drive cycle',
    ],
    where:
      'k: heat to the coolant per engine power; A, V: face and air speed of the radiator. What the thermostat lets through goes to the radiator.',
    source:
      'Energy balance; the radiator as a cross-flow exchanger, ε-NTU after Kays and London. k about 0.95 (gasoline) and 0.65 (diesel): middle of textbook examples and common practice, judgement; 4000 W at no load: judgement.',
    inputs: [
      'engine.coolantHeatRatio',
      'engine.fuel',
      ...RADIATOR,
      ...AIR,
      ...ROAD,
      'cooling.coolantHeatCapacityJK',
    ],
    read: (reading) => reading.peak('coolantC'),
    parts: (reading) => [
      part('Engine power', reading.enginePowerW, 'power'),
      part('Heat of the engine to its coolant', reading.end.heatEngineToCoolantW, 'heatRate'),
      part('Heat the radiator gives off', reading.end.heatRadiatorW, 'heatRate'),
      part('Thermostat open', reading.end.thermostatOpen, 'share'),
      ...settled(reading, ({ coolantC }) => coolantC),
    ],
  },
  axle: {
    title: 'Axle oil, peak',
    quantity: 'temperature',
    of: 'drive',
    equation: [
      'C_axle · dT_axle/dt = axle heat − h A (T_axle − T_under)',
      'axle heat = (1 − η) · pinion power',
      'h = 10 + 5.5 (0.7 u)^0.8 W/(m² K)',
    ],
    where:
      'η: efficiency of the axle; A: its outside; u: road speed plus headwind in m/s; T_under: air under the body.',
    source:
      'Energy balance; form of a turbulent boundary layer (Incropera and others, section 7.2) plus free convection and radiation, size judgement.',
    inputs: [
      'axle.efficiency',
      'axle.surfaceM2',
      'axle.heatCapacityJK',
      'axle.ratio',
      'cooling.underbodyRiseK',
      'duty.start.axleC',
      ...ROAD,
    ],
    read: (reading) => reading.peak('axleC'),
    parts: (reading) => [
      part('Axle heat', reading.stretch.heat.axleW, 'heatRate'),
      ...settled(reading, ({ axleC }) => axleC),
    ],
  },
  'transfer-case': {
    title: 'Transfer-case oil, peak',
    quantity: 'temperature',
    of: 'drive',
    equation: [
      'C · dT/dt = transfer-case heat − h A (T − T_under)',
      'transfer-case heat = (1 − η) · output power of the transmission',
      'h = 10 + 5.5 (0.4 u)^0.8 W/(m² K)',
    ],
    where:
      'η: efficiency of the range in use; A: outside of the case; u: road speed plus headwind in m/s; T_under: air under the body.',
    source:
      'Energy balance; form of a turbulent boundary layer (Incropera and others, section 7.2) plus free convection and radiation, size judgement.',
    inputs: [
      'transferCase.efficiencyHigh',
      'transferCase.efficiencyLow',
      'transferCase.surfaceM2',
      'transferCase.heatCapacityJK',
      'duty.segments.@.range',
      'cooling.underbodyRiseK',
      'duty.start.axleC',
      ...ROAD,
    ],
    read: (reading) => reading.peak('transferCaseC'),
    parts: (reading) => [
      part('Transfer-case heat', reading.stretch.heat.transferCaseW, 'heatRate'),
      ...settled(reading, ({ transferCaseC }) => transferCaseC),
    ],
  },
  'heat-converter': {
    title: 'Heat of converter slip',
    quantity: 'heatRate',
    of: 'stretch',
    equation: [
      'heat = T_impeller · ω_impeller − T_turbine · ω_turbine',
      'T_impeller = λ0 · L(SR) · ω_impeller²',
      'T_turbine = T_impeller · (1 + (TR0 − 1) · max(0, 1 − SR / SR_c))',
      'locked: no slip but that of the clutch',
    ],
    where:
      'SR = ω_turbine / ω_impeller; λ0 from the stall speed; TR0: torque ratio at stall; SR_c: coupling point; L: share of torque still taken up at SR.',
    source: CONVERTER_SOURCE,
    inputs: [...CONVERTER, ...ENGINE, ...DRIVELINE, ...ROAD],
    read: heatOfSource('converterW'),
    parts: ({ stretch }) => [
      part('Speed ratio', stretch.speedRatio, 'number'),
      part('Engine speed', stretch.engineRpm, 'rotation'),
    ],
  },
  'heat-gears': {
    title: 'Heat of the gears',
    quantity: 'heatRate',
    of: 'stretch',
    equation: [
      'heat = (1 − η) · power into the gear',
      'power into the gear = output torque · ω_turbine / (ratio · η)',
    ],
    where: 'η and ratio: efficiency and ratio of the gear it drives in.',
    source:
      'Power balance of a gear train of constant efficiency. Efficiencies of 0.955 to 0.99: common practice, inside the fallback of Commission Regulation (EU) 2017/2400, annex VI.',
    inputs: [...DRIVELINE, ...ROAD],
    read: heatOfSource('gearW'),
    parts: (reading) => [
      ...(reading.roadForceN === null
        ? []
        : [part('Power at the wheels', reading.roadForceN * reading.roadSpeedMps, 'power')]),
    ],
  },
  'heat-drag': {
    title: 'Heat of drag, oil and clutches',
    quantity: 'heatRate',
    of: 'stretch',
    equation: [
      'heat = drag torque · ω_turbine',
      'drag torque = 0.005 · T_rated · (1 + 0.4 n / 1000) · (ν / 8)^0.3',
      'log10 log10 (ν + 0.7) = A − B · log10 T',
    ],
    where:
      'T_rated: torque the transmission is rated for; n: turbine speed in rpm; ν: viscosity at the pan in mm²/s; T in kelvin.',
    source:
      'Form of the torque-independent loss after Commission Regulation (EU) 2017/2400, annex VI; size and the power of viscosity judgement. Viscosity: ASTM D341.',
    inputs: [
      'transmission.ratedInputTorqueNm',
      'engine.peakTorqueNm',
      ...FLUID,
      'duty.segments.@.speedMps',
      'vehicle.tyreRadiusM',
      'axle.ratio',
      'transmission.gears.@gear.ratio',
    ],
    read: heatOfSource('spinW'),
    parts: ({ input, end, stretch }) => [
      part(
        'Viscosity at the pan, mm²/s',
        kinematicViscosity(makeOil(input.build.transmission.fluid), end.sumpC),
        'number',
      ),
      part('Turbine speed', stretch.engineRpm * stretch.speedRatio, 'rotation'),
    ],
  },
  'heat-pump': {
    title: 'Heat of the pump',
    quantity: 'heatRate',
    of: 'stretch',
    equation: [
      'heat = pump torque · ω_engine',
      'pump torque = D · p / (2π · 0.85)',
      'p = p_min + (p_max − p_min) · min(1, T_impeller / T_rated)',
    ],
    where: 'D: what the pump moves in one turn; p: line pressure. All its work ends as heat in the oil.',
    source:
      'Ideal displacement pump (any text on hydraulics) at an overall efficiency of 0.85; line pressure rising with torque: common practice, no source.',
    inputs: [...PUMP, 'engine.peakTorqueNm', ...DRIVELINE, ...ROAD],
    read: heatOfSource('pumpW'),
    parts: ({ stretch }) => [part('Engine speed', stretch.engineRpm, 'rotation')],
  },
  'heat-shifts': {
    title: 'Heat of the shifts',
    quantity: 'heatRate',
    of: 'stretch',
    equation: [
      'energy of an upshift = ½ · 0.6 s · T_turbine · Δω + ½ · 0.25 kg m² · Δω²',
      'heat = energy of all upshifts of a cycle / time of the cycle',
    ],
    where: 'Δω: drop of turbine speed from the old gear to the new. Counted in stop and go only.',
    source:
      'Energy of a clutch slipping at constant torque (any text on machine elements); time and inertia judgement.',
    inputs: [
      'duty.segments.@.stopsPerKm',
      'duty.segments.@.accelerationMps2',
      'duty.segments.@.speedMps',
      'transmission.gears.*.ratio',
      ...ROAD,
    ],
    read: heatOfSource('shiftW'),
  },
  'cooler-heat': {
    title: 'Heat the coolers take',
    quantity: 'heatRate',
    of: 'stretch',
    equation: [
      'Q = ε · C_min · (T_oil in − T_air or coolant in)',
      'ε = 1 − exp( NTU^0.22 / C_r · (exp(−C_r · NTU^0.78) − 1) ), NTU = UA / C_min',
      'UA = UA_rated / ( f · (air / rated)^−a + (1 − f) · (oil / rated)^−m · (ν / rated)^n )',
    ],
    where:
      'UA_rated: the maker’s rating turned round; C: what each stream carries per degree; f: share of the resistance on the air side; a, m, n by construction.',
    source: EXCHANGER,
    inputs: [
      'cooling.coolers.@cooler.construction',
      'cooling.coolers.@cooler.position',
      'cooling.coolers.@cooler.faceAreaM2',
      'cooling.coolers.@cooler.rating.heatW',
      'cooling.coolers.@cooler.rating.inletDifferenceK',
      'cooling.coolers.@cooler.rating.oilFlowM3S',
      'cooling.coolers.@cooler.rating.airVelocityMps',
      'cooling.coolers.@cooler.rating.coolantFlowM3S',
      'cooling.coolers.@cooler.blockedFraction',
      'cooling.feed.openFlowM3S',
      ...BYPASS,
      ...AIR,
      'duty.ambientC',
    ],
    read: ({ end, choice }) =>
      choice.cooler === null ? end.heatCoolersW : (end.coolerHeatW[choice.cooler] ?? null),
    parts: ({ end }) => [
      part('Oil going in', end.coolerInletC, 'temperature'),
      part('Oil coming back', end.coolerReturnC, 'temperature'),
      part('Oil flow', end.coolerFlowM3S, 'volumeFlow'),
      part('Air at the face of the stack', end.faceVelocityMps, 'airSpeed'),
      part('Coolant', end.coolantC, 'temperature'),
    ],
  },
  'cooler-flow': {
    title: 'Oil flow to the coolers',
    quantity: 'volumeFlow',
    of: 'stretch',
    equation: [
      'p_max (q / q_open)² + lines + coolers = p_max · min(1, engine speed / n)',
      'lines = (f_D · L / d + K) · ½ ρ u²',
      'coolers = rated drop · (q / q_rated)^p · (ν / ν_rated)^r',
    ],
    where:
      'q_open: flow into an open line; n: engine speed from which the feed is full; f_D: friction factor; L, d: length and bore; K: fittings; p, r by construction.',
    source:
      'S. W. Churchill, Chemical Engineering 84(24), 1977 (friction factor in all regimes); Darcy and Weisbach; fittings after F. M. White, Fluid Mechanics, section 6.9. The feed as an orifice: judgement.',
    inputs: [...FLOW, ...FLUID, 'engine.idleRpm'],
    read: ({ end }) => end.coolerFlowM3S,
    parts: (reading) => [
      part('Pan', reading.end.sumpC, 'temperature'),
      part('Engine speed', reading.stretch.engineRpm, 'rotation'),
      part('Oil of the shop’s flow test', FLOW_TEST_OIL_C, 'temperature'),
      part('Time of a quart at idle then', predictIdleFlow(reading.input).quartS, 'seconds'),
    ],
  },
  'face-velocity': {
    title: 'Air through the front',
    quantity: 'airSpeed',
    of: 'stretch',
    equation: [
      'V = ((ram · (v + w))³ + V_fan³)^(1/3) · (1 − blocked) · Π (1 − 0.15 · A_cooler / A_radiator)',
      'never under 0.3 m/s; an engine fan gives V_fan · min(1, rpm / 2500)',
    ],
    where: 'ram: share of road speed that gets through; v: road speed; w: headwind; A: faces.',
    source:
      'Common practice, no source: pressures of ram and fan add at equal resistance. Ram shares of 0.14 to 0.20 follow from pressure coefficient and resistance of a front end; the rest is judgement.',
    inputs: [
      'cooling.stack.ramFraction',
      'cooling.stack.blockedFraction',
      'cooling.stack.fan.faceVelocityMps',
      'cooling.stack.fan.drive',
      'cooling.radiator.faceAreaM2',
      'cooling.coolers.*.faceAreaM2',
      'duty.segments.@.speedMps',
      'duty.segments.@.headwindMps',
    ],
    read: ({ end }) => end.faceVelocityMps,
    parts: ({ stretch }) => [
      part('Road speed', stretch.speedMps, 'speed'),
      part('Engine speed', stretch.engineRpm, 'rotation'),
    ],
  },
  thermostat: {
    title: 'Thermostat, how far open',
    quantity: 'share',
    of: 'stretch',
    equation: ['open = (T_coolant − opens at) / (fully open at − opens at), between 0 and 1'],
    where: 'What it does not let through goes round the radiator.',
    source: 'A wax element in its straight range; common practice, no source.',
    inputs: ['cooling.radiator.thermostat.openC', 'cooling.radiator.thermostat.fullC'],
    read: ({ end }) => end.thermostatOpen,
    parts: ({ end }) => [part('Coolant', end.coolantC, 'temperature')],
  },
  'fluid-hours': {
    title: 'Fluid life of this drive cycle, in hours',
    quantity: 'hours',
    of: 'drive',
    equation: [
      'life at T = (reference life / reference speed) · 2^−((max(T, T_ref) − T_ref) / halving)',
      'used = ∫ [ (1 − s) / life(T_pan) + s / life(T_line) ] dt',
      'hours to a change = hours of the cycle / used',
    ],
    where: 's: share of the oil in the converter. Ageing by heat only: not debris, water or shear.',
    source: LIFE_SOURCE,
    inputs: ['converter.oilShare', ...FIRST_OF_ALL],
    read: ({ answer }) => answer.hoursToFluidChange * 3600,
    parts: ({ answer }) => [
      part('Mean temperature of the pan', answer.meanSumpC, 'temperature'),
      part('Share of the life one cycle uses', answer.fluidDamage, 'share'),
      part('The same counted at the pan only', answer.fluidDamageSumpOnly, 'share'),
    ],
  },
  'fluid-distance': {
    title: 'Fluid life of this drive cycle, as a distance',
    quantity: 'distance',
    of: 'drive',
    equation: [
      'distance to a change = distance of the cycle / used',
      'used = ∫ [ (1 − s) / life(T_pan) + s / life(T_line) ] dt',
      'what a chart on a shop wall says: reference life · 2^−((T − T_ref) / halving)',
    ],
    where:
      's: share of the oil in the converter. The chart knows one temperature, and no time spent crawling.',
    source: LIFE_SOURCE,
    inputs: ['converter.oilShare', ...FIRST_OF_ALL],
    read: ({ answer }) => answer.distanceToFluidChangeM,
    parts: ({ answer }) => [
      part('Distance of the cycle', answer.distanceM, 'distance'),
      part('Share of the life one cycle uses', answer.fluidDamage, 'share'),
      part('Shop-wall chart at the mean pan', answer.wallChart.atMeanM, 'distance'),
      part('Shop-wall chart at the peak pan', answer.wallChart.atPeakM, 'distance'),
    ],
  },
  'fluid-damage': {
    title: 'Share of the fluid’s life one drive cycle uses',
    quantity: 'share',
    of: 'drive',
    equation: [
      'used = ∫ [ (1 − s) / life(T_pan) + s / life(T_line) ] dt',
      'life at T = (reference life / reference speed) · 2^−((max(T, T_ref) − T_ref) / halving)',
    ],
    where: 's: share of the oil in the converter. Counted in time, so that crawling counts.',
    source: LIFE_SOURCE,
    inputs: ['converter.oilShare', ...FIRST_OF_ALL],
    read: ({ answer }) => answer.fluidDamage,
    parts: ({ answer }) => [
      part('Mean temperature of the pan', answer.meanSumpC, 'temperature'),
      part('Cycles to a change', answer.cyclesToFluidChange, 'number'),
    ],
  },
  'grade-held': {
    title: 'Grade it holds',
    quantity: 'grade',
    of: 'drive',
    equation: [
      'the steepest grade at which pan and to-cooler line stay under “ease off” and the speed is held, and at every gentler one too',
      'with a climb: temperatures at its top, starting from its foot; without: where they settle',
    ],
    where: 'Grades are tried in steps of half a percent, the last step halved until it no longer matters.',
    source: 'The model run grade by grade; what it rests on is said with pan and to-cooler line.',
    inputs: FIRST_OF_ALL,
    from: 'grade',
    read: (reading) => reading.gradeHeld,
  },
  'needed-area': {
    title: 'Face of the cooler it needs',
    quantity: 'area',
    of: 'drive',
    equation: [
      'the smallest face of a generic core, last in the loop, with which pan and to-cooler line peak under “ease off”',
      'UA = UA per face · face',
    ],
    where: `UA per face: ${GENERIC_UA} at the reference point.`,
    source:
      'The model run with core after core. Generic cores: judgement, between published ratings of each construction; spread 25 %.',
    inputs: FIRST_OF_ALL,
    from: 'sizing',
    read: ({ needed }) => needed.faceAreaM2,
    parts: ({ needed }) => [part('Heat at the reference point', needed.heatW, 'heatRate')],
  },
  'needed-heat': {
    title: 'Heat of the cooler it needs, at the reference point',
    quantity: 'heatRate',
    of: 'drive',
    equation: [
      'Q = ε · C_min · 55.6 K',
      'reference point: oil 1.26e-4 m³/s at 93.3 °C, 55.6 K over air of 4 m/s and 1.184 kg/m³',
    ],
    where:
      'ε from UA of the needed core. Catalogue parts are restated at the same point, so that they compare.',
    source: EXCHANGER,
    inputs: FIRST_OF_ALL,
    from: 'sizing',
    read: ({ needed }) => needed.heatW,
    parts: ({ needed }) => [part('Conductance UA', needed.uaWK, 'conductance')],
  },
  'needed-ua': {
    title: 'Conductance UA of the cooler it needs',
    quantity: 'conductance',
    of: 'drive',
    equation: ['UA = UA per face · face, at the reference point'],
    where: 'UA: heat per degree between the streams of the exchanger.',
    source: EXCHANGER,
    inputs: FIRST_OF_ALL,
    from: 'sizing',
    read: ({ needed }) => needed.uaWK,
    parts: ({ needed }) => [part('Face', needed.faceAreaM2, 'area')],
  },
  'engine-rpm': {
    title: 'Engine speed',
    quantity: 'rotation',
    of: 'stretch',
    equation: [
      'turbine speed = road speed / tire radius · axle · transfer case · gear',
      'engine speed = turbine speed / SR; locked: turbine speed + slip',
      'the gear: the highest that holds locked, else the one that makes least heat without a screaming engine (tow); the tallest that holds (economy)',
    ],
    where:
      'A gear holds within 95 % of redline and of the torque left at this altitude. SR: speed ratio of the converter.',
    source:
      'Kinematics of the driveline. Torque at altitude: SAE J1349 (naturally aspirated) over the atmosphere of ISO 2533. Choice of gear: judgement.',
    inputs: [...DRIVELINE, ...CONVERTER, ...ENGINE, ...ROAD],
    read: ({ stretch }) => stretch.engineRpm,
    parts: ({ stretch }) => [
      part('Gear', stretch.gear, 'number'),
      part('Speed ratio', stretch.speedRatio, 'number'),
      part('Speed', stretch.speedMps, 'speed'),
    ],
  },
  'speed-ratio': {
    title: 'Speed ratio of the converter',
    quantity: 'number',
    of: 'stretch',
    equation: [
      'SR = turbine speed / engine speed',
      'the one SR at which the converter delivers the torque the road asks for',
      'λ0 · L(SR) · ω² · (1 + (TR0 − 1) · max(0, 1 − SR / SR_c)) = turbine torque needed',
    ],
    where:
      'λ0 from the stall speed; TR0: torque ratio at stall; SR_c: coupling point; L: capacity by SR. Locked it is 1 less the slip.',
    source: CONVERTER_SOURCE,
    inputs: [...CONVERTER, ...ENGINE, ...DRIVELINE, ...ROAD],
    read: ({ stretch }) => stretch.speedRatio,
    parts: ({ stretch }) => [part('Engine speed', stretch.engineRpm, 'rotation')],
  },
  'road-force': {
    title: 'Road force, as the weight it would lift',
    quantity: 'mass',
    of: 'stretch',
    equation: [
      'F = m g sin θ + C_rr m g cos θ + ½ ρ CdA (v + w)²',
      'shown as F / g',
      'ρ = p / (287.05 T), p = 101325 (1 − 2.25577e-5 h)^5.25588',
    ],
    where:
      'm: truck, cargo and trailer; θ: angle of the grade; C_rr: rolling resistance; CdA: drag area; v: speed; w: headwind; h: altitude.',
    source:
      'T. D. Gillespie, Fundamentals of Vehicle Dynamics, chapter 4; rolling resistance by surface after its table 4.1. Air: ISO 2533.',
    inputs: ROAD,
    read: ({ roadForceN }) => (roadForceN === null ? null : roadForceN / STANDARD_GRAVITY),
    parts: (reading) => roadParts(reading),
  },
} as const satisfies Record<string, Topic>

/** Grade, rolling and air apart, as weights, and the power they take together. */
function roadParts(reading: Reading): ExplainPart[] {
  const { roadLoad, roadSpeedMps, roadForceN } = reading
  if (roadLoad === null || roadForceN === null) return []
  const alone = (kept: Partial<typeof roadLoad>) =>
    roadForce({ ...roadLoad, rollingResistance: 0, dragAreaM2: 0, grade: 0, ...kept }, roadSpeedMps)
  const { grade, dragAreaM2 } = roadLoad
  const gradeN = alone({ grade })
  const airN = alone({ dragAreaM2 })
  return [
    part('Grade', gradeN / STANDARD_GRAVITY, 'mass'),
    part('Rolling', (roadForceN - gradeN - airN) / STANDARD_GRAVITY, 'mass'),
    part('Air', airN / STANDARD_GRAVITY, 'mass'),
    part('Power at the wheels', roadForceN * roadSpeedMps, 'power'),
  ]
}

export type ExplainId = keyof typeof TOPICS
export const EXPLAIN_IDS = Object.keys(TOPICS) as ExplainId[]
