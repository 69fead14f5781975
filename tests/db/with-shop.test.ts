import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { closeDatabase } from '../../server/db/connection'
import { SessionRefused, withoutShop, withShop } from '../../server/db/with-shop'
import { createTestDatabase, queryAsAdmin, type TestDatabase } from '../support/database'
import { hashOf, insertTestShop, type TestShop } from '../support/shops'

const POOL_MAX = 4

let database: TestDatabase
let a: TestShop
let b: TestShop

beforeAll(async () => {
  database = await createTestDatabase({ content: 'migrated' })
  process.env.DATABASE_URL = database.env.DATABASE_URL
  process.env.DATABASE_POOL_MAX = String(POOL_MAX)
  a = await insertTestShop(database, 'A')
  b = await insertTestShop(database, 'B', 'technician')
})
afterAll(async () => {
  await closeDatabase()
  await database.drop()
})

const currentShop = async (trx: Parameters<Parameters<typeof withoutShop>[0]>[0]): Promise<string | null> => {
  const answer = await trx.raw<{ rows: { shop: string | null }[] }>(
    `select current_setting('app.shop_id', true) as shop`,
  )
  return answer.rows[0]?.shop ?? null
}

const age = (column: 'last_used_at' | 'created_at', interval: string) =>
  queryAsAdmin(database, `update sessions set ${column} = now() - $2::interval where token_hash = $1`, [
    a.tokenHash,
    interval,
  ])

describe('withShop', () => {
  it('finds shop, person and role by the session, in the transaction it works in', async () => {
    const seen = await withShop(b.tokenHash, async (trx, session) => ({
      session,
      shop: await currentShop(trx),
      shops: (await trx('shops').select('id')) as { id: string }[],
    }))
    expect(seen.session).toMatchObject({ shopId: b.shopId, userId: b.userId, role: 'technician' })
    expect(seen.shop).toBe(b.shopId)
    expect(seen.shops).toEqual([{ id: b.shopId }])
  })

  it('refuses a token nobody has, and shows no rows without a shop', async () => {
    await expect(withShop(hashOf('nobody'), async () => 'in')).rejects.toThrow(SessionRefused)
    expect(await withoutShop(async (trx) => trx('shops').select('id'))).toEqual([])
  })

  it('takes all of a failed piece of work back', async () => {
    await expect(
      withShop(a.tokenHash, async (trx) => {
        await trx('customers').insert({ shop_id: a.shopId, id: a.userId, name: 'Gone', created_by: a.userId })
        throw new Error('halfway')
      }),
    ).rejects.toThrow('halfway')
    expect(await queryAsAdmin(database, 'select from customers')).toEqual([])
  })

  it('S5: ends a session 30 minutes after its last use and keeps it alive by using it', async () => {
    await age('last_used_at', '29 minutes')
    await withShop(a.tokenHash, async () => undefined)
    const [used] = await queryAsAdmin<{ fresh: boolean }>(
      database,
      `select last_used_at > now() - interval '1 minute' as fresh from sessions where token_hash = $1`,
      [a.tokenHash],
    )
    expect(used).toEqual({ fresh: true })
    await age('last_used_at', '31 minutes')
    await expect(withShop(a.tokenHash, async () => 'in')).rejects.toThrow(SessionRefused)
    await age('last_used_at', '0 minutes')
  })

  it('S5: ends a session 12 hours after its start, however much it is used', async () => {
    await age('created_at', '11 hours 59 minutes')
    await expect(withShop(a.tokenHash, async () => 'in')).resolves.toBe('in')
    await age('created_at', '12 hours 1 minute')
    await expect(withShop(a.tokenHash, async () => 'in')).rejects.toThrow(SessionRefused)
    await age('created_at', '0 minutes')
  })

  it.each([
    [
      'the session is revoked',
      'update sessions set revoked_at = $1',
      'update sessions set revoked_at = null',
    ],
    ['the person is disabled', 'update users set disabled_at = $1', 'update users set disabled_at = null'],
    [
      'the membership ended',
      'update memberships set ended_at = $1',
      'update memberships set ended_at = null',
    ],
    ['the shop is suspended', 'update shops set suspended_at = $1', 'update shops set suspended_at = null'],
  ])('S5: refuses at once when %s', async (_what, end, begin) => {
    await expect(withShop(a.tokenHash, async () => 'in')).resolves.toBe('in')
    await queryAsAdmin(database, end, [new Date()])
    await expect(withShop(a.tokenHash, async () => 'in')).rejects.toThrow(SessionRefused)
    await queryAsAdmin(database, begin)
    await expect(withShop(a.tokenHash, async () => 'in')).resolves.toBe('in')
  })

  it('S5: a changed role holds from the next transaction on', async () => {
    await queryAsAdmin(database, `update memberships set role = 'customer' where user_id = $1`, [b.userId])
    expect(await withShop(b.tokenHash, async (_trx, { role }) => role)).toBe('customer')
  })
})

describe('S3: a shop never outlives its transaction', () => {
  it('2,000 pieces of work, 20 at a time over 4 connections, one in ten failing, one in ten losing its connection', async () => {
    const total = 2000
    let next = 0
    let wrong = 0
    let answered = 0
    const failures = { failed: 0, cut: 0 }

    const one = async (index: number): Promise<void> => {
      const shop = index % 2 === 0 ? a : b
      try {
        const seen = await withShop(shop.tokenHash, async (trx) => {
          const before = await currentShop(trx)
          const { rows } = await trx.raw<{ rows: { id: string; shop: string }[] }>(
            `select id, current_setting('app.shop_id', true) as shop from shops`,
          )
          if (index % 10 === 3) throw new RangeError('on purpose')
          // As a backend that dies, or is ended by an administrator, in the middle of a request.
          if (index % 10 === 7) await trx.raw('select pg_terminate_backend(pg_backend_pid())')
          return { before, rows }
        })
        answered += 1
        const fits =
          seen.rows.length === 1 && seen.rows[0]?.id === shop.shopId && seen.rows[0].shop === shop.shopId
        if (!fits || seen.before !== shop.shopId) wrong += 1
      } catch (error) {
        if (error instanceof RangeError) failures.failed += 1
        else failures.cut += 1
      }
    }
    const worker = async (): Promise<void> => {
      while (next < total) {
        next += 1
        await one(next - 1)
      }
    }
    await Promise.all(Array.from({ length: 20 }, worker))

    expect({ wrong, answered, ...failures }).toEqual({ wrong: 0, answered: 1600, failed: 200, cut: 200 })
    const left = await Promise.all(
      Array.from({ length: POOL_MAX }, () =>
        withoutShop(async (trx) => {
          await trx.raw('select pg_sleep(0.05)')
          return currentShop(trx)
        }),
      ),
    )
    expect(left.filter((shop) => shop !== null && shop !== '')).toEqual([])
  })

  it('a connection that hangs past its time is not handed on', async () => {
    const started = performance.now()
    await expect(withShop(a.tokenHash, (trx) => trx.raw('select pg_sleep(20)'))).rejects.toThrow()
    expect(performance.now() - started).toBeLessThan(4000)
    expect(await withShop(b.tokenHash, async (trx) => currentShop(trx))).toBe(b.shopId)
  })
})
