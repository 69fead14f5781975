import type {
  Build,
  Cooler,
  Cooling,
  FluidLife,
  HeatInput,
  Segment,
  Start,
  Surface,
} from '../schemas/heat-input'
import { AppError } from '../errors'
import { airDensity, naturalTorqueShare, pressureAtAltitude } from './air'
import type { Converter } from './converter'
import { makeTorqueCurve, torqueAt } from './engine'
import { makeOil } from './fluids'
import type { Oil } from './fluids'
import { pumpTorque } from './parasitic-losses'
import type { Pump } from './parasitic-losses'
import type { Pchip } from './pchip'
import { ROLLING_RESISTANCE } from './road-load'

/**
 * Every default of the model, in one place; the input itself is left as typed. Values without a source are common
 * practice or judgement, for a light truck.
 */
export const DEFAULTS = {
  couplingPoint: 0.88,
  converterHeatCapacityJK: 12_000,
  converterOilShare: 0.35,
  slipRpm: 0,
  caseAreaM2: 0.7,
  shiftStyle: 'tow',
  pump: {
    displacementM3PerRev: 20e-6,
    linePressureMinPa: 0.55e6,
    linePressureMaxPa: 1.5e6,
  },
  transferCase: { surfaceM2: 0.4, heatCapacityJK: 25_000 },
  axle: { surfaceM2: 1.1, heatCapacityJK: 45_000 },
  coolantHeatRatio: { petrol: 0.95, diesel: 0.65 },
  stackRamFraction: 0.18,
  remoteRamFraction: 0.12,
  ratingOilInC: 93.3,
  fittingsK: 6,
  roughnessM: 1e-5,
  feed: { pressureMaxPa: 200_000, saturationRpm: 1500, openFlowM3S: 1.6e-4 },
  pumpRpm: 3000,
  thermostat: { openC: 88, fullC: 98 },
  condenserW: 6000,
  underbodyRiseK: 15,
  coolantHeatCapacityJK: 150_000,
  surface: 'pavement',
  accelerationMps2: 1,
  idleS: 15,
  fluidLife: {
    referenceLifeM: 160_934_400,
    referenceC: 79.444,
    halvingK: 11.111,
    referenceSpeedMps: 15.6464,
  },
} as const

const RAD_S_PER_RPM = Math.PI / 30
/** Metal of the transmission case, aluminium with steel inside [J/(kg K)]. Common practice, no source (480-900). */
const CASE_HEAT_CAPACITY_J_KG_K = 650

/** Air around the truck. */
export interface Site {
  ambientC: number
  airDensityKgM3: number
  underbodyC: number
}

/** Everything the operating points need, defaults filled in; angular speeds in rad/s. */
export interface Powertrain {
  massKg: number
  dragAreaM2: number
  tyreRadiusM: number
  airDensityKgM3: number
  torqueCurve: Pchip
  /** Share of sea-level torque that is left. */
  torqueShare: number
  idleSpeed: number
  redlineSpeed: number
  converter: Converter
  lockup: {
    minGear: number
    minSpeedMps: number
    maxTurbineTorqueNm: number
    slipSpeed: number
  } | null
  gears: readonly { ratio: number; efficiency: number }[]
  economy: boolean
  ratedTorqueNm: number
  pump: Pump
  transferCase: { high: RangeStep; low: RangeStep }
  axleRatio: number
  axleEfficiency: number
  feedSaturationSpeed: number
}

export interface RangeStep {
  ratio: number
  efficiency: number
}

/** Everything the balances need besides the cooling circuit. */
export interface ThermalMasses {
  oil: Oil
  fluidVolumeM3: number
  caseHeatCapacityJK: number
  caseAreaM2: number
  converterHeatCapacityJK: number
  converterOilShare: number
  coolantHeatCapacityJK: number
  coolantHeatRatio: number
  axle: { surfaceM2: number; heatCapacityJK: number }
  transferCase: { surfaceM2: number; heatCapacityJK: number }
}

export interface Calibrated {
  heatScale: number
  coolerScale: number
  flowScale: number
}

export interface StartTemperatures {
  sumpC: number
  coolantC: number
  axleC: number
}

export interface ResolvedFluidLife {
  referenceLifeM: number
  referenceC: number
  halvingK: number
  referenceSpeedMps: number
}

