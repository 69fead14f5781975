import type { Segment, SteadySegment, StopGoSegment } from '../schemas/heat-input'
import { AppError } from '../errors'
import {
  CALM_SHARE,
  PULL_AWAY_CALM_SHARE,
  anyGearHolds,
  brakedState,
  chooseGear,
  coastingState,
  demandAtOutput,
} from './gear-choice'
import type { DriveState } from './gear-choice'
import { torqueAt } from './engine'
import { DEFAULTS, resolveRollingResistance } from './resolve'
import type { Powertrain, RangeStep, Road } from './resolve'
import { roadForce } from './road-load'
import type { RoadLoad } from './road-load'
import type { SegmentKind } from './types'

/** What one segment asks of the truck, once for its whole length: it does not depend on the fluid temperatures. */

/** A segment's heat sources at the reference viscosity, unscaled [W], and what the cooling side must know. */
export interface OperatingPoint {
  kind: SegmentKind
  speedMps: number
  headwindMps: number
  speedHeld: boolean
  gear: number
  locked: boolean
  speedRatio: number
  engineSpeed: number
  /** min(1, engine speed over the speed at which the cooler feed saturates), averaged over a cycle. */
  feedShare: number
  enginePowerW: number
  converterW: number
  gearW: number
  spinW: number
  pumpW: number
  shiftW: number
  axleW: number
  transferCaseW: number
}

/** Slowest speed that is still driving [m/s]. */
const SLOWEST_SPEED_MPS = 0.1
/** Weakest pull-away that is still one [m/s²]. */
const WEAKEST_ACCELERATION_MPS2 = 0.05
/** How hard a truck slows for a stop [m/s²]. Judgement. */
const COAST_DECELERATION_MPS2 = 1.2
const PULL_AWAY_BINS = 8
const BISECTIONS = 60
/** Sixty halvings end far below what a double tells apart; bisection stops where nothing is gained [relative]. */
const RESOLUTION = 1e-13
/** An upshift slips its clutch for this long [s] against this inertia [kg m²]. Judgement. */
const SHIFT_DURATION_S = 0.6
const SHIFT_INERTIA_KG_M2 = 0.25

/** Levers and road of one segment, ready for use. */
export interface RoadPoint {
  load: RoadLoad
  range: RangeStep
  topGear: number
}

/** Reads road, wind and levers of a segment. */
export function roadPoint(powertrain: Powertrain, road: Road, grade: number): RoadPoint {
  return {
    load: {
      massKg: powertrain.massKg,
      dragAreaM2: powertrain.dragAreaM2,
      airDensityKgM3: powertrain.airDensityKgM3,
      rollingResistance: resolveRollingResistance(road),
      grade,
      headwindMps: road.headwindMps ?? 0,
    },
    range: powertrain.transferCase[road.range ?? 'high'],
    topGear: road.topGear ?? powertrain.gears.length,
  }
}

/** The state at a speed and acceleration: coasting where the road drives, the chosen gear otherwise. */
function stateAt(
  powertrain: Powertrain,
  road: RoadPoint,
  speedMps: number,
  acceleration: number,
  calmShare: number,
): DriveState | undefined {
  const force = roadForce(road.load, speedMps, acceleration)
  if (force <= 0) return coastingState(powertrain, road.range, speedMps, road.topGear)
  return chooseGear(
    powertrain,
    demandAtOutput(powertrain, road.range, force, speedMps),
    road.topGear,
    calmShare,
  )
}

function isHeld(powertrain: Powertrain, road: RoadPoint, speedMps: number, acceleration: number): boolean {
  const force = roadForce(road.load, speedMps, acceleration)
  if (force <= 0) return true
  return anyGearHolds(powertrain, demandAtOutput(powertrain, road.range, force, speedMps), road.topGear)
}

/** Largest argument that passes, between one that does and one that does not. */
export function bisect(passing: number, failing: number, passes: (value: number) => boolean): number {
  let [good, bad] = [passing, failing]
  for (let step = 0; step < BISECTIONS; step++) {
    const middle = 0.5 * (good + bad)
    if (Math.abs(bad - good) <= RESOLUTION * Math.abs(good)) break
    if (passes(middle)) good = middle
    else bad = middle
  }
  return good
}

