import { CASE, CONVERTER, COOLANT, COUPLED, SUMP } from './balances'
import type { ThermalPoint } from './balances'
import { integrate } from './integrator'

/** Where a segment would settle if it never ended. */

/** Newton squares its error: after a step this small the next would be about 1e-10 K. */
const CLOSE_K = 1e-5
const LONGEST_STEP_K = 25
const NEWTON_STEPS = 30
/** An end this near one that was reached before needs no second look at the way to it [K]. */
const FAMILIAR_K = 12
/** How near the coolant must come to rest for a look at the sump [K], and how long it may take. */
const COOLANT_CLOSE_K = 1e-2
const COOLANT_STEPS = 20
/** A long integration has four times its span each time, from here to there [s], until nothing moves. */
const FIRST_SPAN_S = 2000
const LONGEST_SPAN_S = 1e6
const SETTLING_TOLERANCE_K = 0.1
/** Rate at which nothing moves any more [K/s]. */
const STILL_K_S = 1e-9

const temperatures = new Float64Array(COUPLED)
const rates = new Float64Array(COUPLED)
const slopes = new Float64Array(COUPLED * COUPLED)

/**
 * Rates with converter and case at rest beside a sump temperature: what is left is the slow pair, sump and coolant.
 * Leaves the four temperatures in `temperatures` and their rates in `rates`.
 */
function fillSlowRates(thermal: ThermalPoint, sumpC: number, coolantC: number): void {
  const { circuit } = thermal
  temperatures[SUMP] = sumpC
  temperatures[COOLANT] = coolantC
  temperatures[CASE] = thermal.restingCaseC(sumpC)
  circuit.readLoop(sumpC)
  temperatures[CONVERTER] = sumpC + thermal.converterW / circuit.loopState.oilCapacityRate
  thermal.rates(temperatures, rates)
}

/** Newton on the slow pair; undefined when it does not close or ends where a nudge would grow. */
function newton(
  thermal: ThermalPoint,
  fromSumpC: number,
  fromCoolantC: number,
): [sumpC: number, coolantC: number] | undefined {
  let sumpC = fromSumpC
  let coolantC = fromCoolantC
  for (let iteration = 0; iteration < NEWTON_STEPS; iteration++) {
    fillSlowRates(thermal, sumpC, coolantC)
    thermal.jacobian(temperatures, rates, slopes)
    const converterWay = -slopes[4]! / slopes[5]!
    const a = slopes[0]! + slopes[1]! * converterWay - (slopes[2]! * slopes[8]!) / slopes[10]!
    const b = slopes[3]!
    const c = slopes[12]! + slopes[13]! * converterWay
    const d = slopes[15]!
    const [f, g] = [rates[SUMP]!, rates[COOLANT]!]
    const determinant = a * d - b * c
    let stepSump = (b * g - d * f) / determinant
    let stepCoolant = (c * f - a * g) / determinant
    if (d === 0 && a < 0) {
      // thermostat shut: the coolant only warms; push it to where the thermostat answers
      stepSump = -f / a
      stepCoolant = Math.sign(g) * LONGEST_STEP_K
    }
    const size = Math.max(Math.abs(stepSump), Math.abs(stepCoolant))
    if (!Number.isFinite(size)) return undefined
    const share = Math.min(1, LONGEST_STEP_K / size)
    sumpC += share * stepSump
    coolantC += share * stepCoolant
    if (size < CLOSE_K) return a + d < 0 && determinant > 0 ? [sumpC, coolantC] : undefined
  }
  return undefined
}

/** Coolant at rest beside a sump temperature; undefined where Newton does not close. */
function restingCoolant(thermal: ThermalPoint, sumpC: number, guessC: number): number | undefined {
  let coolantC = guessC
  for (let iteration = 0; iteration < COOLANT_STEPS; iteration++) {
    fillSlowRates(thermal, sumpC, coolantC)
    thermal.jacobian(temperatures, rates, slopes)
    const step =
      slopes[15]! < 0 ? -rates[COOLANT]! / slopes[15]! : Math.sign(rates[COOLANT]!) * LONGEST_STEP_K
    if (Math.abs(step) < COOLANT_CLOSE_K) return coolantC
    coolantC += Math.min(LONGEST_STEP_K, Math.max(-LONGEST_STEP_K, step))
  }
  return undefined
}

/**
 * Whether the sump, with the coolant at rest beside it, keeps moving toward an end all the way from a start: no other
 * resting place lies between.
 */
function isNextRest(thermal: ThermalPoint, fromSumpC: number, sumpC: number, coolantC: number): boolean {
  const way = sumpC - fromSumpC
  if (Math.abs(way) < 1) return true
  let guess = coolantC
  for (const share of [0.8, 0.4, 0.05]) {
    const resting = restingCoolant(thermal, fromSumpC + share * way, guess)
    if (resting === undefined || rates[SUMP]! * way < 0) return false
    guess = resting
  }
  return true
}

/**
 * Follows the truck itself until the way to the next resting place is clear. One that circles for ever (gelled oil behind a
 * boiling converter) is left where it is then.
 */
function settleByTime(thermal: ThermalPoint, from: ArrayLike<number>): [number, number] {
  const state = Float64Array.from(from)
  for (let span = FIRST_SPAN_S; span < LONGEST_SPAN_S; span *= 4) {
    integrate(thermal, state, span, () => undefined, SETTLING_TOLERANCE_K)
    const polished = newton(thermal, state[SUMP]!, state[COOLANT]!)
    if (polished !== undefined && isNextRest(thermal, state[SUMP]!, polished[0], polished[1])) return polished
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
 * @param guess - a rest reached before from the same start at nearly the same point, where there is one [°C]
 * @returns temperatures at rest [°C]
 */
export function equilibriumOf(
  thermal: ThermalPoint,
  from: ArrayLike<number>,
  guess: ArrayLike<number> = from,
): Float64Array {
  let pair = newton(thermal, guess[SUMP]!, guess[COOLANT]!)
  const isFamiliar = guess !== from && pair !== undefined && Math.abs(pair[0] - guess[SUMP]!) < FAMILIAR_K
  if (pair === undefined || (!isFamiliar && !isNextRest(thermal, from[SUMP]!, pair[0], pair[1])))
    pair = settleByTime(thermal, from)
  fillSlowRates(thermal, pair[0], pair[1])
  return Float64Array.from(temperatures)
}
