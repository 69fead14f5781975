import type { Knex } from 'knex'
import type { CatalogueCooler } from '../../../shared/schemas/catalogue-cooler'
import type { Role } from '../../../shared/schemas/auth'
import type { UnitSystem } from '../../../shared/schemas/common'

/** A shop with its people and catalogue, as the owner role inserts them: the serving role may not make shops or people. */

export interface SeedPerson {
  id: string
  name: string
  email: string
  role: Role
}

export interface SeedShop {
  id: string
  name: string
  unitSystem: UnitSystem
  people: SeedPerson[]
  coolers: readonly CatalogueCooler[]
}

/** Holds the rest of the transaction to one shop: the row rules hold for the owner role too. */
export async function enterShop(trx: Knex.Transaction, shopId: string): Promise<void> {
  await trx.raw(`select set_config('app.shop_id', ?, true)`, [shopId])
}

export async function hasUser(trx: Knex.Transaction, email: string): Promise<boolean> {
  return (await trx('users').where({ email }).first('id')) !== undefined
}

export async function insertShop(trx: Knex.Transaction, shop: SeedShop, passwordHash: string): Promise<void> {
  await enterShop(trx, shop.id)
  await trx('shops').insert({ id: shop.id, name: shop.name, unit_system: shop.unitSystem })
  for (const { id, name, email, role } of shop.people) {
    await trx('users').insert({ id, name, email, password_hash: passwordHash })
    await trx('memberships').insert({ shop_id: shop.id, user_id: id, role })
  }
  const createdBy = shop.people[0]?.id
  for (const cooler of shop.coolers) {
    await trx('coolers').insert({
      shop_id: shop.id,
      id: cooler.id,
      name: cooler.name,
      construction: cooler.construction,
      face_area_m2: cooler.construction === 'in-tank' ? null : cooler.faceAreaM2,
      width_m: cooler.widthM,
      height_m: cooler.heightM,
      depth_m: cooler.depthM,
      ports: cooler.ports,
      price_cents: cooler.priceCents,
      note: cooler.note ?? null,
      created_by: createdBy,
    })
    await trx('cooler_ratings').insert(
      cooler.ratings.map((rating, position) => ({
        shop_id: shop.id,
        cooler_id: cooler.id,
        position,
        heat_w: rating.heatW,
        inlet_difference_k: rating.inletDifferenceK,
        oil_flow_m3_s: rating.oilFlowM3S,
        pressure_drop_pa: rating.pressureDropPa,
        oil_in_c: rating.oilInC ?? null,
        air_velocity_mps: 'airVelocityMps' in rating ? rating.airVelocityMps : null,
        coolant_flow_m3_s: 'coolantFlowM3S' in rating ? rating.coolantFlowM3S : null,
      })),
    )
  }
}

/** A build was last touched some days ago: a list whose every line is from this second looks like no shop's. */
export async function ageBuild(
  trx: Knex.Transaction,
  at: { shopId: string; id: string },
  daysAgo: number,
): Promise<void> {
  await trx('builds')
    .where({ shop_id: at.shopId, id: at.id })
    .update({
      created_at: trx.raw(`now() - make_interval(days => ?)`, [daysAgo + 3]),
      updated_at: trx.raw(`now() - make_interval(days => ?)`, [daysAgo]),
    })
}
