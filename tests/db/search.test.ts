import { v7 as createId } from 'uuid'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { closeDatabase } from '../../server/db/connection'
import { withShop } from '../../server/db/with-shop'
import { createTestDatabase, queryAsAdmin, type TestDatabase } from '../support/database'
import { insertTestShop, type TestShop } from '../support/shops'

let database: TestDatabase
let a: TestShop
let b: TestShop

async function insertBuild(shop: TestShop, name: string, customer?: string): Promise<string> {
  const id = createId()
  if (customer !== undefined)
    await queryAsAdmin(
      database,
      'insert into customers (shop_id, id, name, created_by) values ($1, $2, $3, $4)',
      [shop.shopId, id, customer, shop.userId],
    )
  await queryAsAdmin(
    database,
    `insert into builds (shop_id, id, customer_id, name, stage, sheet, control, limits, created_by, updated_by)
     values ($1, $2, $3, $4, 'call', '{}', '{}', '{}', $5, $5)`,
    [shop.shopId, id, customer === undefined ? null : id, name, shop.userId],
  )
  return id
}

async function search(shop: TestShop, text: string): Promise<string[]> {
  return withShop(shop.tokenHash, async (trx) => {
    const { rows } = await trx.raw<{ rows: { id: string }[] }>(
      'select id from app.search_builds(?) as found(id)',
      [text],
    )
    return rows.map(({ id }) => id)
  })
}

beforeAll(async () => {
  database = await createTestDatabase({ content: 'migrated' })
  process.env.DATABASE_URL = database.env.DATABASE_URL
  a = await insertTestShop(database, 'A')
  b = await insertTestShop(database, 'B')
})
afterAll(async () => {
  await closeDatabase()
  await database.drop()
})

describe('search by a part of a name', () => {
  it('finds builds by their own name or their customer’s, in any case, in the shop of the transaction only', async () => {
    const own = await insertBuild(a, 'Élan Bronze Wagon')
    const byCustomer = await insertBuild(a, 'Blue truck', 'Wagoner & Sons')
    await insertBuild(a, 'Something else')
    const foreign = await insertBuild(b, 'Wagon of B', 'Wagoner of B')
    expect((await search(a, 'wAGOn')).sort()).toEqual([own, byCustomer].sort())
    expect(await search(b, 'wagon')).toEqual([foreign])
    expect(await search(a, 'élan')).toEqual([own])
  })

  it('takes %, _ and \\ for what was typed', async () => {
    const percent = await insertBuild(a, 'Grade 100% of the time')
    const under = await insertBuild(a, 'left_right')
    const slash = await insertBuild(a, 'back\\slash')
    expect(await search(a, '100%')).toEqual([percent])
    expect(await search(a, '%')).toEqual([percent])
    expect(await search(a, '_')).toEqual([under])
    expect(await search(a, '\\')).toEqual([slash])
  })

  it('S4, M4: reads the trigram index in a shop with half of 40,000 builds', async () => {
    await queryAsAdmin(
      database,
      `insert into builds (shop_id, id, name, stage, sheet, control, limits, created_by, updated_by)
       select case when n % 2 = 0 then $1::uuid else $2::uuid end, gen_random_uuid(), md5(n::text), 'call', '{}', '{}', '{}',
         case when n % 2 = 0 then $3::uuid else $4::uuid end, case when n % 2 = 0 then $3::uuid else $4::uuid end
       from generate_series(1, 40000) as n`,
      [a.shopId, b.shopId, a.userId, b.userId],
    )
    await queryAsAdmin(database, 'analyze builds')
    const [before] = await queryAsAdmin<{ scans: number }>(database, SCANS)
    const started = performance.now()
    const found = await search(a, 'abc12')
    const tookMs = performance.now() - started
    for (let tries = 0; tries < 100; tries += 1) {
      const [after] = await queryAsAdmin<{ scans: number }>(database, SCANS)
      if (Number(after?.scans) > Number(before?.scans)) break
      if (tries === 99) throw new Error('the index was not read')
      await new Promise((resolve) => setTimeout(resolve, 50))
    }
    const [expected] = await queryAsAdmin<{ count: number }>(
      database,
      `select count(*)::int as count from builds where shop_id = $1 and name like '%abc12%'`,
      [a.shopId],
    )
    expect(found).toHaveLength(expected?.count ?? -1)
    expect(tookMs).toBeLessThan(500)
  })
})

const SCANS = `select coalesce(idx_scan, 0)::int as scans from pg_stat_user_indexes where indexrelname = 'builds_name_trigrams'`
