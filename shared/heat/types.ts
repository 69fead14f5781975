import type { Climb, RoadConditions } from '../schemas/estimate'
import type { AirConstruction, HeatInput } from '../schemas/heat-input'

/** Answers of the model, as they cross the interface: SI, temperatures in °C. */

/** Everything the model knows about one instant. */
export interface State {
  sumpC: number
  caseC: number
  coolantC: number
  axleC: number
  transferCaseC: number
  /** The hot line: what leaves the converter. */
  coolerInletC: number
  coolerReturnC: number
  coolerFlowM3S: number
  heatGeneratedW: number
  heatSpinW: number
  /** Sum over the coolers; negative where the coolant warms the oil. */
  heatCoolersW: number
  /** One entry per cooler, in the order of the input. */
  coolerHeatW: number[]
  heatPanCaseW: number
  heatEngineToCoolantW: number
  heatRadiatorW: number
  faceVelocityMps: number
  /** 0 closed, 1 fully open. */
  thermostatOpen: number
  radiatorOutC: number
}

/** Where the heat of one segment comes from, after `heatScale` (axle and transfer case are not scaled). */
export interface HeatSources {
  converterW: number
  gearW: number
  /** At the segment's end: it falls as the oil thins. */
  spinW: number
  pumpW: number
  shiftW: number
  axleW: number
  transferCaseW: number
}

export type SegmentKind = 'steady' | 'stopGo' | 'stall' | 'idle'

export interface SegmentResult {
  kind: SegmentKind
  /** Distance over time. */
  speedMps: number
  speedHeld: boolean
  gear: number
  locked: boolean
  engineRpm: number
  speedRatio: number
  durationS: number
  distanceM: number
  heat: HeatSources
  peakSumpC: number
  peakCoolerInletC: number
  end: State
  /** Where it would settle if it never ended; none for a stall. */
  equilibrium: State | null
}

/** Temperatures along the drive cycle, column by column. */
export interface Series {
  timeS: number[]
  sumpC: number[]
  coolerInletC: number[]
  coolerReturnC: number[]
  coolantC: number[]
  axleC: number[]
  transferCaseC: number[]
}

/** What a chart on a shop wall would say: distance to a fluid change at one temperature [m]. */
export interface WallChart {
  atMeanM: number
  atPeakM: number
}

/** A doubtful result, in words; every code is listed in `warnings.ts`. */
export interface Warning {
  code: WarningCode
  message: string
  value?: number
  limit?: number
  /** Path of what it is about, such as `duty.segments.2`. */
  at?: string
}

export type WarningCode =
  | 'speed_not_held'
  | 'coolant_hot'
  | 'coolant_over_limit'
  | 'hot_line_over_limit_pan_fine'
  | 'unlocked_other_gear_cooler'
  | 'grade_above_validated_range'
  | 'limited_by_oil_flow'
  | 'rating_misfit'
  | 'bypass_hides_cooler'
  | 'over_cooled'
  | 'cooler_flow_low'
  | 'coolant_heats_oil'
  | 'temperature_beyond_data'
  | 'engine_power_exceeds_torque'

export interface Estimate {
  modelVersion: string
  segments: SegmentResult[]
  series: Series
  peakSumpC: number
  peakCoolerInletC: number
  /** Time-mean over the duty. */
  meanSumpC: number
  totalS: number
  distanceM: number
  /** Share of the fluid's life one duty uses. */
  fluidDamage: number
  fluidDamageSumpOnly: number
  wallChart: WallChart
  cyclesToFluidChange: number
  hoursToFluidChange: number
  /** null where the duty covers no distance. */
  distanceToFluidChangeM: number | null
  warnings: Warning[]
}

export interface EstimateOptions {
  /** Longest step of the series [s]; 10 unless asked otherwise. */
  stepS?: number
}

/** One grade of a sweep that the truck can climb. */
export interface SweepAnswerPoint {
  grade: number
  speedMps: number
  speedHeld: boolean
  gear: number
  locked: boolean
  sumpC: number
  coolerInletC: number
  coolantC: number
  /** Heat made in the transmission. */
  heatW: number
}

/** One grade of a sweep that it cannot, and why. */
export interface SweepErrorPoint {
  grade: number
  error: string
}

export type SweepPoint = SweepAnswerPoint | SweepErrorPoint

export interface Sweep {
  points: SweepPoint[]
}

export type TargetName = 'sumpC' | 'coolerInletC'

export interface Sizing {
  /** 0 when the targets hold already. */
  faceAreaM2: number
  /** Heat it carries at the reference point. */
  heatW: number
  uaWK: number
  /** The target that decided; absent when all hold already. */
  decidedBy?: TargetName
}

export interface Replay {
  timeS: number[]
  sumpC: number[]
  coolerInletC: number[]
  coolantC: number[]
  /** Samples whose demand was more than the engine has; their force was scaled down to what it has. */
  forceLimitedSamples: number
  /** Samples whose logged engine speed and gear contradict the road speed; the logged values were left out. */
  contradictedSamples: number
}

/** All coupled temperatures at the foot of a climb that begins in the middle of a drive; a `State` has them. */
export type FootOfClimb = Pick<State, 'sumpC' | 'coolerInletC' | 'caseC' | 'coolantC'>

/** What `findGradeHeld` may end at. */
export type GradeLimit = 'sumpC' | 'coolerInletC' | 'speed' | 'none'

export interface GradeHeldRequest {
  input: HeatInput
  speedMps: number
  limits: { sumpC?: number; coolerInletC?: number }
  /** With it temperatures are those at the top of a climb of that length, without it at equilibrium. */
  climb?: Climb
  /** In place of the climb's start: where the drive before it has left every temperature. */
  foot?: FootOfClimb
  segment?: RoadConditions
  /** Steepest grade looked at; 0.3 unless asked otherwise. */
  maxGrade?: number
}

export interface GradeHeld {
  /** Steepest grade that keeps the limits and holds the speed; null when not even the flat does. */
  grade: number | null
  /** Which limit ends it; `none` when even `maxGrade` is held. */
  endedBy: GradeLimit
}

/** One rating at conditions a maker chose. */
export interface MakerRating {
  heatW: number
  inletDifferenceK: number
  oilFlowM3S: number
  airVelocityMps: number
  pressureDropPa: number
  oilInC?: number
}

export interface RatedPart {
  construction: AirConstruction
  faceAreaM2: number
  airShare?: number
  ratings: MakerRating[]
}

/** A part restated at the common reference point. */
export interface RestatedPart {
  heatW: number
  uaWK: number
  airShare: number
  pressureDropPa: number
  /** More than 9.5 kW is limited by oil flow, not by size. */
  limitedByOilFlow: boolean
  /** Computed over stated heat, less 1, one entry per rating. */
  misfits: { misfit: number; marked: boolean }[]
  warnings: Warning[]
}
