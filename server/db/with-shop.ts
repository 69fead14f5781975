import type { Knex } from 'knex'
import { getDatabase } from './connection'
import { isConnectionLost } from './failures'

/** Who stands behind a transaction, as the database itself found by the session. */
export interface ShopSession {
  sessionId: string
  userId: string
  userName: string
  email: string
  unitSystem: 'us' | 'metric' | null
  theme: 'light' | 'dark' | 'system'
  shopId: string
  shopName: string
  shopUnitSystem: 'us' | 'metric'
  role: 'owner' | 'estimator' | 'technician' | 'customer'
}

/** There is no live session behind the token: unknown, revoked, idle too long, too old, or its person or shop is gone. */
export class SessionRefused extends Error {
  override readonly name = 'SessionRefused'
}

interface SessionRow {
  session_id: string
  user_id: string
  user_name: string
  email: string
  unit_system: ShopSession['unitSystem']
  theme: ShopSession['theme']
  shop_id: string
  shop_name: string
  shop_unit_system: ShopSession['shopUnitSystem']
  role: ShopSession['role']
}

interface PooledConnection {
  connection: { stream: { destroy: () => void } }
  /** By this Knex's pool knows a connection it must not hand out again. */
  __knex__disposed?: unknown
}

/** Cuts a connection, and marks it before the pool could give it to the next request. */
function cut(connection: PooledConnection, error: unknown): void {
  connection.__knex__disposed = error
  connection.connection.stream.destroy()
}

/**
 * One transaction on one connection. A connection that hangs or is gone is cut at once: ROLLBACK would wait on it for
 * another whole timeout, and the pool would hand it to the next request.
 */
async function inTransaction<T>(work: (trx: Knex.Transaction) => Promise<T>): Promise<T> {
  const database = getDatabase()
  const connection: PooledConnection = await database.client.acquireConnection()
  try {
    return await database.transaction(
      async (trx) => {
        try {
          return await work(trx)
        } catch (error) {
          if (isConnectionLost(error)) cut(connection, error)
          throw error
        }
      },
      { connection },
    )
  } catch (error) {
    if (isConnectionLost(error)) cut(connection, error)
    throw error
  } finally {
    await database.client.releaseConnection(connection)
  }
}

/** Checks the session and sets shop, person and role for this transaction only, in one round trip. */
export async function beginSession(trx: Knex.Transaction, tokenHash: Buffer): Promise<ShopSession> {
  const answer = await trx.raw<{ rows: SessionRow[] }>('select * from app.begin_session(?)', [tokenHash])
  const row = answer.rows[0]
  if (row === undefined) throw new SessionRefused('No live session behind this token.')
  return {
    sessionId: row.session_id,
    userId: row.user_id,
    userName: row.user_name,
    email: row.email,
    unitSystem: row.unit_system,
    theme: row.theme,
    shopId: row.shop_id,
    shopName: row.shop_name,
    shopUnitSystem: row.shop_unit_system,
    role: row.role,
  }
}

/**
 * The only way to a shop's rows: opens a transaction, lets the database find the session behind the token, and holds
 * everything inside to that session's shop. Authentication and work share the transaction, so a session revoked by then
 * does nothing any more. Inside, only `trx` touches the database.
 *
 * @throws SessionRefused when there is no live session behind the token
 */
export function withShop<T>(
  tokenHash: Buffer,
  work: (trx: Knex.Transaction, session: ShopSession) => Promise<T>,
): Promise<T> {
  return inTransaction(async (trx) => work(trx, await beginSession(trx, tokenHash)))
}

/** A transaction of nobody, for signing in and out: no shop is set, so the row rules show no shop's rows. */
export function withoutShop<T>(work: (trx: Knex.Transaction) => Promise<T>): Promise<T> {
  return inTransaction(work)
}