/** Share of the full cooler feed at an engine speed. */
export function feedShareAt(powertrain: Powertrain, engineSpeed: number): number {
  return Math.min(1, engineSpeed / powertrain.feedSaturationSpeed)
}

/** An operating point that is one drive state for its whole length. */
export function pointOfState(
  powertrain: Powertrain,
  kind: SegmentKind,
  state: DriveState,
  speedMps: number,
  headwindMps: number,
  speedHeld: boolean,
): OperatingPoint {
  return {
    kind,
    speedMps,
    headwindMps,
    speedHeld,
    gear: state.gear,
    locked: state.locked,
    speedRatio: state.speedRatio,
    engineSpeed: state.impellerSpeed,
    feedShare: feedShareAt(powertrain, state.impellerSpeed),
    enginePowerW: (state.impellerTorque + state.pumpTorque) * state.impellerSpeed,
    converterW: state.converterW,
    gearW: state.gearW,
    spinW: state.spinW,
    pumpW: state.pumpW,
    shiftW: 0,
    axleW: state.axleW,
    transferCaseW: state.transferCaseW,
  }
}

/**
 * Steady driving. Where no gear holds the speed, the fastest that one does, found by stepping down 1 % at a time and
 * bisecting the last step.
 * @throws AppError cannot_climb_grade when that search reaches walking pace
 */
function steadyPoint(
  powertrain: Powertrain,
  segment: Pick<SteadySegment, 'speedMps' | 'grade'> & Road,
  path: string,
): OperatingPoint {
  const road = roadPoint(powertrain, segment, segment.grade)
  const asked = stateAt(powertrain, road, segment.speedMps, 0, CALM_SHARE)
  if (asked !== undefined)
    return pointOfState(powertrain, 'steady', asked, segment.speedMps, road.load.headwindMps, true)
  let failing = segment.speedMps
  let speed = failing * 0.99
  while (speed > SLOWEST_SPEED_MPS && !isHeld(powertrain, road, speed, 0)) {
    failing = speed
    speed *= 0.99
  }
  const held =
    speed > SLOWEST_SPEED_MPS
      ? bisect(speed, failing, (value) => isHeld(powertrain, road, value, 0))
      : undefined
  const state = held === undefined ? undefined : stateAt(powertrain, road, held, 0, CALM_SHARE)
  if (held === undefined || state === undefined)
    throw new AppError('cannot_climb_grade', {
      issues: [
        {
          path,
          message: `cannot climb this grade (${percent(segment.grade)}) at any speed; try a lower grade, a lighter load or low range`,
        },
      ],
    })
  return pointOfState(powertrain, 'steady', state, held, road.load.headwindMps, false)
}

const percent = (grade: number) => `${Number((100 * grade).toPrecision(3))} %`

/** Time-weighted sums over a stop-and-go cycle. */
interface CycleSums {
  timeS: number
  distanceM: number
  shiftJ: number
  engineAngle: number
  feedS: number
  engineJ: number
  converterJ: number
  gearJ: number
  spinJ: number
  pumpJ: number
  axleJ: number
  transferCaseJ: number
}

function addPhase(
  sums: CycleSums,
  powertrain: Powertrain,
  state: DriveState,
  timeS: number,
  speedMps: number,
) {
  sums.timeS += timeS
  sums.distanceM += timeS * speedMps
  sums.engineAngle += timeS * state.impellerSpeed
  sums.feedS += timeS * feedShareAt(powertrain, state.impellerSpeed)
  sums.engineJ += timeS * (state.impellerTorque + state.pumpTorque) * state.impellerSpeed
  sums.converterJ += timeS * state.converterW
  sums.gearJ += timeS * state.gearW
  sums.spinJ += timeS * state.spinW
  sums.pumpJ += timeS * state.pumpW
  sums.axleJ += timeS * state.axleW
  sums.transferCaseJ += timeS * state.transferCaseW
}

