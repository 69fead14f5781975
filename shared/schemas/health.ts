import { z } from 'zod'

/** The answer of `GET /api/health`, also when something is down (then with status 503). */
export const HealthSchema = z.strictObject({
  status: z.enum(['ok', 'down']),
  process: z.literal('ok'),
  database: z.enum(['ok', 'down']),
})
export type Health = z.infer<typeof HealthSchema>
