import { z } from 'zod'
import { hasSomeField, IdSchema, NewIdSchema, textLine, TimestampSchema, VersionSchema } from './common'
import { ControlSchema } from './control'
import { CustomerCreateSchema } from './customer'
import { JudgementSchema, LimitsSchema } from './limits'
import { ScenarioCreateSchema, ScenarioSchema } from './scenario'
import { SetupSchema } from './setup'
import { BuildSheetSchema } from './sheet'

/** How far the job is. */
export const STAGES = ['call', 'sized', 'quoted', 'in-work', 'road-test', 'done'] as const
export const StageSchema = z.enum(STAGES, { error: `must be one of: ${STAGES.join(', ')}` })
export type Stage = z.infer<typeof StageSchema>

export const BuildSchema = z.strictObject({
  id: IdSchema,
  customerId: IdSchema.optional(),
  customerName: z.string().optional(),
  name: z.string(),
  stage: StageSchema,
  sheet: BuildSheetSchema,
  control: ControlSchema,
  limits: LimitsSchema,
  version: VersionSchema,
  createdAt: TimestampSchema,
  updatedAt: TimestampSchema,
})
export type Build = z.infer<typeof BuildSchema>

/** `POST /api/builds`: a build with its first scenario; its two standing set-ups are made with it. */
export const BuildCreateSchema = z.strictObject({
  id: NewIdSchema,
  name: textLine(120),
  customer: CustomerCreateSchema.optional(),
  sheet: BuildSheetSchema,
  control: ControlSchema,
  limits: LimitsSchema,
  scenario: ScenarioCreateSchema,
})
export type BuildCreate = z.infer<typeof BuildCreateSchema>

/** `PATCH /api/builds/:id`. */
export const BuildUpdateSchema = z
  .strictObject({
    name: textLine(120).optional(),
    stage: StageSchema.optional(),
    sheet: BuildSheetSchema.optional(),
    control: ControlSchema.optional(),
    limits: LimitsSchema.optional(),
  })
  .refine(hasSomeField, { error: 'must name at least one of name, stage, sheet, control and limits' })
export type BuildUpdate = z.infer<typeof BuildUpdateSchema>

/** Answer of `GET`, `POST` and `PATCH` of one build. */
export const BuildAnswerSchema = z.strictObject({
  build: BuildSchema,
  setups: z.array(SetupSchema),
  scenarios: z.array(ScenarioSchema),
})
export type BuildAnswer = z.infer<typeof BuildAnswerSchema>

export const BUILD_SORTS = ['name', 'customer', 'stage', 'updated'] as const
export const BuildSortSchema = z.enum(BUILD_SORTS, { error: `must be one of: ${BUILD_SORTS.join(', ')}` })
export type BuildSort = z.infer<typeof BuildSortSchema>

/** Query of `GET /api/builds`. */
export const BuildListQuerySchema = z.strictObject({
  search: textLine(120, 0).optional(),
  stage: StageSchema.optional(),
  sort: BuildSortSchema.default('updated'),
  /** Newest first for `updated`, else from A on, unless asked otherwise. */
  direction: z.enum(['asc', 'desc'], { error: 'must be asc or desc' }).optional(),
  page: z
    .string()
    .regex(/^[1-9][0-9]{0,5}$/, { error: 'must be a page number from 1 on' })
    .transform(Number)
    .default(1),
})
export type BuildListQuery = z.infer<typeof BuildListQuerySchema>

/** One line of the list; the answer is that of the first scenario, as it is, while no input changed since. */
export const BuildListItemSchema = z.strictObject({
  id: IdSchema,
  name: z.string(),
  customerName: z.string().nullable(),
  stage: StageSchema,
  updatedAt: TimestampSchema,
  scenarioId: IdSchema.nullable(),
  peakSumpC: z.number().nullable(),
  peakCoolerInletC: z.number().nullable(),
  judgement: JudgementSchema.nullable(),
})
export type BuildListItem = z.infer<typeof BuildListItemSchema>

export const BuildListSchema = z.strictObject({
  builds: z.array(BuildListItemSchema),
  total: z.int().min(0),
  page: z.int().min(1),
  pageSize: z.int().min(1),
})
export type BuildList = z.infer<typeof BuildListSchema>
