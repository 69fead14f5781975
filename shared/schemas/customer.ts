import { z } from 'zod'
import { EmailSchema, IdSchema, NewIdSchema, textLine, VersionSchema } from './common'

export const CustomerCreateSchema = z.strictObject({
  id: NewIdSchema,
  name: textLine(120),
  phone: textLine(40).optional(),
  email: EmailSchema.optional(),
})
export type CustomerCreate = z.infer<typeof CustomerCreateSchema>

export const CustomerSchema = z.strictObject({
  id: IdSchema,
  name: z.string(),
  phone: z.string().optional(),
  email: z.string().optional(),
  version: VersionSchema,
})
export type Customer = z.infer<typeof CustomerSchema>
