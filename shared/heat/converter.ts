import { makePchip, pchipAt } from './pchip'

/** The torque converter: how much torque its impeller takes and its turbine gives at a speed ratio. */

const SPEED_RATIOS = [0, 0.2, 0.4, 0.6, 0.7, 0.8, 0.85, 0.9, 0.95, 0.98, 1] as const
const CAPACITIES = [1, 0.98, 0.925, 0.797, 0.706, 0.61, 0.541, 0.444, 0.25, 0.11, 0] as const
const CAPACITY_CURVE = makePchip(SPEED_RATIOS, CAPACITIES)

/** Each cell of the capacity curve as a cubic of the distance from its start. */
const CELLS = SPEED_RATIOS.slice(0, -1).map((start, k): readonly [number, number, number, number] => {
  const width = SPEED_RATIOS[k + 1]! - start
  const rise = (CAPACITIES[k + 1]! - CAPACITIES[k]!) / width
  const s0 = CAPACITY_CURVE.slope[k]!
  const s1 = CAPACITY_CURVE.slope[k + 1]!
  return [CAPACITIES[k]!, s0, (3 * rise - 2 * s0 - s1) / width, (s0 + s1 - 2 * rise) / (width * width)]
})

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

/**
 * The one speed ratio at which an unlocked converter delivers a turbine torque at a turbine speed.
 * Equation: λ0 L(SR) TR(SR) (ω_t/SR)² = T_t; its left side falls with SR from infinity to 0.
 * @param converter - capacity and torque ratio
 * @param turbineTorque - T_t [N·m], above 0
 * @param turbineSpeed - ω_t [rad/s], above 0
 * @returns SR, above 0 and below 1
 * Example (computed here): λ0 0.01, TR0 2, SRc 0.88, 200 N·m at 100 rad/s: SR 0.6726.
 */
export function solveSpeedRatio(converter: Converter, turbineTorque: number, turbineSpeed: number): number {
  const { stallTorqueRatio, couplingPoint } = converter
  const demand = turbineTorque / (converter.stallCapacity * turbineSpeed * turbineSpeed)
  const last = SPEED_RATIOS.length - 2
  let k = 0
  while (k < last) {
    const next = SPEED_RATIOS[k + 1]!
    if (CAPACITIES[k + 1]! * torqueRatio(next, stallTorqueRatio, couplingPoint) <= demand * next * next) break
    k++
  }
  const start: number = SPEED_RATIOS[k]!
  const cell = CELLS[k]!
  let low = start
  let high: number = SPEED_RATIOS[k + 1]!
  let ratio = k === 0 ? Math.min(0.5 * high, Math.sqrt(stallTorqueRatio / demand)) : 0.5 * (low + high)
  for (let iteration = 0; iteration < 100; iteration++) {
    const t = ratio - start
    const capacity = cell[0] + t * (cell[1] + t * (cell[2] + t * cell[3]))
    const capacitySlope = cell[1] + t * (2 * cell[2] + 3 * t * cell[3])
    const multiplying = ratio < couplingPoint
    const torque = multiplying ? 1 + (stallTorqueRatio - 1) * (1 - ratio / couplingPoint) : 1
    const torqueSlope = multiplying ? (1 - stallTorqueRatio) / couplingPoint : 0
    const excess = capacity * torque - demand * ratio * ratio
    if (excess > 0) low = ratio
    else high = ratio
    const step = excess / (capacitySlope * torque + capacity * torqueSlope - 2 * demand * ratio)
    if (Math.abs(step) <= 2e-15 + 4e-15 * ratio) break
    const next = ratio - step
    ratio = next > low && next < high ? next : 0.5 * (low + high)
    if (high - low < 1e-15) break
  }
  return ratio
}
