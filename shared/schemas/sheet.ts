import { z } from 'zod'
import { textLine } from './common'

/** Where a value of the sheet comes from; what nobody measured never stands without its band. */
export const OriginSchema = z.enum(['measured', 'maker', 'typical'], {
  error: 'must be measured, maker (from the maker) or typical',
})
export type Origin = z.infer<typeof OriginSchema>

/** Names an object inherits: a path holding one could reach past the sheet when it is unfolded. */
const INHERITED_NAMES = new Set(['__proto__', 'constructor', 'prototype'])
const PATH_MESSAGE = 'must name a leaf of the build, such as vehicle.massKg or transmission.gears.2.ratio'

/** The place of a leaf within the model's build, arrays by index: `transmission.gears.2.ratio`. */
export const SheetPathSchema = z
  .string({ error: PATH_MESSAGE })
  .max(120, { error: PATH_MESSAGE })
  .regex(/^[a-z][A-Za-z0-9]*(\.([a-z][A-Za-z0-9]*|0|[1-9][0-9]{0,2}))*$/, { error: PATH_MESSAGE })
  .refine((path) => !path.split('.').some((part) => INHERITED_NAMES.has(part)), { error: PATH_MESSAGE })

/** One value of the build sheet, in SI, with what was typed, in which unit, and where it comes from. */
export const SheetValueSchema = z.strictObject({
  path: SheetPathSchema,
  value: z.union([z.number(), textLine(120), z.boolean()], {
    error: 'must be a finite number, one line of text, or true or false',
  }),
  typed: textLine(60, 0).optional(),
  unit: textLine(20, 0).optional(),
  origin: OriginSchema,
  /** One standard deviation as a share of the value, log-normal. */
  relativeSpread: z
    .number({ error: 'must be a share of the value from 0 to 2, such as 0.05 for 5 %' })
    .min(0, { error: 'must be a share of the value from 0 to 2, such as 0.05 for 5 %' })
    .max(2, { error: 'must be a share of the value from 0 to 2, such as 0.05 for 5 %' })
    .optional(),
})
export type SheetValue = z.infer<typeof SheetValueSchema>

/** All leaves of a build: an archetype fills every one as typical; they are replaced as more becomes known. */
export const BuildSheetSchema = z
  .strictObject({
    archetype: textLine(60),
    values: z
      .array(SheetValueSchema, { error: 'must be a list of values' })
      .min(1, { error: 'needs at least one value' })
      .max(800, { error: 'takes at most 800 values' }),
  })
  .superRefine((sheet, context) => {
    const seen = new Set<string>()
    sheet.values.forEach(({ path }, index) => {
      if (seen.has(path))
        context.addIssue({
          code: 'custom',
          path: ['values', index, 'path'],
          message: `${path} is on the sheet twice: keep one of the two`,
        })
      seen.add(path)
    })
  })
export type BuildSheet = z.infer<typeof BuildSheetSchema>
