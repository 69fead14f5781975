import type { Knex } from 'knex'
import type { ShopSession } from '../db/with-shop'

/** What every service works in: the transaction of the session's shop, who asks, and by which request. */
export interface ShopContext {
  trx: Knex.Transaction
  session: ShopSession
  requestId: string
}
