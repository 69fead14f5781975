import { deriveInputs, type DerivedInputs } from '../build-sheet/setups'
import { judgeAnswer, type AnswerJudgement } from '../build-sheet/limits'
import { AppError, type ErrorIssue } from '../errors'
import { estimate } from '../heat'
import type { Estimate, SegmentResult } from '../heat/types'
import type { HeatInput } from '../schemas/heat-input'
import type { WorkbenchRequest } from './request'

/** The truck computed: judged by one state of lock-up, the other shown beside it where it is not proven. */
export interface Answer {
  kind: 'answer'
  judgedBy: 'locked' | 'unlocked'
  judged: Estimate
  /** What it was computed from, with what the set-up changes. */
  input: HeatInput
  /** The same truck if it did lock; null where lock-up is proven, or there is nothing that could lock. */
  ifLocked: Estimate | null
  judgement: AnswerJudgement
  /** Place in the drive cycle of the stretch with the hottest pan. */
  hottestIndex: number
}

/** The model has no answer for this input, and says why and where. */
export interface Refusal {
  kind: 'refusal'
  code: string
  message: string
  issues: ErrorIssue[]
}

/** What the screens show for any other failure of the model; the person can do nothing but try another value. */
const UNKNOWN_MESSAGE = 'The model has no answer for these values.'

/** Turns what the model throws into words for the screen; anything that is not its own error is thrown on. */
export function toRefusal(error: unknown): Refusal {
  if (!(error instanceof AppError)) throw error
  return {
    kind: 'refusal',
    code: error.code,
    message: error.message === '' ? UNKNOWN_MESSAGE : error.message,
    issues: error.details.issues ?? [],
  }
}

/**
 * The answer that follows every keystroke: the drive cycle computed in the one or two states of lock-up that count.
 * Cheap enough for the thread that also draws.
 */
export function computeAnswer(request: WorkbenchRequest): Answer | Refusal {
  try {
    const inputs = deriveInputs(request)
    const judged = estimate(inputs.judged)
    const ifLocked =
      inputs.judgedBy === 'unlocked' && inputs.locked !== null ? estimateOrNull(inputs.locked) : null
    return {
      kind: 'answer',
      judgedBy: inputs.judgedBy,
      judged,
      input: inputs.judged,
      ifLocked,
      judgement: judgeAnswer(judged, request.limits),
      hottestIndex: indexOfHottest(judged.segments),
    }
  } catch (error) {
    return toRefusal(error)
  }
}

function estimateOrNull(input: DerivedInputs['judged']): Estimate | null {
  try {
    return estimate(input)
  } catch (error) {
    if (error instanceof AppError) return null
    throw error
  }
}

function indexOfHottest(segments: readonly SegmentResult[]): number {
  let hottest = 0
  segments.forEach((segment, index) => {
    if (segment.peakSumpC > (segments[hottest]?.peakSumpC ?? -Infinity)) hottest = index
  })
  return hottest
}
