import { z } from 'zod'

/** Where a temperature is taken; the same fluid differs by tens of degrees between them. */
export const PlaceSchema = z.enum(['sump', 'hotLine', 'return'], {
  error: 'must be sump (the pan), hotLine (the to-cooler line) or return',
})
export type Place = z.infer<typeof PlaceSchema>

const LIMIT_MESSAGE =
  'must be a number from 0 to 300 °C; 93.3 (200 °F) is usual for the pan, 121.1 (250 °F) for a hot line'
const limitC = z
  .number({ error: LIMIT_MESSAGE })
  .min(0, { error: LIMIT_MESSAGE })
  .max(300, { error: LIMIT_MESSAGE })

export const PlaceLimitsSchema = z
  .strictObject({ sustainedC: limitC, briefC: limitC })
  .refine(({ sustainedC, briefC }) => briefC >= sustainedC, {
    path: ['briefC'],
    error: 'must not be under the sustained limit',
  })
export type PlaceLimits = z.infer<typeof PlaceLimitsSchema>

/** The ladder at the gauge's place: from which temperature on to watch, ease off and stop. Below `watchC` is fine. */
export const LadderSchema = z
  .strictObject({ watchC: limitC, easeOffC: limitC, stopC: limitC })
  .superRefine(({ watchC, easeOffC, stopC }, context) => {
    if (easeOffC < watchC)
      context.addIssue({ code: 'custom', path: ['easeOffC'], message: 'must not be under watchC' })
    if (stopC < easeOffC)
      context.addIssue({ code: 'custom', path: ['stopC'], message: 'must not be under easeOffC' })
  })
export type Ladder = z.infer<typeof LadderSchema>

export const LimitsSchema = z.strictObject({
  sump: PlaceLimitsSchema,
  hotLine: PlaceLimitsSchema,
  gaugePlace: PlaceSchema,
  ladder: LadderSchema,
})
export type Limits = z.infer<typeof LimitsSchema>

export const JudgementSchema = z.enum(['fine', 'watch', 'ease-off', 'stop'])
export type Judgement = z.infer<typeof JudgementSchema>