/** One input with every default filled in. */
export interface Resolved {
  site: Site
  airConditioning: boolean
  powertrain: Powertrain
  masses: ThermalMasses
  coolers: readonly Cooler[]
  cooling: Cooling
  calibration: Calibrated
  start: StartTemperatures
  fluidLife: ResolvedFluidLife
}

function resolveConverter(build: Build, curve: Pchip, pump: Pump, ratedTorqueNm: number): Converter {
  const stallSpeed = build.converter.stallRpm * RAD_S_PER_RPM
  const stallTorque =
    build.converter.stallTorqueNm ?? defaultStallTorque(torqueAt(curve, stallSpeed), pump, ratedTorqueNm)
  if (!(stallTorque > 0))
    throw new AppError('model_refuses', {
      message: 'the engine cannot turn its own transmission pump at the stall speed',
      issues: [
        {
          path: 'build.converter.stallRpm',
          message: `the engine makes too little torque at ${build.converter.stallRpm} rev/min to carry the pump; give stallTorqueNm, or a torque curve that is above it`,
        },
      ],
    })
  return {
    stallCapacity: stallTorque / stallSpeed ** 2,
    stallTorqueRatio: build.converter.stallTorqueRatio,
    couplingPoint: build.converter.couplingPoint ?? DEFAULTS.couplingPoint,
  }
}

/**
 * Impeller torque at stall when nobody measured it: what full-throttle, sea-level torque leaves after the pump.
 * Equation: T + T_pump(T) = T_engine; T_pump is linear in T up to the rated torque, constant above.
 * @param engineTorque - T_engine at stall speed [N·m]
 * @param pump - its pressures and displacement
 * @param ratedTorqueNm - torque at which line pressure is full [N·m]
 * @returns T [N·m]; not positive when the pump alone asks for more
 * Example (computed here): 400 N·m with the default pump rated for 455 N·m leaves 394.9 N·m.
 */
export function defaultStallTorque(engineTorque: number, pump: Pump, ratedTorqueNm: number): number {
  const unloaded = pumpTorque(pump, 0, ratedTorqueNm)
  const full = pumpTorque(pump, ratedTorqueNm, ratedTorqueNm)
  const torque = (engineTorque - unloaded) / (1 + (full - unloaded) / ratedTorqueNm)
  return torque > ratedTorqueNm ? engineTorque - full : torque
}

function resolvePowertrain(input: HeatInput, site: Site, pressurePa: number): Powertrain {
  const { build, load } = input
  const { engine, transmission, transferCase, converter } = build
  const torqueCurve = makeTorqueCurve(engine)
  const ratedTorqueNm = transmission.ratedInputTorqueNm ?? engine.peakTorqueNm
  const pump = transmission.pump ?? DEFAULTS.pump
  const lockup = converter.lockup
  return {
    massKg: build.vehicle.massKg + (load?.cargoMassKg ?? 0) + (load?.trailerMassKg ?? 0),
    dragAreaM2: build.vehicle.dragAreaM2 + (load?.trailerDragAreaM2 ?? 0),
    tyreRadiusM: build.vehicle.tyreRadiusM,
    airDensityKgM3: site.airDensityKgM3,
    torqueCurve,
    torqueShare: engine.induction === 'natural' ? naturalTorqueShare(pressurePa, site.ambientC) : 1,
    idleSpeed: engine.idleRpm * RAD_S_PER_RPM,
    redlineSpeed: engine.redlineRpm * RAD_S_PER_RPM,
    converter: resolveConverter(build, torqueCurve, pump, ratedTorqueNm),
    lockup:
      lockup?.fitted === true
        ? {
            minGear: lockup.minGear ?? 1,
            minSpeedMps: lockup.minSpeedMps ?? 0,
            maxTurbineTorqueNm: lockup.maxTurbineTorqueNm ?? Infinity,
            slipSpeed: (lockup.slipRpm ?? DEFAULTS.slipRpm) * RAD_S_PER_RPM,
          }
        : null,
    gears: transmission.gears,
    economy: (transmission.shiftStyle ?? DEFAULTS.shiftStyle) === 'economy',
    ratedTorqueNm,
    pump,
    transferCase: {
      high: {
        ratio: transferCase.highRatio,
        efficiency: transferCase.efficiencyHigh,
      },
      low: {
        ratio: transferCase.lowRatio,
        efficiency: transferCase.efficiencyLow,
      },
    },
    axleRatio: build.axle.ratio,
    axleEfficiency: build.axle.efficiency,
    feedSaturationSpeed: (build.cooling.feed ?? DEFAULTS.feed).saturationRpm * RAD_S_PER_RPM,
  }
}