/** Acceleration and state of one pull-away bin. */
interface PullAway {
  acceleration: number
  state: DriveState
}

/** The acceleration asked for, or the largest some gear holds at a speed; undefined under the weakest. */
function pullAway(
  powertrain: Powertrain,
  road: RoadPoint,
  speedMps: number,
  asked: number,
): PullAway | undefined {
  const full = stateAt(powertrain, road, speedMps, asked, PULL_AWAY_CALM_SHARE)
  if (full !== undefined) return { acceleration: asked, state: full }
  const passes = (acceleration: number) => isHeld(powertrain, road, speedMps, acceleration)
  if (!passes(WEAKEST_ACCELERATION_MPS2)) return undefined
  const acceleration = bisect(WEAKEST_ACCELERATION_MPS2, asked, passes)
  const state = stateAt(powertrain, road, speedMps, acceleration, PULL_AWAY_CALM_SHARE)
  return state === undefined ? undefined : { acceleration, state }
}

/**
 * Energy an upshift leaves in its clutch.
 * Equation: ½ t T Δω + ½ J Δω², Δω the drop in turbine speed from the old gear to the new.
 * @param turbineTorque - T delivered in the new gear [N·m]
 * @param speedDrop - Δω [rad/s]
 * @returns energy [J]
 * Source: energy of a slipping clutch at constant torque (any machine-elements text); t and J are judgement.
 * Example (computed here): 300 N·m and 80 rad/s give 8000 J.
 */
export function upshiftEnergy(turbineTorque: number, speedDrop: number): number {
  return (
    0.5 * SHIFT_DURATION_S * turbineTorque * speedDrop + 0.5 * SHIFT_INERTIA_KG_M2 * speedDrop * speedDrop
  )
}

/** Pulls away from 0 to the cruise speed in equal speed bins and books each. */
function addPullAway(
  sums: CycleSums,
  powertrain: Powertrain,
  road: RoadPoint,
  topSpeed: number,
  asked: number,
  path: string,
) {
  const width = topSpeed / PULL_AWAY_BINS
  let previousGear: number | undefined
  for (let bin = 0; bin < PULL_AWAY_BINS; bin++) {
    const speed = (bin + 0.5) * width
    const pulled = pullAway(powertrain, road, speed, asked)
    if (pulled === undefined)
      throw new AppError('cannot_pull_away', {
        issues: [
          {
            path,
            message: `cannot pull away on this grade (${percent(road.load.grade)}); try a lower grade, a lighter load or low range`,
          },
        ],
      })
    const { state } = pulled
    addPhase(sums, powertrain, state, width / pulled.acceleration, speed)
    if (previousGear !== undefined && state.gear > previousGear) {
      const oldRatio = powertrain.gears[previousGear - 1]!.ratio
      const newRatio = powertrain.gears[state.gear - 1]!.ratio
      sums.shiftJ += upshiftEnergy(state.turbineTorque, state.turbineSpeed * (oldRatio / newRatio - 1))
    }
    previousGear = state.gear
  }
}

/**
 * Stop and go: pull-away in eight bins, cruise, coast down, stand; everything averaged over the cycle's time.
 * @throws AppError cannot_pull_away, cannot_hold_cruise
 */
