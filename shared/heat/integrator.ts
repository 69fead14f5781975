import { CASE, CONVERTER, COOLANT, COUPLED, SUMP } from './balances'

/**
 * Integrates the four coupled temperatures: a linearly implicit method of order 3 with step control, which stays stable
 * however fast a thermostat reacts, and leaves a cubic on every step for output.
 *
 * Source: method RODAS3 of A. Sandu, J. G. Verwer, J. G. Blom, E. J. Spee, G. R. Carmichael and F. A. Potra,
 * "Benchmarking stiff ODE solvers for atmospheric chemistry problems II: Rosenbrock solvers", Atmospheric Environment 31
 * (1997), 3459-3472; step control after E. Hairer and G. Wanner, Solving Ordinary Differential Equations II, IV.8.
 */

export type Rates = (temperatures: Float64Array, rates: Float64Array) => void

/** Rates with slopes of their own; without, the integrator takes differences. */
export interface StiffSystem {
  rates: Rates
  /** Slopes of the rates [1/s], row by row, at temperatures whose rates were just asked. */
  jacobian(temperatures: Float64Array, rates: Float64Array, slopes: Float64Array): void
}

/** A system whose slopes are differences of its rates. */
function differenced(rates: Rates): StiffSystem {
  return {
    rates,
    jacobian: (at, atRates, slopes) => fillByDifferences(rates, at, atRates, slopes),
  }
}

/** One finished step: ends, rates at both ends, and its place in time. */
export interface StepRecord {
  timeS: number
  lengthS: number
  from: Float64Array
  to: Float64Array
  fromRates: Float64Array
  toRates: Float64Array
}

/** Local error a step may have [K]. */
export const STEP_TOLERANCE_K = 0.02
/** The coolant must be this much more exact: a thermostat turns hundredths of a kelvin into per cents of radiator heat. */
const COOLANT_WEIGHT = 2
const PERTURBATION_K = 1e-4
const SHORTEST_STEP_S = 1e-6
const FIRST_STEP_S = 5
/** Past this many steps, and each time again, the tolerance is loosened tenfold: a wild thermostat must not hang the program. */
const PATIENCE_STEPS = 20_000

const n = COUPLED
const jacobian = new Float64Array(n * n)
const matrix = new Float64Array(n * n)
const pivots = new Int32Array(n)
const stage: Float64Array[] = [0, 1, 2, 3].map(() => new Float64Array(n))
const probe = new Float64Array(n)
const probeRates = new Float64Array(n)
const right = new Float64Array(n)

function fillByDifferences(
  rates: Rates,
  at: Float64Array,
  atRates: Float64Array,
  slopes: Float64Array,
): void {
  probe.set(at)
  for (let column = 0; column < n; column++) {
    const kept = probe[column]!
    probe[column] = kept + PERTURBATION_K
    rates(probe, probeRates)
    probe[column] = kept
    for (let row = 0; row < n; row++)
      slopes[row * n + column] = (probeRates[row]! - atRates[row]!) / PERTURBATION_K
  }
}

/**
 * The matrix of a step, d I - J, ready to be solved. Converter and case meet the sump only, which leaves two equations
 * for sump and coolant; a system in which they meet more is factored whole.
 */
const arrow = {
  fits: true,
  converterPivot: 1,
  casePivot: 1,
  converterFromSump: 0,
  caseFromSump: 0,
  sumpFromConverter: 0,
  sumpFromCase: 0,
  coolantFromConverter: 0,
  m00: 1,
  m03: 0,
  m30: 0,
  m33: 1,
  perDeterminant: 1,
}

function factor(diagonal: number): void {
  const J = jacobian
  const lone = J[6] === 0 && J[7] === 0 && J[9] === 0 && J[11] === 0 && J[14] === 0
  arrow.fits = lone && J[5]! < diagonal && J[10]! < diagonal
  if (!arrow.fits) {
    for (let index = 0; index < n * n; index++) matrix[index] = -J[index]!
    for (let k = 0; k < n; k++) matrix[k * n + k]! += diagonal
    factorWhole()
    return
  }
  const converterPivot = 1 / (diagonal - J[5]!)
  const casePivot = 1 / (diagonal - J[10]!)
  const converterFromSump = J[4]! * converterPivot
  const caseFromSump = J[8]! * casePivot
  const m00 = diagonal - J[0]! - J[1]! * converterFromSump - J[2]! * caseFromSump
  const m03 = -J[3]!
  const m30 = -J[12]! - J[13]! * converterFromSump
  const m33 = diagonal - J[15]!
  arrow.converterPivot = converterPivot
  arrow.casePivot = casePivot
  arrow.converterFromSump = converterFromSump
  arrow.caseFromSump = caseFromSump
  arrow.sumpFromConverter = J[1]! * converterPivot
  arrow.sumpFromCase = J[2]! * casePivot
  arrow.coolantFromConverter = J[13]! * converterPivot
  arrow.m00 = m00
  arrow.m03 = m03
  arrow.m30 = m30
  arrow.m33 = m33
  arrow.perDeterminant = 1 / (m00 * m33 - m03 * m30)
}

