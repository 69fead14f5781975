import { WARNING_ADVICE } from '../workbench/warning-advice'
import { ADVICE_MEANINGS, type AdviceCode } from './codes'
import type { Situation } from './situation'
import type { Advice, Severity } from './types'
import type { Words } from './words'

/** Something to look for in a situation; finds nothing where all is well. */
export type Sign = (situation: Situation) => Advice[]

/** A list of advice of one code; what a model's warning asks to do is said in one place. */
export function draft(
  code: AdviceCode,
  severity: Severity,
  text: Words,
  more: Partial<Omit<Advice, 'code' | 'severity' | 'text'>> = {},
): Advice {
  return {
    code,
    severity,
    title: [withoutStop(ADVICE_MEANINGS[code])],
    text,
    action: code in WARNING_ADVICE ? [WARNING_ADVICE[code as keyof typeof WARNING_ADVICE]] : [],
    remedies: [],
    ...more,
  }
}

/** A title is not a sentence with a full stop. */
const withoutStop = (sentence: string): string => sentence.replace(/\.$/, '')
