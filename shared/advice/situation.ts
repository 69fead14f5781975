import { deriveInputs } from '../build-sheet/setups'
import { AppError } from '../errors'
import type { HeatInput } from '../schemas/heat-input'
import type { Answer, Refusal } from '../workbench/answer'
import { findHill, type Hill } from '../workbench/hill'
import { Trials } from './trials'
import type { AdviceRequest } from './types'

/** A request read once for everybody who looks at it. */
export interface Situation {
  request: AdviceRequest
  /** What is judged; null where the sheet itself is refused. */
  input: HeatInput | null
  answer: Answer | null
  refusal: Refusal | null
  /** The stretch that asks most of the truck. */
  hill: Hill
  trials: Trials
}

/** What is known of a situation whose truck has an answer. */
export type Answered = Situation & { input: HeatInput; answer: Answer }

const known = new WeakMap<AdviceRequest, Situation>()

/** Reads a request; the same object is read once, and what was tried for it is kept. */
export function situationOf(request: AdviceRequest): Situation {
  const found = known.get(request)
  if (found !== undefined) return found
  const { answers } = request
  const answer = answers.kind === 'answer' ? answers : null
  const input = answer?.input ?? deriveOrNull(request)
  const situation: Situation = {
    request,
    input,
    answer,
    refusal: answers.kind === 'refusal' ? answers : null,
    hill: findHill(input?.duty ?? request.scenario.duty),
    trials: new Trials(request),
  }
  known.set(request, situation)
  return situation
}

/** A truck that the model refuses may still be one that the sheet describes. */
function deriveOrNull(request: AdviceRequest): HeatInput | null {
  try {
    return deriveInputs(request).judged
  } catch (error) {
    if (error instanceof AppError) return null
    throw error
  }
}

export function isAnswered(situation: Situation): situation is Answered {
  return situation.answer !== null && situation.input !== null
}
