import { segmentName } from '../workbench/duty-edit'
import {
  cannotClimb,
  coolerFlowLow,
  heatUpPanDown,
  hotLineOverPanFine,
  lockupContradicted,
  lockupUnproven,
  modelWarnings,
  noCoolerNeeded,
} from './answer-signs'
import { ADVICE_ORDER } from './codes'
import { labelOf } from './labels'
import { impossibleRatings, misfitRatings, ratingsOnTheSheet } from './rating-signs'
import type { Sign } from './sign'
import { situationOf } from './situation'
import { coolerNeededOrUseless, frontCoresHeatCoolant, otherGearCooler } from './trial-signs'
import type { Advice, AdviceRequest, Severity, TriedRemedy } from './types'

/** What to know, mend or do differently about an answer. */

/** Need no run of the model. */
const FACTS: readonly Sign[] = [
  impossibleRatings,
  cannotClimb,
  ratingsOnTheSheet,
  misfitRatings,
  lockupContradicted,
  modelWarnings,
  hotLineOverPanFine,
  coolerFlowLow,
  lockupUnproven,
  heatUpPanDown,
  noCoolerNeeded,
]
/** Need some. */
const TRIALS: readonly Sign[] = [otherGearCooler, coolerNeededOrUseless, frontCoresHeatCoolant]

/** Runs of the whole model a full advice may take. */
export const ADVICE_BUDGET = 15

const SEVERITY_ORDER: readonly Severity[] = ['stop', 'ease-off', 'watch', 'note']

function collect(request: AdviceRequest, signs: readonly Sign[]): Advice[] {
  const situation = situationOf(request)
  const order = ({ code, severity }: Advice) =>
    SEVERITY_ORDER.indexOf(severity) * ADVICE_ORDER.length + ADVICE_ORDER.indexOf(code)
  return signs.flatMap((sign) => sign(situation)).sort((a, b) => order(a) - order(b))
}

/**
 * The advice that follows from the answer as it stands, without another run of the model: cheap enough for a keystroke.
 * Remedies are named, their effects not worked out.
 */
export function adviseAtOnce(request: AdviceRequest): Advice[] {
  return collect(request, FACTS)
}

/**
 * All advice there is, the most urgent first: besides what follows from the answer, what only shows when the model is run
 * with something changed (seven runs at most).
 * @param request - a build, a set-up, a scenario, and their answer; ask again with the same object and nothing is run twice
 */
export function advise(request: AdviceRequest): Advice[] {
  return collect(request, [...FACTS, ...TRIALS])
}

/**
 * What each remedy of an advice comes to: the model run with it.
 * @param request - the one the advice is from
 * @param options.gradeHeld - whether the steepest grade held is worked out too; costs more than all the rest
 */
export function remediesFor(
  request: AdviceRequest,
  advice: Advice,
  options: { gradeHeld?: boolean } = {},
): TriedRemedy[] {
  const { trials } = situationOf(request)
  return advice.remedies.map((remedy) => trials.try(remedy, advice.code, options.gradeHeld))
}

/**
 * All advice with as many effects as a number of runs allows, the most urgent advice first; what is left over keeps `null`
 * until it is asked for by `remediesFor`.
 */
export function adviseInFull(request: AdviceRequest, budget = ADVICE_BUDGET): Advice[] {
  const all = advise(request)
  const { trials } = situationOf(request)
  return all.map((advice) => ({
    ...advice,
    remedies: advice.remedies.map((remedy) =>
      trials.estimates < budget || trials.isKnown(remedy.what) ? trials.try(remedy, advice.code) : remedy,
    ),
  }))
}

/** Runs of the whole model that advice on a request has taken so far. */
export function countRuns(request: AdviceRequest): number {
  return situationOf(request).trials.estimates
}

/** What an advice is about, in words: the stretch of the drive cycle, or the value of the sheet. */
export function placeWords(at: string, request: Pick<AdviceRequest, 'scenario' | 'sheet'>): string {
  const index = /^duty\.segments\.(\d+)/.exec(at)?.[1]
  if (index === undefined) return labelOf(at, request.sheet)
  const segment = request.scenario.duty.segments[Number(index)]
  return segment === undefined ? '' : `${Number(index) + 1}. ${segmentName(segment)}`
}
