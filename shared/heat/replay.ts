import type { ReplayRequest, Trace } from '../schemas/estimate'
import { CONVERTER, COOLANT, COUPLED, SUMP } from './balances'
import type { ThermalPoint } from './balances'
import { torqueRatio } from './converter'
import {
  CALM_SHARE,
  chooseGear,
  coastingState,
  demandAtOutput,
  lockedState,
  makeState,
  turbineTorqueNeeded,
  unlockedState,
  withinEngine,
} from './gear-choice'
import type { DriveState, OutputDemand } from './gear-choice'
import { integrate } from './integrator'
import { SharedLoopTables } from './loop-flow'
import { bisect, pointOfState, roadPoint } from './operating-point'
import type { RoadPoint } from './operating-point'
import type { Powertrain } from './resolve'
import { roadForce } from './road-load'
import { isRoadPerSample, traceGrades, traceRoad } from './trace'
import { makeThermal, makeTruck, startTemperatures } from './truck'
import type { Replay } from './types'

/** Replays a logged drive, piecewise constant between its samples. */

/** Mean speed under which a truck counts as standing [m/s]. */
const STANDING_MPS = 0.1
/** A turbine faster than the logged engine by more than this contradicts the road speed. */
const CONTRADICTION = 1.1
/** An engine slower than this share of idle does not run; nothing can be read from it. */
const RUNNING_SHARE = 0.5
/** An explicit step is kept up to this estimated error [K] and this stiffness (rate constant × length). */
const STEP_ERROR_K = 1e-3
const STEP_STIFFNESS = 0.6
const LONGEST_EXPLICIT_S = 10
/** Change of the sump over which the oil loop may be taken as it was [K]. */
const LOOP_KEPT_K = 0.02

/** What the log says beside speed and grade; engine speed in rad/s. */
interface Logged {
  gear: number | undefined
  engineSpeed: number | undefined
}

/** Below this share of its force a demand is no longer driving. */
const SMALLEST_FORCE_SHARE = 1e-6

const NOTHING_LOGGED: Logged = { gear: undefined, engineSpeed: undefined }

/** A gear with the engine speed of the log: the speed ratio follows, torques from the demand. */
function stateAtSpeed(
  powertrain: Powertrain,
  demand: OutputDemand,
  gear: number,
  engineSpeed: number,
): DriveState {
  const { stallTorqueRatio, couplingPoint } = powertrain.converter
  const turbineSpeed = demand.outputSpeed * powertrain.gears[gear - 1]!.ratio
  const speedRatio = Math.min(1, turbineSpeed / engineSpeed)
  const needed = turbineTorqueNeeded(powertrain, demand, gear, turbineSpeed)
  const impellerTorque = needed / torqueRatio(speedRatio, stallTorqueRatio, couplingPoint)
  const state = makeState(powertrain, demand, gear, false, turbineSpeed, engineSpeed, impellerTorque, needed)
  state.converterW = Math.max(0, state.converterW)
  return state
}

/** The state of a logged gear: locked where that is allowed and the engine carries it, unlocked otherwise. */
function stateInGear(powertrain: Powertrain, demand: OutputDemand, gear: number): DriveState {
  const locked = lockedState(powertrain, demand, gear)
  if (locked !== undefined && withinEngine(powertrain, locked)) return locked
  return unlockedState(powertrain, demand, gear)
}

/** The gear in which the engine would turn nearest to its logged speed, locked or not. */
function gearNearSpeed(
  powertrain: Powertrain,
  demand: OutputDemand,
  topGear: number,
  engineSpeed: number,
): number {
  let best = 1
  let least = Infinity
  for (let gear = 1; gear <= topGear; gear++)
    for (const state of [lockedState(powertrain, demand, gear), unlockedState(powertrain, demand, gear)]) {
      const distance = state === undefined ? Infinity : Math.abs(state.impellerSpeed - engineSpeed)
      if (distance < least) [best, least] = [gear, distance]
    }
  return best
}

