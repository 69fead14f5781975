import { z } from 'zod'

export const KnownSchema = z.enum(['yes', 'no', 'unknown'], { error: 'must be yes, no or unknown' })
export type Known = z.infer<typeof KnownSchema>

/**
 * What decides whether the converter ever locks. Unless `lockupSeen` is yes, an answer shows locked and unlocked and is
 * judged by the unlocked.
 */
export const ControlSchema = z.strictObject({
  generationsMatch: KnownSchema,
  lockupCommand: z.enum(['controller', 'switch', 'pressure', 'none', 'unknown'], {
    error: 'must be controller, switch, pressure, none or unknown',
  }),
  loadSignal: KnownSchema,
  brakeSwitchWired: KnownSchema,
  lockupSeen: KnownSchema,
})
export type Control = z.infer<typeof ControlSchema>