/** Solves with the factors; `b` becomes the answer. */
function solveFactored(b: Float64Array): void {
  if (!arrow.fits) {
    solveWhole(b)
    return
  }
  const b1 = b[CONVERTER]!
  const b2 = b[CASE]!
  const right0 = b[SUMP]! + arrow.sumpFromConverter * b1 + arrow.sumpFromCase * b2
  const right3 = b[COOLANT]! + arrow.coolantFromConverter * b1
  const sump = (right0 * arrow.m33 - arrow.m03 * right3) * arrow.perDeterminant
  b[SUMP] = sump
  b[CONVERTER] = b1 * arrow.converterPivot + arrow.converterFromSump * sump
  b[CASE] = b2 * arrow.casePivot + arrow.caseFromSump * sump
  b[COOLANT] = (arrow.m00 * right3 - arrow.m30 * right0) * arrow.perDeterminant
}

/** LU factors of the matrix in place, with row exchange. */
function factorWhole(): void {
  for (let k = 0; k < n; k++) {
    let pivot = k
    for (let row = k + 1; row < n; row++)
      if (Math.abs(matrix[row * n + k]!) > Math.abs(matrix[pivot * n + k]!)) pivot = row
    pivots[k] = pivot
    if (pivot !== k)
      for (let column = 0; column < n; column++) {
        const kept = matrix[k * n + column]!
        matrix[k * n + column] = matrix[pivot * n + column]!
        matrix[pivot * n + column] = kept
      }
    const inverse = 1 / matrix[k * n + k]!
    for (let row = k + 1; row < n; row++) {
      const share = matrix[row * n + k]! * inverse
      matrix[row * n + k] = share
      for (let column = k + 1; column < n; column++)
        matrix[row * n + column]! -= share * matrix[k * n + column]!
    }
  }
}

/** Solves with the LU factors; `b` becomes the answer. */
function solveWhole(b: Float64Array): void {
  for (let k = 0; k < n; k++) {
    const pivot = pivots[k]!
    if (pivot !== k) {
      const kept = b[k]!
      b[k] = b[pivot]!
      b[pivot] = kept
    }
    for (let row = k + 1; row < n; row++) b[row]! -= matrix[row * n + k]! * b[k]!
  }
  for (let k = n - 1; k >= 0; k--) {
    let sum = b[k]!
    for (let column = k + 1; column < n; column++) sum -= matrix[k * n + column]! * b[column]!
    b[k] = sum / matrix[k * n + k]!
  }
}

/** One trial step of RODAS3; leaves the new temperatures in `to` and returns the error estimate [K]. */
function trialStep(
  system: StiffSystem,
  from: Float64Array,
  fromRates: Float64Array,
  h: number,
  to: Float64Array,
): number {
  factor(2 / h)
  const [k1, k2, k3, k4] = stage as [Float64Array, Float64Array, Float64Array, Float64Array]
  k1.set(fromRates)
  solveFactored(k1)
  for (let i = 0; i < n; i++) k2[i] = fromRates[i]! + (4 / h) * k1[i]!
  solveFactored(k2)
  for (let i = 0; i < n; i++) to[i] = from[i]! + 2 * k1[i]!
  system.rates(to, right)
  for (let i = 0; i < n; i++) k3[i] = right[i]! + (k1[i]! - k2[i]!) / h
  solveFactored(k3)
  for (let i = 0; i < n; i++) to[i] = to[i]! + k3[i]!
  system.rates(to, right)
  for (let i = 0; i < n; i++) k4[i] = right[i]! + (k1[i]! - k2[i]! - (8 / 3) * k3[i]!) / h
  solveFactored(k4)
  for (let i = 0; i < n; i++) to[i]! += k4[i]!
  const error = Math.max(
    Math.abs(k4[SUMP]!),
    Math.abs(k4[CONVERTER]!),
    Math.abs(k4[CASE]!),
    COOLANT_WEIGHT * Math.abs(k4[COOLANT]!),
  )
  return Number.isFinite(error) ? error : Infinity
}

