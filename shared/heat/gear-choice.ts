import { capacityFactor, solveSpeedRatio, torqueRatio } from './converter'
import { torqueAt } from './engine'
import { pumpTorque, spinTorque } from './parasitic-losses'
import type { Powertrain, RangeStep } from './resolve'

/** Which gear, locked or not: the operating point of engine, converter and gears at one demand. */

const RAD_S_PER_RPM = Math.PI / 30
/** Engine limits a driver or controller keeps to: shares of redline and of full-throttle torque. Judgement. */
const SPEED_RESERVE = 0.95
const TORQUE_RESERVE = 0.95
/** Lowest speed ratio at which an unlocked converter is kept in a gear above 1st. Judgement. */
const LOWEST_SPEED_RATIO = 0.8
/** Turbine speeds below which a gear above 1st is not used, and lock-up not applied [rad/s]. Judgement. */
const LOWEST_TURBINE_SPEED = 1100 * RAD_S_PER_RPM
const LOWEST_LOCKED_TURBINE_SPEED = 1200 * RAD_S_PER_RPM
/** Share of redline above which engine speed begins to annoy: cruising, and pulling away. Judgement. */
export const CALM_SHARE = 0.65
export const PULL_AWAY_CALM_SHARE = 0.5

/** Torques, speeds and heats of one operating point; heats at the reference viscosity, unscaled. */
export interface DriveState {
  gear: number
  locked: boolean
  speedRatio: number
  impellerSpeed: number
  impellerTorque: number
  turbineSpeed: number
  /** Delivered, which is more than needed where brakes take the rest. */
  turbineTorque: number
  pumpTorque: number
  converterW: number
  gearW: number
  spinW: number
  pumpW: number
  axleW: number
  transferCaseW: number
}

/** Demand at the transmission's output, and what axle and transfer case lose on the way to the road. */
export interface OutputDemand {
  speedMps: number
  outputTorque: number
  outputSpeed: number
  axleW: number
  transferCaseW: number
}

/**
 * From the force at the tires back to the transmission's output.
 * Equation: pinion torque = F r / (i_axle η_axle), output torque = pinion torque / (i_t η_t);
 * axle heat = (1 - η_axle) pinion torque × pinion speed, transfer case heat = (1 - η_t) output torque × output speed.
 * @param powertrain - radius r, axle ratio and efficiency
 * @param range - ratio and efficiency of the transfer case
 * @param force - F at the tires [N], above 0
 * @param speedMps - road speed [m/s]
 * @returns torque and speed at the output, heats of axle and transfer case [W]
 * Source: power balance of a gear train with constant efficiencies; Gillespie (1992), equation 2-9, without inertia.
 */
export function demandAtOutput(
  powertrain: Powertrain,
  range: RangeStep,
  force: number,
  speedMps: number,
): OutputDemand {
  const { axleRatio, axleEfficiency, tyreRadiusM } = powertrain
  const pinionTorque = (force * tyreRadiusM) / (axleRatio * axleEfficiency)
  const pinionSpeed = (speedMps / tyreRadiusM) * axleRatio
  const outputTorque = pinionTorque / (range.ratio * range.efficiency)
  const outputSpeed = pinionSpeed * range.ratio
  return {
    speedMps,
    outputTorque,
    outputSpeed,
    axleW: (1 - axleEfficiency) * pinionTorque * pinionSpeed,
    transferCaseW: (1 - range.efficiency) * outputTorque * outputSpeed,
  }
}

/** The state of one gear from impeller and turbine speeds and torques. */
export function makeState(
  powertrain: Powertrain,
  demand: OutputDemand,
  gear: number,
  locked: boolean,
  turbineSpeed: number,
  impellerSpeed: number,
  impellerTorque: number,
  turbineTorque: number,
): DriveState {
  const { ratio, efficiency } = powertrain.gears[gear - 1]!
  const pump = pumpTorque(powertrain.pump, impellerTorque, powertrain.ratedTorqueNm)
  return {
    gear,
    locked,
    speedRatio: turbineSpeed / impellerSpeed,
    impellerSpeed,
    impellerTorque,
    turbineSpeed,
    turbineTorque,
    pumpTorque: pump,
    converterW: impellerTorque * impellerSpeed - turbineTorque * turbineSpeed,
    gearW: (1 - efficiency) * (demand.outputTorque / (ratio * efficiency)) * turbineSpeed,
    spinW: spinTorque(powertrain.ratedTorqueNm, turbineSpeed) * turbineSpeed,
    pumpW: pump * impellerSpeed,
    axleW: demand.axleW,
    transferCaseW: demand.transferCaseW,
  }
}

