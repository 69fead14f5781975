import { CONVERTER, SUMP } from './balances'
import { ageingFactor } from './fluid-life'
import { integralOnStep, onStep, peakOnStep } from './integrator'
import type { StepRecord } from './integrator'
import type { ResolvedFluidLife } from './resolve'

/** Sums over a drive: peaks, mean and ageing. */

export interface Tally {
  peakSumpC: number
  peakCoolerInletC: number
  sumpIntegral: number
  /** Seconds at the reference temperature that age the fluid as much: in the sump, in the converter. */
  sumpAgeingS: number
  converterAgeingS: number
}

export const freshTally = (): Tally => ({
  peakSumpC: -Infinity,
  peakCoolerInletC: -Infinity,
  sumpIntegral: 0,
  sumpAgeingS: 0,
  converterAgeingS: 0,
})

/** Places and weights of three-point Gauss quadrature on a unit step. Source: Abramowitz & Stegun, table 25.4. */
const FIRST_PLACE = 0.5 - Math.sqrt(0.15)
const LAST_PLACE = 0.5 + Math.sqrt(0.15)
const OUTER_WEIGHT = 5 / 18
const MIDDLE_WEIGHT = 8 / 18

/** A step is cut where it spans more halvings of the fluid's life than this, up to so many pieces: the factor is no cubic. */
const HALVINGS_PER_PIECE = 2
const MOST_PIECES = 64

/** Time-integral of the ageing factor of one temperature over a step [s]. */
function ageingOnStep(life: ResolvedFluidLife, step: StepRecord, index: number): number {
  const span = Math.abs(step.to[index]! - step.from[index]!)
  const pieces =
    span <= HALVINGS_PER_PIECE * life.halvingK
      ? 1
      : Math.min(MOST_PIECES, Math.ceil(span / (HALVINGS_PER_PIECE * life.halvingK)))
  let sum = 0
  for (let piece = 0; piece < pieces; piece++)
    sum +=
      OUTER_WEIGHT *
        (ageingFactor(life, onStep(step, index, (piece + FIRST_PLACE) / pieces)) +
          ageingFactor(life, onStep(step, index, (piece + LAST_PLACE) / pieces))) +
      MIDDLE_WEIGHT * ageingFactor(life, onStep(step, index, (piece + 0.5) / pieces))
  return (step.lengthS / pieces) * sum
}

/** Adds one step of the integrator. */
export function tallyStep(tally: Tally, life: ResolvedFluidLife, step: StepRecord): void {
  tally.peakSumpC = Math.max(tally.peakSumpC, peakOnStep(step, SUMP))
  tally.peakCoolerInletC = Math.max(tally.peakCoolerInletC, peakOnStep(step, CONVERTER))
  tally.sumpIntegral += integralOnStep(step, SUMP)
  tally.sumpAgeingS += ageingOnStep(life, step, SUMP)
  tally.converterAgeingS += ageingOnStep(life, step, CONVERTER)
}

/** Adds one segment to a drive. */
export function addTally(total: Tally, part: Tally): void {
  total.peakSumpC = Math.max(total.peakSumpC, part.peakSumpC)
  total.peakCoolerInletC = Math.max(total.peakCoolerInletC, part.peakCoolerInletC)
  total.sumpIntegral += part.sumpIntegral
  total.sumpAgeingS += part.sumpAgeingS
  total.converterAgeingS += part.converterAgeingS
}