/**
 * Integrates from a start over a duration and hands every accepted step to a visitor.
 * @param given - temperature rates [K/s], which do not depend on time, with or without their slopes
 * @param start - temperatures at the start [°C]; becomes those at the end
 * @param durationS - [s]
 * @param visit - sees each accepted step; the record is used again for the next
 * @param tolerance - local error a step may have [K]
 * @returns number of steps taken
 */
export function integrate(
  given: Rates | StiffSystem,
  start: Float64Array,
  durationS: number,
  visit: (step: StepRecord) => void,
  tolerance = STEP_TOLERANCE_K,
): number {
  const record: StepRecord = {
    timeS: 0,
    lengthS: 0,
    from: Float64Array.from(start),
    to: new Float64Array(n),
    fromRates: new Float64Array(n),
    toRates: new Float64Array(n),
  }
  const system = typeof given === 'function' ? differenced(given) : given
  system.rates(record.from, record.fromRates)
  let h = Math.min(FIRST_STEP_S, durationS)
  let steps = 0
  let rejected = false
  system.jacobian(record.from, record.fromRates, jacobian)
  while (record.timeS < durationS) {
    const allowed = tolerance * 10 ** Math.floor(steps / PATIENCE_STEPS)
    const left = durationS - record.timeS
    if (h > 0.999999 * left) h = left
    else if (h > 0.5 * left) h = 0.5 * left
    const error = trialStep(system, record.from, record.fromRates, h, record.to)
    steps++
    const growth = 0.9 * Math.cbrt(allowed / Math.max(error, 1e-12))
    if (error > allowed && h > SHORTEST_STEP_S) {
      h = Math.max(SHORTEST_STEP_S, h * Math.max(0.1, Math.min(0.7, growth)))
      rejected = true
      continue
    }
    system.rates(record.to, record.toRates)
    const isLast = h === left
    if (!isLast) system.jacobian(record.to, record.toRates, jacobian)
    record.lengthS = h
    visit(record)
    record.timeS = isLast ? durationS : record.timeS + h
    const { from, fromRates } = record
    record.from = record.to
    record.fromRates = record.toRates
    record.to = from
    record.toRates = fromRates
    h *= Math.min(rejected ? 1 : 6, Math.max(0.3, growth))
    rejected = false
  }
  start.set(record.from)
  return steps
}

/** Temperature on a step from its cubic; `share` runs from 0 to 1. */
export function onStep(step: StepRecord, index: number, share: number): number {
  const u = 1 - share
  const h = step.lengthS
  return (
    u * u * ((1 + 2 * share) * step.from[index]! + share * h * step.fromRates[index]!) +
    share * share * ((3 - 2 * share) * step.to[index]! - u * h * step.toRates[index]!)
  )
}

/** Highest temperature on a step: an end, or the top of its cubic. */
export function peakOnStep(step: StepRecord, index: number): number {
  const top = Math.max(step.from[index]!, step.to[index]!)
  const r0 = step.fromRates[index]! * step.lengthS
  const r1 = step.toRates[index]! * step.lengthS
  if (!(r0 > 0 && r1 < 0)) return top
  const rise = step.to[index]! - step.from[index]!
  const a = 3 * (r0 + r1 - 2 * rise)
  const b = 2 * (3 * rise - 2 * r0 - r1)
  const root = Math.sqrt(Math.max(0, b * b - 4 * a * r0))
  const share = Math.abs(a) < 1e-12 * Math.abs(b) ? -r0 / b : (-b - root) / (2 * a)
  return share > 0 && share < 1 ? Math.max(top, onStep(step, index, share)) : top
}

/** Time-integral of a temperature over a step [K s]. */
export function integralOnStep(step: StepRecord, index: number): number {
  const h = step.lengthS
  return (
    0.5 * h * (step.from[index]! + step.to[index]!) +
    ((h * h) / 12) * (step.fromRates[index]! - step.toRates[index]!)
  )
}