function resolveMasses(build: Build): ThermalMasses {
  const { transmission, converter, engine, cooling } = build
  return {
    oil: makeOil(transmission.fluid),
    fluidVolumeM3: transmission.fluidVolumeM3,
    caseHeatCapacityJK: CASE_HEAT_CAPACITY_J_KG_K * transmission.dryMassKg,
    caseAreaM2: transmission.caseAreaM2 ?? DEFAULTS.caseAreaM2,
    converterHeatCapacityJK: converter.heatCapacityJK ?? DEFAULTS.converterHeatCapacityJK,
    converterOilShare: converter.oilShare ?? DEFAULTS.converterOilShare,
    coolantHeatCapacityJK: cooling.coolantHeatCapacityJK ?? DEFAULTS.coolantHeatCapacityJK,
    coolantHeatRatio: engine.coolantHeatRatio ?? DEFAULTS.coolantHeatRatio[engine.fuel],
    axle: { ...DEFAULTS.axle, ...pickGiven(build.axle) },
    transferCase: {
      ...DEFAULTS.transferCase,
      ...pickGiven(build.transferCase),
    },
  }
}

function pickGiven(part: { surfaceM2?: number; heatCapacityJK?: number }) {
  return {
    ...(part.surfaceM2 === undefined ? {} : { surfaceM2: part.surfaceM2 }),
    ...(part.heatCapacityJK === undefined ? {} : { heatCapacityJK: part.heatCapacityJK }),
  }
}

/** Start temperatures; whatever is not given starts at ambient. */
export function resolveStart(start: Start | undefined, ambientC: number): StartTemperatures {
  return {
    sumpC: start?.sumpC ?? ambientC,
    coolantC: start?.coolantC ?? ambientC,
    axleC: start?.axleC ?? ambientC,
  }
}

function resolveFluidLife(given: FluidLife | undefined): ResolvedFluidLife {
  const { fluidLife } = DEFAULTS
  return {
    referenceLifeM: given?.referenceLifeM ?? fluidLife.referenceLifeM,
    referenceC: given?.referenceC ?? fluidLife.referenceC,
    halvingK: given?.halvingK ?? fluidLife.halvingK,
    referenceSpeedMps: given?.referenceSpeedMps ?? fluidLife.referenceSpeedMps,
  }
}

/** Coefficient of rolling resistance of a stretch of road: its own, or that of its surface. */
export function resolveRollingResistance(road: { surface?: Surface; rollingResistance?: number }): number {
  return road.rollingResistance ?? ROLLING_RESISTANCE[road.surface ?? DEFAULTS.surface]
}

/** The part of a segment that every kind has. */
export type Road = Pick<Segment, 'surface' | 'rollingResistance' | 'headwindMps' | 'range' | 'topGear'>

/**
 * Fills in every default of an input that its schema has accepted.
 * @param input - as typed
 * @returns the resolved input; `input` itself is not changed
 * @throws AppError model_refuses when the engine cannot turn its own pump at stall
 */
export function resolveInput(input: HeatInput): Resolved {
  const { duty, calibration } = input
  const pressurePa = pressureAtAltitude(duty.altitudeM)
  const site = {
    ambientC: duty.ambientC,
    airDensityKgM3: airDensity(pressurePa, duty.ambientC),
    underbodyC: duty.ambientC + (input.build.cooling.underbodyRiseK ?? DEFAULTS.underbodyRiseK),
  }
  return {
    site,
    airConditioning: duty.airConditioning ?? false,
    powertrain: resolvePowertrain(input, site, pressurePa),
    masses: resolveMasses(input.build),
    coolers: input.build.cooling.coolers,
    cooling: input.build.cooling,
    calibration: {
      heatScale: calibration?.heatScale ?? 1,
      coolerScale: calibration?.coolerScale ?? 1,
      flowScale: calibration?.flowScale ?? 1,
    },
    start: resolveStart(duty.start, duty.ambientC),
    fluidLife: resolveFluidLife(input.fluidLife),
  }
}
