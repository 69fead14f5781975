import { CASE, CONVERTER, COOLANT, COUPLED, SUMP } from './balances'
import type { ThermalPoint } from './balances'
import { integrate } from './integrator'

/** Where a segment would settle if it never ended. */

const CLOSE_K = 1e-9
const LONGEST_STEP_K = 25
const NEWTON_STEPS = 30
const PERTURBATION_K = 1e-4
/** A long integration doubles its span from here [s] until nothing moves. */
const FIRST_SPAN_S = 2000
const LONGEST_SPAN_S = 1e9
/** Rate at which nothing moves any more [K/s]. */
const STILL_K_S = 1e-9

const temperatures = new Float64Array(COUPLED)
const rates = new Float64Array(COUPLED)

/**
 * Rates of sump and coolant with converter and case at rest beside them: the slow pair every equilibrium must still.
 * Leaves the four temperatures in `temperatures`.
 */
function slowRates(thermal: ThermalPoint, sumpC: number, coolantC: number): [sump: number, coolant: number] {
  const { circuit } = thermal
  temperatures[SUMP] = sumpC
  temperatures[COOLANT] = coolantC
  temperatures[CASE] = thermal.restingCaseC(sumpC)
  circuit.readLoop(sumpC)
  temperatures[CONVERTER] = sumpC + thermal.converterW / circuit.loopState.oilCapacityRate
  thermal.rates(temperatures, rates)
  return [rates[SUMP]!, rates[COOLANT]!]
}

/** Newton on the slow pair; undefined when it does not close or ends where a nudge would grow. */
function newton(
  thermal: ThermalPoint,
  fromSumpC: number,
  fromCoolantC: number,
): [number, number] | undefined {
  let sumpC = fromSumpC
  let coolantC = fromCoolantC
  for (let iteration = 0; iteration < NEWTON_STEPS; iteration++) {
    const [f, g] = slowRates(thermal, sumpC, coolantC)
    const [fs, gs] = slowRates(thermal, sumpC + PERTURBATION_K, coolantC)
    const [fc, gc] = slowRates(thermal, sumpC, coolantC + PERTURBATION_K)
    const a = (fs - f) / PERTURBATION_K
    const b = (fc - f) / PERTURBATION_K
    const c = (gs - g) / PERTURBATION_K
    const d = (gc - g) / PERTURBATION_K
    const determinant = a * d - b * c
    let stepSump = (b * g - d * f) / determinant
    let stepCoolant = (c * f - a * g) / determinant
    if (d === 0 && c === 0 && a < 0) {
      // thermostat shut and no tank: the coolant only warms; push it to where the thermostat answers
      stepSump = -f / a
      stepCoolant = Math.sign(g) * LONGEST_STEP_K
    }
    const size = Math.max(Math.abs(stepSump), Math.abs(stepCoolant))
    if (!Number.isFinite(size)) return undefined
    const share = Math.min(1, LONGEST_STEP_K / size)
    sumpC += share * stepSump
    coolantC += share * stepCoolant
    if (size < CLOSE_K * (1 + Math.abs(sumpC) + Math.abs(coolantC))) {
      const settles = a + d < 0 && determinant > 0
      return settles ? [sumpC, coolantC] : undefined
    }
  }
  return undefined
}

/** Whether sump and coolant keep moving toward an end on the straight way to it: no other resting place lies between. */
function isNextRest(
  thermal: ThermalPoint,
  from: ArrayLike<number>,
  sumpC: number,
  coolantC: number,
): boolean {
  const [sumpWay, coolantWay] = [sumpC - from[SUMP]!, coolantC - from[COOLANT]!]
  if (Math.abs(sumpWay) < 1) return true
  for (const share of [0.3, 0.65, 0.9]) {
    const [sumpRate] = slowRates(thermal, from[SUMP]! + share * sumpWay, from[COOLANT]! + share * coolantWay)
    if (sumpRate * sumpWay < 0) return false
  }
  return true
}

/** Follows the truck itself until nothing moves. */
function settleByTime(thermal: ThermalPoint, from: ArrayLike<number>): [number, number] {
  const state = Float64Array.from(from)
  const advance = (at: Float64Array, into: Float64Array) => thermal.rates(at, into)
  for (let span = FIRST_SPAN_S; span < LONGEST_SPAN_S; span *= 4) {
    integrate(advance, state, span, () => undefined, 0.05)
    const polished = newton(thermal, state[SUMP]!, state[COOLANT]!)
    if (
      polished !== undefined &&
      Math.abs(polished[0] - state[SUMP]!) < 1 &&
      Math.abs(polished[1] - state[COOLANT]!) < 1
    )
      return polished
    thermal.rates(state, rates)
    if (rates.every((rate) => Math.abs(rate) < STILL_K_S)) break
  }
  return [state[SUMP]!, state[COOLANT]!]
}

/**
 * Equilibrium of the four coupled temperatures, as the truck would reach it from a start.
 * Equation: all rates of `ThermalPoint.rates` are 0; converter and case follow from the sump in closed form, sump and
 * coolant by Newton. Where Newton does not close, or another resting place might lie on the way, the truck itself is
 * followed in time.
 * @param thermal - operating point with its circuit
 * @param from - temperatures it comes from [°C]
 * @param guess - temperatures Newton starts at [°C], where some are known to lie near
 * @returns temperatures at rest [°C]
 */
export function equilibriumOf(
  thermal: ThermalPoint,
  from: ArrayLike<number>,
  guess: ArrayLike<number> = from,
): Float64Array {
  let pair = newton(thermal, guess[SUMP]!, guess[COOLANT]!)
  if (pair === undefined || !isNextRest(thermal, from, pair[0], pair[1])) pair = settleByTime(thermal, from)
  slowRates(thermal, pair[0], pair[1])
  return Float64Array.from(temperatures)
}