/** The state that carries a force as the log has it, or undefined where the engine does not have that much. */
function drivenState(
  powertrain: Powertrain,
  road: RoadPoint,
  demand: OutputDemand,
  logged: Logged,
): DriveState | undefined {
  const { gear, engineSpeed } = logged
  if (gear === undefined && engineSpeed === undefined)
    return chooseGear(powertrain, demand, road.topGear, CALM_SHARE)
  const state =
    engineSpeed === undefined
      ? stateInGear(powertrain, demand, gear!)
      : stateAtSpeed(
          powertrain,
          demand,
          gear ?? gearNearSpeed(powertrain, demand, road.topGear, engineSpeed),
          engineSpeed,
        )
  return withinEngine(powertrain, state) ? state : undefined
}

/** Coasting or standing as the log has it. */
function restingState(powertrain: Powertrain, road: RoadPoint, speedMps: number, logged: Logged): DriveState {
  const state = coastingState(powertrain, road.range, speedMps, logged.gear ?? road.topGear)
  if (logged.engineSpeed === undefined) return state
  return {
    ...state,
    impellerSpeed: logged.engineSpeed,
    speedRatio: Math.min(1, state.turbineSpeed / logged.engineSpeed),
    pumpW: state.pumpTorque * logged.engineSpeed,
  }
}

/** Whether logged engine speed and gear cannot be true at a road speed: the turbine would outrun the engine. */
function contradicts(powertrain: Powertrain, road: RoadPoint, speedMps: number, logged: Logged): boolean {
  const { gear, engineSpeed } = logged
  if (engineSpeed === undefined) return false
  if (engineSpeed < RUNNING_SHARE * powertrain.idleSpeed) return true
  const { ratio } = powertrain.gears[(gear ?? road.topGear) - 1]!
  const turbineSpeed = (speedMps / powertrain.tyreRadiusM) * powertrain.axleRatio * road.range.ratio * ratio
  return turbineSpeed > CONTRADICTION * engineSpeed
}

interface SampleCounts {
  forceLimited: number
  contradicted: number
}

/** State between two samples; counts what had to be bent. */
function sampleState(
  powertrain: Powertrain,
  road: RoadPoint,
  speedMps: number,
  acceleration: number,
  said: Logged,
  counts: SampleCounts,
): DriveState {
  let logged = said
  if (contradicts(powertrain, road, speedMps, logged)) {
    counts.contradicted++
    logged = NOTHING_LOGGED
  }
  const force = speedMps > 0 ? roadForce(road.load, speedMps, acceleration) : 0
  if (force <= 0) return restingState(powertrain, road, speedMps, logged)
  const state = drivenState(powertrain, road, demandAtOutput(powertrain, road.range, force, speedMps), logged)
  if (state !== undefined) return state
  counts.forceLimited++
  return limitedState(powertrain, road, speedMps, force, logged)
}

/** The largest share of a force that the engine has; resting where it has none at this speed. */
function limitedState(
  powertrain: Powertrain,
  road: RoadPoint,
  speedMps: number,
  force: number,
  logged: Logged,
): DriveState {
  const stateOf = (share: number) =>
    drivenState(powertrain, road, demandAtOutput(powertrain, road.range, share * force, speedMps), logged)
  const carries = (share: number) => stateOf(share) !== undefined
  const share = carries(SMALLEST_FORCE_SHARE) ? bisect(SMALLEST_FORCE_SHARE, 1, carries) : undefined
  const state = share === undefined ? undefined : stateOf(share)
  return state ?? restingState(powertrain, road, speedMps, logged)
}

const first = new Float64Array(COUPLED)
const second = new Float64Array(COUPLED)
const ahead = new Float64Array(COUPLED)

/**
 * Moves the temperatures over one sample. Between samples of a log they hardly move: Heun's explicit step does, and
 * where it would not be exact or stable the stiff integrator takes over.
 * Source: K. Heun (1900); E. Hairer, S. Nørsett & G. Wanner, Solving Ordinary Differential Equations I, II.1.
 */