/** Turbine torque that carries a demand in a gear, with the drag at the reference viscosity [N·m]. */
export function turbineTorqueNeeded(
  powertrain: Powertrain,
  demand: OutputDemand,
  gear: number,
  turbineSpeed: number,
): number {
  const { ratio, efficiency } = powertrain.gears[gear - 1]!
  return demand.outputTorque / (ratio * efficiency) + spinTorque(powertrain.ratedTorqueNm, turbineSpeed)
}

/**
 * A gear with the converter unlocked: the one speed ratio that delivers the torque needed. If that leaves the impeller
 * below idle, it turns at idle and brakes take what it delivers beyond the need.
 */
export function unlockedState(powertrain: Powertrain, demand: OutputDemand, gear: number): DriveState {
  const { converter, idleSpeed } = powertrain
  const turbineSpeed = demand.outputSpeed * powertrain.gears[gear - 1]!.ratio
  const needed = turbineTorqueNeeded(powertrain, demand, gear, turbineSpeed)
  let speedRatio = solveSpeedRatio(converter, needed, turbineSpeed)
  let impellerSpeed = turbineSpeed / speedRatio
  const idling = impellerSpeed < idleSpeed
  if (idling) {
    impellerSpeed = idleSpeed
    speedRatio = turbineSpeed / idleSpeed
  }
  const multiplication = torqueRatio(speedRatio, converter.stallTorqueRatio, converter.couplingPoint)
  const impellerTorque = idling
    ? converter.stallCapacity * capacityFactor(speedRatio) * impellerSpeed * impellerSpeed
    : needed / multiplication
  const turbineTorque = idling ? impellerTorque * multiplication : needed
  return makeState(
    powertrain,
    demand,
    gear,
    false,
    turbineSpeed,
    impellerSpeed,
    impellerTorque,
    turbineTorque,
  )
}

/** A gear with the converter locked, or undefined where locking is not allowed. */
export function lockedState(
  powertrain: Powertrain,
  demand: OutputDemand,
  gear: number,
): DriveState | undefined {
  const { lockup } = powertrain
  if (lockup === null || gear < lockup.minGear || demand.speedMps < lockup.minSpeedMps) return undefined
  const turbineSpeed = demand.outputSpeed * powertrain.gears[gear - 1]!.ratio
  const impellerSpeed = turbineSpeed + lockup.slipSpeed
  if (turbineSpeed < LOWEST_LOCKED_TURBINE_SPEED || impellerSpeed < powertrain.idleSpeed) return undefined
  const needed = turbineTorqueNeeded(powertrain, demand, gear, turbineSpeed)
  if (needed > lockup.maxTurbineTorqueNm) return undefined
  return makeState(powertrain, demand, gear, true, turbineSpeed, impellerSpeed, needed, needed)
}

/** Whether engine speed and torque stay within reserve. */
export function withinEngine(powertrain: Powertrain, state: DriveState): boolean {
  return (
    state.impellerSpeed <= SPEED_RESERVE * powertrain.redlineSpeed &&
    state.impellerTorque + state.pumpTorque <=
      TORQUE_RESERVE * powertrain.torqueShare * torqueAt(powertrain.torqueCurve, state.impellerSpeed)
  )
}

/** Whether a state is one a driver or controller would stay in. */
function holds(powertrain: Powertrain, state: DriveState): boolean {
  if (!state.locked && state.gear > 1 && state.speedRatio < LOWEST_SPEED_RATIO) return false
  return withinEngine(powertrain, state)
}

