import knex, { type Knex } from 'knex'
import { setTimeout as wait } from 'node:timers/promises'
import { ownerConfig } from './config'
import { installTypeParsers } from './type-parsers'

/** One number for "migrating Longpull", any that nothing else on the server uses. */
const MIGRATION_LOCK = 7_164_201_511

const LOCK_NOT_AVAILABLE = '55P03'
const WAIT_MS = 250
const MOST_WAIT_MS = 5 * 60_000
const MOST_RETRIES = 30

interface MigrationReport {
  /** A line for the person who watches. */
  say: (line: string) => void
}

/**
 * Brings the database to the newest migration, once, however many starters ask at the same time: an advisory lock on a
 * connection of its own decides who migrates; the others wait and then find nothing left to do. The lock goes with its
 * connection, so a starter killed midway leaves none behind; the row by which Knex locks does stay behind then, and is
 * released here, which is safe under our lock.
 *
 * @returns the names of the migrations that ran
 */
export async function runMigrations({ say }: MigrationReport): Promise<string[]> {
  installTypeParsers()
  const database = knex(ownerConfig())
  try {
    return await holdingLock(database, say, () => migrateWithRetry(database, say))
  } finally {
    await database.destroy()
  }
}

async function holdingLock<T>(
  database: Knex,
  say: MigrationReport['say'],
  work: () => Promise<T>,
): Promise<T> {
  const holder: unknown = await database.client.acquireConnection()
  const ask = async (sql: string): Promise<boolean> => {
    const answer = await database.raw<{ rows: { done: boolean }[] }>(sql, [MIGRATION_LOCK]).connection(holder)
    return answer.rows[0]?.done === true
  }
  try {
    const from = Date.now()
    let waited = false
    while (!(await ask('select pg_try_advisory_lock(?) as done'))) {
      if (Date.now() - from > MOST_WAIT_MS)
        throw new Error(
          'Another starter has been migrating for 5 minutes. Look at it, or end it, and start again.',
        )
      if (!waited) say('another starter is migrating; waiting for it')
      waited = true
      await wait(WAIT_MS)
    }
    const done = await work()
    await ask('select pg_advisory_unlock(?) as done')
    return done
  } finally {
    await database.client.releaseConnection(holder)
  }
}

/** A table in use for longer than a second is not waited for with everything queueing behind: step back and try again. */
async function migrateWithRetry(database: Knex, say: MigrationReport['say']): Promise<string[]> {
  for (let attempt = 1; ; attempt += 1) {
    try {
      await database.migrate.forceFreeMigrationsLock()
      const [, names] = (await database.migrate.latest()) as [number, string[]]
      return names
    } catch (error) {
      const blocked = error instanceof Error && 'code' in error && error.code === LOCK_NOT_AVAILABLE
      if (!blocked || attempt >= MOST_RETRIES) throw error
      say('a table is in use; trying again')
      await wait(WAIT_MS * Math.min(attempt, 8))
    }
  }
}
