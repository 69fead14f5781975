import { z } from 'zod'
import { hasSomeField, IdSchema, NewIdSchema, textLine, VersionSchema } from './common'
import { CoolerSchema } from './heat-input'

/** A partial change of a build: of its cooling, shift style, top gear or speed. The empty one is "as it is". */
export const SetupChangeSchema = z.strictObject({
  shiftStyle: z.enum(['tow', 'economy'], { error: 'must be tow or economy' }).optional(),
  topGear: z.int({ error: 'must be a gear from 1 to 12' }).min(1).max(12).optional(),
  /** Not faster than this on climbs and loose ground; everywhere, where the drive cycle has neither. */
  speedMps: z
    .number({ error: 'must be a speed from 0.1 to 100 m/s; 20 m/s is 45 mph' })
    .min(0.1, { error: 'must be a speed from 0.1 to 100 m/s; 20 m/s is 45 mph' })
    .max(100, { error: 'must be a speed from 0.1 to 100 m/s; 20 m/s is 45 mph' })
    .optional(),
  lockup: z
    .enum(['as-proven', 'always', 'never'], { error: 'must be as-proven, always or never' })
    .optional(),
  /** Replaces the build's list of coolers. */
  coolers: z
    .array(CoolerSchema, { error: 'must be a list of coolers' })
    .max(6, { error: 'takes at most 6 coolers' })
    .optional(),
  removeBypass: z.boolean({ error: 'must be true or false' }).optional(),
})
export type SetupChange = z.infer<typeof SetupChangeSchema>

export const SetupKindSchema = z.enum(['as-it-is', 'drive-differently', 'custom'])
export type SetupKind = z.infer<typeof SetupKindSchema>

export const SetupSchema = z.strictObject({
  id: IdSchema,
  buildId: IdSchema,
  name: z.string(),
  kind: SetupKindSchema,
  change: SetupChangeSchema,
  version: VersionSchema,
})
export type Setup = z.infer<typeof SetupSchema>

/** `POST /api/builds/:id/setups`: always a custom one, since the other two kinds come with the build. */
export const SetupCreateSchema = z.strictObject({
  id: NewIdSchema,
  name: textLine(120),
  change: SetupChangeSchema,
})
export type SetupCreate = z.infer<typeof SetupCreateSchema>

/** `PATCH /api/builds/:id/setups/:setupId`. */
export const SetupUpdateSchema = z
  .strictObject({ name: textLine(120).optional(), change: SetupChangeSchema.optional() })
  .refine(hasSomeField, { error: 'must name at least one of name and change' })
export type SetupUpdate = z.infer<typeof SetupUpdateSchema>

export const SetupAnswerSchema = z.strictObject({ setup: SetupSchema })
export type SetupAnswer = z.infer<typeof SetupAnswerSchema>
