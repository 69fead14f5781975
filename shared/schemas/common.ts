import { z } from 'zod'

/** No control characters (a NUL cannot be stored at all) and no half of a surrogate pair (it would come back changed). */
function isStorableText(text: string, lineBreaks: boolean): boolean {
  if (!text.isWellFormed()) return false
  for (const character of text) {
    const code = character.charCodeAt(0)
    const allowed = lineBreaks && (character === '\n' || character === '\t')
    if ((code < 0x20 && !allowed) || code === 0x7f) return false
  }
  return true
}

/** One line of typed text, trimmed, of `min` to `max` characters. */
export function textLine(max: number, min = 1) {
  return z
    .string({ error: 'must be text' })
    .trim()
    .min(min, { error: min === 1 ? 'must not be empty' : `must have at least ${min} characters` })
    .max(max, { error: `must have at most ${max} characters` })
    .refine((text) => isStorableText(text, false), {
      error: 'must be one line of plain text, without control characters',
    })
}

/** Several lines of typed text, trimmed, up to `max` characters. */
export function textBlock(max: number) {
  return z
    .string({ error: 'must be text' })
    .trim()
    .max(max, { error: `must have at most ${max} characters` })
    .refine((text) => isStorableText(text, true), {
      error: 'must be plain text, without control characters',
    })
}

/** The id of a new row, made by whoever creates it: UUID version 7, so that ids sort by the time they were made. */
export const NewIdSchema = z
  .uuidv7({ error: 'must be a UUID of version 7, such as 01890a5d-ac96-774b-bcce-b302099a8057' })
  .toLowerCase()

/** The id of a row that exists. */
export const IdSchema = z
  .guid({ error: 'must be an id, such as 01890a5d-ac96-774b-bcce-b302099a8057' })
  .toLowerCase()

export const EmailSchema = z
  .string({ error: 'must be text' })
  .trim()
  .toLowerCase()
  .max(254, { error: 'must have at most 254 characters' })
  .pipe(z.email({ error: 'must be an e-mail address, such as name@example.test' }))

/** A time as the API prints it: ISO 8601 in UTC. */
export const TimestampSchema = z.iso.datetime()

/** Counts the changes of a row edited by hand; the `ETag` of its answers and the `If-Match` of its changes. */
export const VersionSchema = z.int().min(1)

export const UnitSystemSchema = z.enum(['us', 'metric'], {
  error: 'must be us (°F, lb, mph) or metric (°C, kg, km/h)',
})
export type UnitSystem = z.infer<typeof UnitSystemSchema>

export const ThemeSchema = z.enum(['light', 'dark', 'system'], { error: 'must be light, dark or system' })
export type Theme = z.infer<typeof ThemeSchema>

/** A change without any field is a mistake of the caller, not a change. */
export function hasSomeField(value: object): boolean {
  return Object.values(value).some((field) => field !== undefined)
}