/** What the tow style minimises: heat, made dearer by a screaming engine. */
function discomfort(powertrain: Powertrain, state: DriveState, calmShare: number): number {
  const heat = state.converterW + state.gearW + state.spinW + state.pumpW
  return heat * (1 + 2 * Math.max(0, state.impellerSpeed / powertrain.redlineSpeed - calmShare))
}

/**
 * Chooses gear and lock-up for a demand. `tow`: the highest gear that holds locked; otherwise, of the unlocked states
 * that hold, the one with the least heat, made dearer above a calm engine speed. `economy`: the first that holds going
 * down, locked before unlocked.
 * @param powertrain - gears, engine, converter
 * @param demand - at the output, force above 0
 * @param topGear - highest gear allowed
 * @param calmShare - share of redline from where engine speed counts against a state
 * @returns the state, or undefined when no gear holds
 * Source: judgement; what a controller that protects its fluid does.
 */
export function chooseGear(
  powertrain: Powertrain,
  demand: OutputDemand,
  topGear: number,
  calmShare: number,
): DriveState | undefined {
  let best: DriveState | undefined
  let least = Infinity
  for (let gear = topGear; gear >= 1; gear--) {
    if (gear > 1 && demand.outputSpeed * powertrain.gears[gear - 1]!.ratio < LOWEST_TURBINE_SPEED) continue
    const locked = lockedState(powertrain, demand, gear)
    if (locked !== undefined && holds(powertrain, locked)) return locked
    const unlocked = unlockedState(powertrain, demand, gear)
    if (!holds(powertrain, unlocked)) continue
    if (powertrain.economy) return unlocked
    const dislike = discomfort(powertrain, unlocked, calmShare)
    if (dislike < least) {
      least = dislike
      best = unlocked
    }
  }
  return best
}

/** Whether any gear holds a demand. */
export function anyGearHolds(powertrain: Powertrain, demand: OutputDemand, topGear: number): boolean {
  for (let gear = 1; gear <= topGear; gear++) {
    const turbineSpeed = demand.outputSpeed * powertrain.gears[gear - 1]!.ratio
    if (gear > 1 && turbineSpeed < LOWEST_TURBINE_SPEED) return false
    if (turbineSpeed > SPEED_RESERVE * powertrain.redlineSpeed) continue
    const locked = lockedState(powertrain, demand, gear)
    if (locked !== undefined && holds(powertrain, locked)) return true
    if (holds(powertrain, unlockedState(powertrain, demand, gear))) return true
  }
  return false
}

/**
 * Coasting: the road drives the truck, or it stands out of gear. Top gear allowed, no torque; impeller at idle or
 * turbine speed, whichever is faster; only drag and pump make heat.
 */
export function coastingState(
  powertrain: Powertrain,
  range: RangeStep,
  speedMps: number,
  topGear: number,
): DriveState {
  const { ratio } = powertrain.gears[topGear - 1]!
  const turbineSpeed = (speedMps / powertrain.tyreRadiusM) * powertrain.axleRatio * range.ratio * ratio
  const impellerSpeed = Math.max(powertrain.idleSpeed, turbineSpeed)
  const still = {
    speedMps,
    outputTorque: 0,
    outputSpeed: 0,
    axleW: 0,
    transferCaseW: 0,
  }
  return makeState(powertrain, still, topGear, false, turbineSpeed, impellerSpeed, 0, 0)
}

/**
 * Standing with the brakes on and a gear in: the turbine stands, all impeller power becomes heat in the converter.
 * @param powertrain - converter, pump
 * @param impellerSpeed - [rad/s]
 */
export function brakedState(powertrain: Powertrain, impellerSpeed: number): DriveState {
  const torque = powertrain.converter.stallCapacity * impellerSpeed * impellerSpeed
  const still = {
    speedMps: 0,
    outputTorque: 0,
    outputSpeed: 0,
    axleW: 0,
    transferCaseW: 0,
  }
  const state = makeState(powertrain, still, 1, false, 0, impellerSpeed, torque, 0)
  return {
    ...state,
    turbineTorque: torque * powertrain.converter.stallTorqueRatio,
  }
}
