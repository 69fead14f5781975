/** Public face of advice and explanation. */
export {
  ADVICE_BUDGET,
  advise,
  adviseAtOnce,
  adviseInFull,
  countRuns,
  placeWords,
  remediesFor,
} from './advise'
export { applyRemedy } from './apply'
export { ADVICE_MEANINGS, ADVICE_ORDER } from './codes'
export type { AdviceCode } from './codes'
export { explain, explainAtOnce, findMoves } from './explain'
export type { ExplainContext, ExplainedInput, Explanation, InputOrigin, Move } from './explain'
export { EXPLAIN_IDS } from './explain-topics'
export type { ExplainId } from './explain-topics'
export { predictIdleFlow, QUART_LIMITS_S } from './idle-flow'
export { findLabel, labelOf, valueWords } from './labels'
export type * from './types'
export { say } from './words'
export type { Figure, Format, Words } from './words'
