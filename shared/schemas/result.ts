import { z } from 'zod'
import type { Estimate } from '../heat/types'
import { IdSchema, NewIdSchema, TimestampSchema, VersionSchema } from './common'
import { HeatInputSchema } from './heat-input'
import { JudgementSchema } from './limits'

/** `POST /api/builds/:id/scenarios/:scenarioId/results`. */
export const ResultCreateSchema = z.strictObject({ id: NewIdSchema, setupId: IdSchema })
export type ResultCreate = z.infer<typeof ResultCreateSchema>

/** The model's own answer; its shape is the model's to say, so only what every reader needs is checked here. */
export const EstimateAnswerSchema = z.custom<Estimate>(
  (answer) => typeof answer === 'object' && answer !== null && 'peakSumpC' in answer && 'segments' in answer,
)

/**
 * A stored answer: set-up × scenario × model version with the whole input. Never changed; a newer one supersedes it.
 * `input` and `answer` are those that judge. Where lock-up is not proven that is the unlocked truck, and
 * `lockedAnswer` stands beside it: the same truck if it did lock (null where lock-up is proven, or makes no difference).
 */
export const ResultSchema = z.strictObject({
  id: IdSchema,
  buildId: IdSchema,
  scenarioId: IdSchema,
  setupId: IdSchema,
  modelVersion: z.string(),
  input: HeatInputSchema,
  answer: EstimateAnswerSchema,
  lockedAnswer: EstimateAnswerSchema.nullable(),
  judgement: JudgementSchema,
  /** Versions of what it was computed from. */
  buildVersion: VersionSchema,
  scenarioVersion: VersionSchema,
  setupVersion: VersionSchema,
  /** Whether nothing that enters the model changed since. */
  current: z.boolean(),
  createdAt: TimestampSchema,
  createdBy: IdSchema,
})
export type Result = z.infer<typeof ResultSchema>

export const ResultAnswerSchema = z.strictObject({ result: ResultSchema })
export type ResultAnswer = z.infer<typeof ResultAnswerSchema>

/** The newest result of each set-up, newest first. */
export const ResultListSchema = z.strictObject({ results: z.array(ResultSchema) })
export type ResultList = z.infer<typeof ResultListSchema>
