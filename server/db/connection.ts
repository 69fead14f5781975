import knex, { type Knex } from 'knex'
import { appConfig } from './config'
import { installTypeParsers } from './type-parsers'

let database: Knex | undefined

/** The serving pool, opened at first use. Only `server/db` touches it; everything else gets a `trx` from `withShop`. */
export function getDatabase(): Knex {
  if (database === undefined) {
    installTypeParsers()
    database = knex(appConfig())
  }
  return database
}

/** Lets connections in use finish and closes all. A later use opens the pool anew. */
export async function closeDatabase(): Promise<void> {
  const closing = database
  database = undefined
  await closing?.destroy()
}
