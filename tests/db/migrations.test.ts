import { execFile, spawn } from 'node:child_process'
import { readdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { setTimeout as wait } from 'node:timers/promises'
import { promisify } from 'node:util'
import { afterEach, describe, expect, it } from 'vitest'
import { rootFolder } from '../../scripts/lib/paths.mjs'
import { MIGRATION_NAMES } from '../../server/db/migration-names'
import { createTestDatabase, plainEnvironment, queryAsAdmin, type TestDatabase } from '../support/database'
import { asAdmin } from '../support/shops'

const folder = join(rootFolder, 'server', 'db', 'migrations')
const run = promisify(execFile)
const databases: TestDatabase[] = []

async function createDatabase(content: 'empty' | 'migrated'): Promise<TestDatabase> {
  const database = await createTestDatabase({ content })
  databases.push(database)
  return database
}

afterEach(async () => {
  for (const database of databases.splice(0)) await database.drop()
})

/** Everything the catalogue says of the project's own tables, functions, rules and rights. */
async function describeSchema(database: TestDatabase): Promise<unknown[]> {
  return queryAsAdmin(
    database,
    `select 'column' as what, table_schema || '.' || table_name as name,
       column_name || ' ' || data_type || ' ' || is_nullable || ' ' || coalesce(column_default, '') as detail
     from information_schema.columns where table_schema in ('public', 'app')
     union all select 'index', tablename, indexdef from pg_indexes where schemaname = 'public'
     union all select 'constraint', conrelid::regclass::text, pg_get_constraintdef(oid) from pg_constraint
       where connamespace = 'public'::regnamespace
     union all select 'policy', tablename, policyname || ' ' || cmd || ' ' || roles::text || ' ' || coalesce(qual, '') || ' '
       || coalesce(with_check, '') from pg_policies
     union all select 'function', proname, pg_get_functiondef(oid) from pg_proc where pronamespace = to_regnamespace('app')
     union all select 'right', table_name, grantee || ' ' || privilege_type from information_schema.role_table_grants
       where table_schema = 'public' and grantee like 'longpull%'
     order by 1, 2, 3`,
  )
}

/** The command line of the knexfile at the root, which developers use. */
const runKnex = (database: TestDatabase, ...words: string[]) =>
  run(
    process.execPath,
    ['--import', 'tsx', join(rootFolder, 'node_modules', 'knex', 'bin', 'cli.js'), ...words],
    { cwd: rootFolder, env: { ...plainEnvironment(), ...database.env }, timeout: 60_000 },
  )

const startMigration = (database: TestDatabase) =>
  run(process.execPath, ['--import', 'tsx', join(rootFolder, 'scripts', 'migrate.ts')], {
    cwd: rootFolder,
    env: { ...plainEnvironment(), ...database.env },
    timeout: 60_000,
  })

describe('migrations', () => {
  it('are listed in their order, each with its reason and what going down loses', () => {
    const files = readdirSync(folder).sort()
    expect(files).toEqual([...MIGRATION_NAMES])
    const stamps = files.map((name) => name.slice(0, 14))
    expect(new Set(stamps).size).toBe(stamps.length)
    for (const name of files) {
      const text = readFileSync(join(folder, name), 'utf8')
      expect(text, name).toMatch(/\n \* Why: /)
      expect(text, name).toMatch(/\n \* Lost by going down: /)
      expect(text, name).toMatch(/export async function down/)
    }
  })

  it('go up, down to nothing, and up again to the same', async () => {
    const database = await createDatabase('empty')
    await runKnex(database, 'migrate:latest')
    const first = await describeSchema(database)
    expect(first.length).toBeGreaterThan(100)
    await runKnex(database, 'migrate:rollback', '--all')
    const left = await queryAsAdmin<{ name: string }>(
      database,
      `select relname as name from pg_class
       where relnamespace = 'public'::regnamespace and relkind in ('r', 'v', 'm', 'p')
       union select nspname from pg_namespace where nspname = 'app'`,
    )
    expect(left.map(({ name }) => name).sort()).toEqual(['knex_migrations', 'knex_migrations_lock'])
    await runKnex(database, 'migrate:latest')
    expect(await describeSchema(database)).toEqual(first)
  })
})

describe('R12: one starter migrates, however many there are', () => {
  it('lets three starters in at once: one migrates, two wait and find nothing to do', async () => {
    const database = await createDatabase('empty')
    const outputs = await Promise.all([1, 2, 3].map(() => startMigration(database)))
    const ran = outputs.filter(({ stdout }) => stdout.includes('migrate: ran '))
    expect(ran).toHaveLength(1)
    expect(outputs.filter(({ stdout }) => stdout.includes('migrate: nothing to do'))).toHaveLength(2)
    const done = await queryAsAdmin<{ name: string }>(
      database,
      'select name from knex_migrations order by id',
    )
    expect(done.map(({ name }) => name)).toEqual([...MIGRATION_NAMES])
  })

  /** Holds the name of a table to come, so that the migration that makes it has to wait. */
  async function whileTableIsTaken<T>(database: TestDatabase, work: () => Promise<T>): Promise<T> {
    return asAdmin(database, async (admin) => {
      await admin.query('begin')
      await admin.query('create table builds (id integer)')
      const result = await work()
      await admin.query('rollback')
      return result
    })
  }

  async function waitForLock(database: TestDatabase): Promise<void> {
    for (let tries = 0; tries < 400; tries += 1) {
      const rows = await queryAsAdmin(
        database,
        `select from pg_stat_activity where datname = current_database()
         and application_name = 'longpull-migrate' and wait_event_type = 'Lock'`,
      )
      if (rows.length > 0) return
      await wait(25)
    }
    throw new Error('the starter never had to wait')
  }

  it('goes on by itself after a starter was killed midway, though its lock row stayed behind', async () => {
    const database = await createDatabase('empty')
    await whileTableIsTaken(database, async () => {
      const starter = spawn(
        process.execPath,
        ['--import', 'tsx', join(rootFolder, 'scripts', 'migrate.ts')],
        {
          cwd: rootFolder,
          env: { ...plainEnvironment(), ...database.env },
          stdio: 'ignore',
        },
      )
      const ended = new Promise((resolve) => starter.once('exit', resolve))
      await waitForLock(database)
      starter.kill('SIGKILL')
      await ended
    })
    // All migrations of one start share a transaction, so that nothing of them is left; the lock row of one that could
    // not run in a transaction would be.
    await queryAsAdmin(database, 'update knex_migrations_lock set is_locked = 1')
    const { stdout } = await startMigration(database)
    expect(stdout).toMatch(/migrate: \d done/)
    const done = await queryAsAdmin<{ name: string }>(
      database,
      'select name from knex_migrations order by id',
    )
    expect(done.map(({ name }) => name)).toEqual([...MIGRATION_NAMES])
  })

  it('steps back from a table in use and comes again', async () => {
    const database = await createDatabase('empty')
    const migrating = await whileTableIsTaken(database, async () => {
      const started = startMigration(database)
      await waitForLock(database)
      await wait(1500)
      return { started }
    })
    const { stdout } = await migrating.started
    expect(stdout).toContain('migrate: a table is in use; trying again')
    expect(stdout).toMatch(/migrate: \d done/)
  })
})