function advance(thermal: ThermalPoint, temperatures: Float64Array, lengthS: number): void {
  if (lengthS <= LONGEST_EXPLICIT_S) {
    thermal.rates(temperatures, first)
    for (let k = 0; k < COUPLED; k++) ahead[k] = temperatures[k]! + lengthS * first[k]!
    if (Math.abs(ahead[SUMP]! - temperatures[SUMP]!) < LOOP_KEPT_K) thermal.ratesWithLoopKept(ahead, second)
    else thermal.rates(ahead, second)
    let fastest = 1e-9
    let change = 0
    for (let k = 0; k < COUPLED; k++) {
      fastest = Math.max(fastest, Math.abs(first[k]!))
      change = Math.max(change, Math.abs(second[k]! - first[k]!))
    }
    const stiffness = change / fastest
    if (stiffness < STEP_STIFFNESS && (stiffness * change * lengthS) / 6 < STEP_ERROR_K) {
      for (let k = 0; k < COUPLED; k++) temperatures[k]! += 0.5 * lengthS * (first[k]! + second[k]!)
      return
    }
  }
  integrate(thermal, temperatures, lengthS, () => undefined)
}

/** What the log says beside speed and grade between sample `index` and the next. */
function loggedAt(trace: Trace, index: number): Logged {
  const { gear, engineRpm } = trace
  if (gear === undefined && engineRpm === undefined) return NOTHING_LOGGED
  return {
    gear: gear?.[index],
    engineSpeed:
      engineRpm === undefined
        ? undefined
        : (0.5 * (engineRpm[index]! + engineRpm[index + 1]!) * Math.PI) / 30,
  }
}

/**
 * Temperatures along a logged drive.
 * @param request - input and trace: time, speed, grade or altitude, optionally engine speed and gear
 * @returns temperatures at every sample, and how many samples had to be bent
 * @throws AppError rating_impossible, model_refuses
 */
export function replay(request: ReplayRequest): Replay {
  const { input, trace } = request
  const truck = makeTruck(input)
  const { powertrain, start } = truck.resolved
  const grades = traceGrades(trace)
  const temperatures = startTemperatures(start)
  const thermal = makeThermal(truck)
  const tables = new SharedLoopTables(truck.system.loop)
  const counts = { forceLimited: 0, contradicted: 0 }
  const samples = trace.timeS.length
  const changing = isRoadPerSample(trace)
  let road = roadPoint(powertrain, traceRoad(trace, 0), 0)
  const answer = {
    timeS: [...trace.timeS],
    sumpC: new Array<number>(samples),
    coolerInletC: new Array<number>(samples),
    coolantC: new Array<number>(samples),
  }
  for (let index = 0; ; index++) {
    answer.sumpC[index] = temperatures[SUMP]!
    answer.coolerInletC[index] = temperatures[CONVERTER]!
    answer.coolantC[index] = temperatures[COOLANT]!
    if (index === samples - 1) break
    const lengthS = trace.timeS[index + 1]! - trace.timeS[index]!
    const mean = 0.5 * (trace.speedMps[index]! + trace.speedMps[index + 1]!)
    const speedMps = mean < STANDING_MPS ? 0 : mean
    if (changing) road = roadPoint(powertrain, traceRoad(trace, index), 0)
    road.load.grade = 0.5 * (grades[index]! + grades[index + 1]!)
    const acceleration = (trace.speedMps[index + 1]! - trace.speedMps[index]!) / lengthS
    const state = sampleState(powertrain, road, speedMps, acceleration, loggedAt(trace, index), counts)
    const point = pointOfState(powertrain, 'steady', state, speedMps, road.load.headwindMps, true)
    tables.feedShare = point.feedShare
    thermal.set(point, tables)
    advance(thermal, temperatures, lengthS)
  }
  return {
    ...answer,
    forceLimitedSamples: counts.forceLimited,
    contradictedSamples: counts.contradicted,
  }
}
