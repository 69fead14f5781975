import { z } from 'zod'
import { IdSchema, textBlock, textLine } from './common'
import { AirConstructionSchema, AirRatingSchema, TankRatingSchema } from './heat-input'

const sizeM = z
  .number({ error: 'must be a size from 0.001 to 3 m; 0.28 is 11 in' })
  .min(0.001, { error: 'must be a size from 0.001 to 3 m; 0.28 is 11 in' })
  .max(3, { error: 'must be a size from 0.001 to 3 m; 0.28 is 11 in' })

const partFields = {
  id: IdSchema,
  name: textLine(120),
  widthM: sizeM,
  heightM: sizeM,
  depthM: sizeM,
  ports: textLine(80),
  priceCents: z.int({ error: 'must be whole cents' }).min(0).max(100_000_000),
  note: textBlock(500).optional(),
}
const ratings = <T extends z.ZodType>(rating: T) =>
  z
    .array(rating)
    .min(1, { error: 'needs at least one rating' })
    .max(10, { error: 'takes at most 10 ratings' })

export const CatalogueAirCoolerSchema = z.strictObject({
  ...partFields,
  construction: AirConstructionSchema,
  faceAreaM2: z.number().min(1e-4).max(5),
  ratings: ratings(AirRatingSchema),
})
export type CatalogueAirCooler = z.infer<typeof CatalogueAirCoolerSchema>

export const CatalogueTankCoolerSchema = z.strictObject({
  ...partFields,
  construction: z.literal('in-tank'),
  ratings: ratings(TankRatingSchema),
})
export type CatalogueTankCooler = z.infer<typeof CatalogueTankCoolerSchema>

/** A part a shop can buy, rated at the conditions its maker chose (several where the maker gives several). */
export const CatalogueCoolerSchema = z.discriminatedUnion('construction', [
  CatalogueAirCoolerSchema,
  CatalogueTankCoolerSchema,
])
export type CatalogueCooler = z.infer<typeof CatalogueCoolerSchema>

/** Answer of `GET /api/coolers`. */
export const CatalogueCoolerListSchema = z.strictObject({ coolers: z.array(CatalogueCoolerSchema) })
export type CatalogueCoolerList = z.infer<typeof CatalogueCoolerListSchema>
