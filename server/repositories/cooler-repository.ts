import type { Knex } from 'knex'
import type { CatalogueCooler } from '#shared/schemas/catalogue-cooler'
import type { AirConstruction } from '#shared/schemas/heat-input'

interface CoolerRow {
  id: string
  name: string
  construction: AirConstruction | 'in-tank'
  face_area_m2: number | null
  width_m: number
  height_m: number
  depth_m: number
  ports: string
  price_cents: number
  note: string | null
}

interface RatingRow {
  cooler_id: string
  heat_w: number
  inlet_difference_k: number
  oil_flow_m3_s: number
  pressure_drop_pa: number
  oil_in_c: number | null
  air_velocity_mps: number | null
  coolant_flow_m3_s: number | null
}

function toRating(row: RatingRow) {
  return {
    heatW: row.heat_w,
    inletDifferenceK: row.inlet_difference_k,
    oilFlowM3S: row.oil_flow_m3_s,
    pressureDropPa: row.pressure_drop_pa,
    ...(row.oil_in_c === null ? {} : { oilInC: row.oil_in_c }),
  }
}

function toCooler(row: CoolerRow, ratings: RatingRow[]): CatalogueCooler {
  const part = {
    id: row.id,
    name: row.name,
    widthM: row.width_m,
    heightM: row.height_m,
    depthM: row.depth_m,
    ports: row.ports,
    priceCents: row.price_cents,
    ...(row.note === null ? {} : { note: row.note }),
  }
  if (row.construction === 'in-tank')
    return {
      ...part,
      construction: row.construction,
      ratings: ratings.map((rating) => ({
        ...toRating(rating),
        coolantFlowM3S: rating.coolant_flow_m3_s ?? 0,
      })),
    }
  return {
    ...part,
    construction: row.construction,
    faceAreaM2: row.face_area_m2 ?? 0,
    ratings: ratings.map((rating) => ({ ...toRating(rating), airVelocityMps: rating.air_velocity_mps ?? 0 })),
  }
}

export async function listCoolers(trx: Knex.Transaction, shopId: string): Promise<CatalogueCooler[]> {
  const coolers = await trx('coolers')
    .where({ shop_id: shopId })
    .orderByRaw('lower(name), id')
    .select<CoolerRow[]>(
      'id',
      'name',
      'construction',
      'face_area_m2',
      'width_m',
      'height_m',
      'depth_m',
      'ports',
      'price_cents',
      'note',
    )
  const ratings = await trx('cooler_ratings')
    .where({ shop_id: shopId })
    .orderBy(['cooler_id', 'position'])
    .select<RatingRow[]>(
      'cooler_id',
      'heat_w',
      'inlet_difference_k',
      'oil_flow_m3_s',
      'pressure_drop_pa',
      'oil_in_c',
      'air_velocity_mps',
      'coolant_flow_m3_s',
    )
  const ratingsOf = new Map<string, RatingRow[]>()
  for (const rating of ratings)
    ratingsOf.set(rating.cooler_id, [...(ratingsOf.get(rating.cooler_id) ?? []), rating])
  return coolers.map((row) => toCooler(row, ratingsOf.get(row.id) ?? []))
}
