import { z } from 'zod'
import { hasSomeField, IdSchema, NewIdSchema, textLine, VersionSchema } from './common'
import { DutySchema, LoadSchema } from './heat-input'

/** What a build must survive: load and drive cycle, exactly as the model takes them. */
export const ScenarioSchema = z.strictObject({
  id: IdSchema,
  buildId: IdSchema,
  name: z.string(),
  load: LoadSchema,
  duty: DutySchema,
  version: VersionSchema,
})
export type Scenario = z.infer<typeof ScenarioSchema>

/** `POST /api/builds/:id/scenarios`. */
export const ScenarioCreateSchema = z.strictObject({
  id: NewIdSchema,
  name: textLine(120),
  load: LoadSchema,
  duty: DutySchema,
})
export type ScenarioCreate = z.infer<typeof ScenarioCreateSchema>

/** `PATCH /api/builds/:id/scenarios/:scenarioId`. */
export const ScenarioUpdateSchema = z
  .strictObject({ name: textLine(120).optional(), load: LoadSchema.optional(), duty: DutySchema.optional() })
  .refine(hasSomeField, { error: 'must name at least one of name, load and duty' })
export type ScenarioUpdate = z.infer<typeof ScenarioUpdateSchema>

export const ScenarioAnswerSchema = z.strictObject({ scenario: ScenarioSchema })
export type ScenarioAnswer = z.infer<typeof ScenarioAnswerSchema>
