import { z } from 'zod'
import { EmailSchema, hasSomeField, IdSchema, ThemeSchema, UnitSystemSchema } from './common'

export const RoleSchema = z.enum(['owner', 'estimator', 'technician', 'customer'])
export type Role = z.infer<typeof RoleSchema>

/** `POST /api/auth/sign-in`. */
export const SignInSchema = z.strictObject({
  email: EmailSchema,
  // Bounded only so that hashing stays bounded; what counts as a good password is decided where one is set.
  password: z
    .string({ error: 'must be text' })
    .min(1, { error: 'must not be empty' })
    .max(1024, { error: 'must have at most 1024 characters' }),
})
export type SignIn = z.infer<typeof SignInSchema>

/** Who is signed in, in which shop, as what: the answer of sign-in and of `GET /api/auth/me`. */
export const MeSchema = z.strictObject({
  user: z.strictObject({
    id: IdSchema,
    name: z.string(),
    email: z.string(),
    /** The person's own choice; null while they have made none and the shop's holds. */
    unitSystem: UnitSystemSchema.nullable(),
    theme: ThemeSchema,
  }),
  shop: z.strictObject({ id: IdSchema, name: z.string(), unitSystem: UnitSystemSchema }),
  role: RoleSchema,
})
export type Me = z.infer<typeof MeSchema>

/** `PATCH /api/auth/me`. */
export const MeUpdateSchema = z
  .strictObject({ unitSystem: UnitSystemSchema.optional(), theme: ThemeSchema.optional() })
  .refine(hasSomeField, { error: 'must name at least one of unitSystem and theme' })
export type MeUpdate = z.infer<typeof MeUpdateSchema>