function stopGoPoint(powertrain: Powertrain, segment: StopGoSegment, path: string): OperatingPoint {
  const road = roadPoint(powertrain, segment, segment.grade ?? 0)
  const cycleM = 1000 / segment.stopsPerKm
  const asked = segment.accelerationMps2 ?? DEFAULTS.accelerationMps2
  const cap = Math.sqrt(cycleM / (1 / (2 * asked) + 1 / (2 * COAST_DECELERATION_MPS2)))
  const topSpeed = Math.min(segment.speedMps, cap)
  const sums: CycleSums = {
    timeS: 0,
    distanceM: 0,
    shiftJ: 0,
    engineAngle: 0,
    feedS: 0,
    engineJ: 0,
    converterJ: 0,
    gearJ: 0,
    spinJ: 0,
    pumpJ: 0,
    axleJ: 0,
    transferCaseJ: 0,
  }
  addPullAway(sums, powertrain, road, topSpeed, asked, path)
  const coastM = topSpeed ** 2 / (2 * COAST_DECELERATION_MPS2)
  const cruise = stateAt(powertrain, road, topSpeed, 0, CALM_SHARE)
  if (cruise === undefined)
    throw new AppError('cannot_hold_cruise', {
      issues: [
        {
          path,
          message: `cannot hold ${topSpeed.toPrecision(3)} m/s between stops; try a lower speedMps`,
        },
      ],
    })
  addPhase(sums, powertrain, cruise, Math.max(0, cycleM - sums.distanceM - coastM) / topSpeed, topSpeed)
  const coasting = coastingState(powertrain, road.range, topSpeed / 2, road.topGear)
  addPhase(sums, powertrain, coasting, topSpeed / COAST_DECELERATION_MPS2, topSpeed / 2)
  const standing =
    segment.inGear === false
      ? coastingState(powertrain, road.range, 0, road.topGear)
      : brakedState(powertrain, powertrain.idleSpeed)
  addPhase(sums, powertrain, standing, segment.idleS ?? DEFAULTS.idleS, 0)
  return averagePoint(sums, cruise, road.load.headwindMps)
}

function averagePoint(sums: CycleSums, cruise: DriveState, headwindMps: number): OperatingPoint {
  const { timeS } = sums
  return {
    kind: 'stopGo',
    speedMps: sums.distanceM / timeS,
    headwindMps,
    speedHeld: true,
    gear: cruise.gear,
    locked: cruise.locked,
    speedRatio: cruise.speedRatio,
    engineSpeed: sums.engineAngle / timeS,
    feedShare: sums.feedS / timeS,
    enginePowerW: sums.engineJ / timeS,
    converterW: sums.converterJ / timeS,
    gearW: sums.gearJ / timeS,
    spinW: sums.spinJ / timeS,
    pumpW: sums.pumpJ / timeS,
    shiftW: sums.shiftJ / timeS,
    axleW: sums.axleJ / timeS,
    transferCaseW: sums.transferCaseJ / timeS,
  }
}

/**
 * Engine speed of a stall test: where throttle × derated torque less pump torque meets the converter; idle at least.
 * @param powertrain - engine, converter, pump
 * @param throttle - 0 to 1
 * @returns impeller speed [rad/s]
 */
function stallSpeed(powertrain: Powertrain, throttle: number): number {
  const surplus = (speed: number) => {
    const state = brakedState(powertrain, speed)
    return (
      throttle * powertrain.torqueShare * torqueAt(powertrain.torqueCurve, speed) -
      state.pumpTorque -
      state.impellerTorque
    )
  }
  let low = powertrain.idleSpeed
  if (surplus(low) <= 0) return low
  const step = 0.02 * powertrain.redlineSpeed
  let high = low + step
  while (surplus(high) > 0) {
    low = high
    high += step
  }
  return bisect(low, high, (speed) => surplus(speed) > 0)
}

/**
 * Operating point of one segment.
 * @param powertrain - resolved truck and load
 * @param segment - of the duty
 * @param path - where it stands in the input, for error messages
 * @returns heats and speeds that hold for the whole segment
 * @throws AppError cannot_climb_grade, cannot_pull_away, cannot_hold_cruise
 */
export function operatingPoint(powertrain: Powertrain, segment: Segment, path: string): OperatingPoint {
  switch (segment.kind) {
    case 'steady':
      return steadyPoint(powertrain, segment, path)
    case 'stopGo':
      return stopGoPoint(powertrain, segment, path)
    case 'stall': {
      const state = brakedState(powertrain, stallSpeed(powertrain, segment.throttle))
      return pointOfState(powertrain, 'stall', state, 0, segment.headwindMps ?? 0, true)
    }
    case 'idle': {
      const road = roadPoint(powertrain, segment, 0)
      const state =
        segment.inGear === true
          ? brakedState(powertrain, powertrain.idleSpeed)
          : coastingState(powertrain, road.range, 0, road.topGear)
      return pointOfState(powertrain, 'idle', state, 0, road.load.headwindMps, true)
    }
  }
}
