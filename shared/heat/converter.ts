import { makePchip, pchipAt, pchipSlopeAt } from './pchip'

/** The torque converter: how much torque its impeller takes and its turbine gives at a speed ratio. */

const SPEED_RATIOS = [0, 0.2, 0.4, 0.6, 0.7, 0.8, 0.85, 0.9, 0.95, 0.98, 1] as const
const CAPACITIES = [1, 0.98, 0.925, 0.797, 0.706, 0.61, 0.541, 0.444, 0.25, 0.11, 0] as const
const CAPACITY_CURVE = makePchip(SPEED_RATIOS, CAPACITIES)

export interface Converter {
  /** λ0: impeller torque over impeller speed squared at stall [N·m s²]. */
  readonly stallCapacity: number
  /** TR0. */
  readonly stallTorqueRatio: number
  /** SRc, from where the torque ratio is 1. */
  readonly couplingPoint: number
}

/**
 * Capacity of the impeller relative to stall.
 * Equation: monotone cubic through a table of L(SR).
 * @param speedRatio - turbine over impeller speed, 0 to 1
 * @returns L, 1 at stall to 0 at 1
 * Source: blend of two published converter tables, normalised to stall, up to 0.9; above that judgement. Spread 10 %.
 * Example (computed here): 0.797 at 0.6.
 */
export function capacityFactor(speedRatio: number): number {
  return pchipAt(CAPACITY_CURVE, speedRatio)
}

/**
 * Torque ratio of the converter.
 * Equation: 1 + (TR0 - 1) max(0, 1 - SR/SRc).
 * @param speedRatio - SR, 0 to 1
 * @param stallTorqueRatio - TR0, 1 to 3
 * @param couplingPoint - SRc
 * @returns turbine torque over impeller torque
 * Source: straight line between stall and coupling, within 3 % of the same two published tables.
 * Example (computed here): TR0 2, SRc 0.88: 1.5 at SR 0.44.
 */
export function torqueRatio(speedRatio: number, stallTorqueRatio: number, couplingPoint: number): number {
  return 1 + (stallTorqueRatio - 1) * Math.max(0, 1 - speedRatio / couplingPoint)
}

/** Turbine torque over λ0 ω_impeller² at a speed ratio. */
function turbineFactor(converter: Converter, speedRatio: number): number {
  return (
    capacityFactor(speedRatio) * torqueRatio(speedRatio, converter.stallTorqueRatio, converter.couplingPoint)
  )
}

/**
 * The one speed ratio at which an unlocked converter delivers a turbine torque at a turbine speed.
 * Equation: λ0 L(SR) TR(SR) (ω_t/SR)² = T_t; its left side falls with SR from infinity to 0.
 * @param converter - capacity and torque ratio
 * @param turbineTorque - T_t [N·m], above 0
 * @param turbineSpeed - ω_t [rad/s], above 0
 * @returns SR, above 0 and below 1
 * Example (computed here): λ0 0.01, TR0 2, SRc 0.88, 200 N·m at 100 rad/s: SR 0.757.
 */
export function solveSpeedRatio(converter: Converter, turbineTorque: number, turbineSpeed: number): number {
  const demand = turbineTorque / (converter.stallCapacity * turbineSpeed * turbineSpeed)
  let k = 0
  while (k < SPEED_RATIOS.length - 2) {
    const next = SPEED_RATIOS[k + 1]!
    if (turbineFactor(converter, next) <= demand * next * next) break
    k++
  }
  let low: number = SPEED_RATIOS[k]!
  let high: number = SPEED_RATIOS[k + 1]!
  let ratio =
    k === 0 ? Math.min(0.5 * high, Math.sqrt(converter.stallTorqueRatio / demand)) : 0.5 * (low + high)
  for (let iteration = 0; iteration < 100; iteration++) {
    const excess = turbineFactor(converter, ratio) - demand * ratio * ratio
    if (excess > 0) low = ratio
    else high = ratio
    const step = excess / (turbineFactorSlope(converter, ratio) - 2 * demand * ratio)
    if (Math.abs(step) <= 2e-15 + 4e-15 * ratio) break
    const next = ratio - step
    ratio = next > low && next < high ? next : 0.5 * (low + high)
    if (high - low < 1e-15) break
  }
  return ratio
}

function turbineFactorSlope(converter: Converter, speedRatio: number): number {
  const { stallTorqueRatio, couplingPoint } = converter
  const falling = speedRatio < couplingPoint ? -(stallTorqueRatio - 1) / couplingPoint : 0
  return (
    pchipSlopeAt(CAPACITY_CURVE, speedRatio) * torqueRatio(speedRatio, stallTorqueRatio, couplingPoint) +
    capacityFactor(speedRatio) * falling
  )
}
