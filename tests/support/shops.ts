import { createHash, randomBytes } from 'node:crypto'
import pg from 'pg'
import { v7 as createId } from 'uuid'
import type { Role } from '../../shared/schemas/auth'
import type { TestDatabase } from './database'

export interface TestShop {
  shopId: string
  userId: string
  /** What a cookie would carry, as the session table knows it. */
  tokenHash: Buffer
}

/** A shop with one person and one live session, put in past the row rules. */
export async function insertTestShop(
  database: TestDatabase,
  name: string,
  role: Role = 'owner',
): Promise<TestShop> {
  const shop = { shopId: createId(), userId: createId(), tokenHash: hashOf(randomBytes(32)) }
  await asAdmin(database, async (admin) => {
    await admin.query('insert into shops (id, name) values ($1, $2)', [shop.shopId, name])
    await admin.query('insert into users (id, email, name, password_hash) values ($1, $2, $3, $4)', [
      shop.userId,
      `${shop.userId}@shop.test`,
      `Somebody of ${name}`,
      'nothing fits this',
    ])
    await admin.query('insert into memberships (shop_id, user_id, role) values ($1, $2, $3)', [
      shop.shopId,
      shop.userId,
      role,
    ])
    await admin.query(
      `insert into sessions (shop_id, id, user_id, token_hash, peer_address, user_agent)
       values ($1, $2, $3, $4, 'test', 'test')`,
      [shop.shopId, createId(), shop.userId, shop.tokenHash],
    )
  })
  return shop
}

export function hashOf(bytes: Buffer | string): Buffer {
  return createHash('sha256').update(bytes).digest()
}

/** A connection of one of the roles for as long as the work takes. */
export async function withClient<T>(url: string, work: (client: pg.Client) => Promise<T>): Promise<T> {
  const client = new pg.Client({ connectionString: url, application_name: 'longpull-test' })
  await client.connect()
  try {
    return await work(client)
  } finally {
    await client.end()
  }
}

export function asAdmin<T>(database: TestDatabase, work: (client: pg.Client) => Promise<T>): Promise<T> {
  return withClient(database.adminUrl, work)
}
