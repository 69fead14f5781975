import { z } from 'zod'

/** The body of every error answer; `facts` of the error, such as `currentVersion`, stand beside the named fields. */
export const ErrorBodySchema = z.object({
  error: z.looseObject({
    code: z.string(),
    message: z.string(),
    issues: z.array(z.strictObject({ path: z.string(), message: z.string() })).optional(),
    requestId: z.string(),
  }),
})
