import knex, { type Knex } from 'knex'
import { ownerConfig } from './config'
import { installTypeParsers } from './type-parsers'

/** One number for "seeding Longpull", any that nothing else on the server uses. */
const SEED_LOCK = 7_164_201_512

/** One transaction of the owning role, for the demo seed. A second seeder waits until the first is through. */
export async function asOwner<T>(work: (trx: Knex.Transaction) => Promise<T>): Promise<T> {
  installTypeParsers()
  const database = knex(ownerConfig())
  try {
    return await database.transaction(async (trx) => {
      await trx.raw('set local lock_timeout = 60000')
      await trx.raw('select pg_advisory_xact_lock(?)', [SEED_LOCK])
      return work(trx)
    })
  } finally {
    await database.destroy()
  }
}
