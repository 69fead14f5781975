import type { AdviceRequest } from '../../../shared/advice/types'
import type { Answer } from '../../../shared/workbench/answer'

/** The answer of a request that has one. */
export function answerOf({ answers }: AdviceRequest): Answer {
  if (answers.kind === 'refusal') throw new Error(`no answer: ${answers.message}`)
  return answers
}
