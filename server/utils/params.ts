import { z } from 'zod'
import { IdSchema } from '#shared/schemas/common'

export const BuildParamsSchema = z.strictObject({ id: IdSchema })
export const ScenarioParamsSchema = z.strictObject({ id: IdSchema, scenarioId: IdSchema })
export const SetupParamsSchema = z.strictObject({ id: IdSchema, setupId: IdSchema })
