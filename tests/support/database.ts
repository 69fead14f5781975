import { execFile } from 'node:child_process'
import { randomBytes } from 'node:crypto'
import { join } from 'node:path'
import { promisify } from 'node:util'
import pg from 'pg'
import { databaseGrantsSql } from '../../scripts/lib/bootstrap-sql.mjs'
import { rootFolder } from '../../scripts/lib/paths.mjs'
import { clusterUrl } from './cluster'

/** What a test database holds at first: nothing, the tables, or the tables with the demo data. */
export type TestContent = 'empty' | 'migrated' | 'demo'

export interface TestDatabase {
  name: string
  /** A superuser, for looking behind the row rules. */
  adminUrl: string
  ownerUrl: string
  appUrl: string
  backupUrl: string
  /** The three addresses under the names that the application and the scripts read. */
  env: { DATABASE_URL: string; DATABASE_OWNER_URL: string; DATABASE_BACKUP_URL: string }
  drop: () => Promise<void>
}

/** Any number will do, as long as nobody else uses it: one process at a time makes or copies a template. */
const TEMPLATE_LOCK = 7_316_402

/**
 * A database of the test's own, copied from a template that is made once a run.
 *
 * @param options.content - what it holds at first; the demo data unless said otherwise
 */
export async function createTestDatabase(options: { content?: TestContent } = {}): Promise<TestDatabase> {
  const name = `test_${randomBytes(6).toString('hex')}`
  await withAdmin('postgres', async (admin) => {
    await admin.query('select pg_advisory_lock($1)', [TEMPLATE_LOCK])
    await copyDatabase(admin, await ensureTemplate(admin, options.content ?? 'demo'), name)
  })
  const urls = urlsOf(name)
  return {
    name,
    ...urls,
    env: environmentOf(name),
    drop: () =>
      withAdmin('postgres', async (admin) => {
        await admin.query(`drop database if exists ${name} with (force)`)
      }),
  }
}

/** Runs a query as the superuser, past every rule: for looking at what is really stored. */
export async function queryAsAdmin<Row extends pg.QueryResultRow>(
  database: TestDatabase,
  sql: string,
  values: unknown[] = [],
): Promise<Row[]> {
  return withAdmin(database.name, async (admin) => (await admin.query<Row>(sql, values)).rows)
}

async function ensureTemplate(admin: pg.Client, content: TestContent): Promise<string> {
  const name = `template_${content}`
  const { rowCount } = await admin.query('select from pg_database where datname = $1', [name])
  if (rowCount === 1) return name

  // Made under another name, so that one cut off half-way is never taken for the whole.
  const draft = `${name}_draft`
  await admin.query(`drop database if exists ${draft} with (force)`)
  if (content === 'empty') {
    await admin.query(`create database ${draft} owner longpull_owner`)
    await admin.query(databaseGrantsSql(draft))
    await withAdmin(draft, (inside) => inside.query('create extension if not exists pg_trgm'))
  } else {
    await copyDatabase(admin, await ensureTemplate(admin, content === 'demo' ? 'migrated' : 'empty'), draft)
    await runScript(content === 'demo' ? 'seed-demo.ts' : 'migrate.ts', draft)
  }
  await withoutConnections(() => admin.query(`alter database ${draft} rename to ${name}`))
  return name
}

async function copyDatabase(admin: pg.Client, template: string, name: string): Promise<void> {
  await withoutConnections(() =>
    admin.query(`create database ${name} template ${template} owner longpull_owner`),
  )
  await admin.query(databaseGrantsSql(name))
}

/** Repeats what PostgreSQL refuses while a connection to the database is still being taken down. */
async function withoutConnections(work: () => Promise<unknown>): Promise<void> {
  const objectInUse = '55006'
  for (let attempt = 1; ; attempt += 1) {
    try {
      await work()
      return
    } catch (error) {
      if (!(error instanceof pg.DatabaseError) || error.code !== objectInUse || attempt === 50) throw error
      await new Promise((resolve) => setTimeout(resolve, 100))
    }
  }
}

async function runScript(name: string, database: string): Promise<void> {
  await promisify(execFile)(process.execPath, ['--import', 'tsx', join(rootFolder, 'scripts', name)], {
    cwd: rootFolder,
    env: { ...plainEnvironment(), ...environmentOf(database), LONGPULL_DEMO: '1' },
    timeout: 120_000,
  })
}

/** The test's environment without what would change how a program under test behaves. */
export function plainEnvironment(): NodeJS.ProcessEnv {
  const kept = ['PATH', 'HOME', 'LANG', 'TZ', 'TMPDIR']
  return Object.fromEntries(
    kept.flatMap((name) => (process.env[name] === undefined ? [] : [[name, process.env[name]]])),
  )
}

function urlsOf(name: string) {
  return {
    adminUrl: clusterUrl('admin', name),
    ownerUrl: clusterUrl('owner', name),
    appUrl: clusterUrl('app', name),
    backupUrl: clusterUrl('backup', name),
  }
}

function environmentOf(name: string): TestDatabase['env'] {
  const { appUrl, ownerUrl, backupUrl } = urlsOf(name)
  return { DATABASE_URL: appUrl, DATABASE_OWNER_URL: ownerUrl, DATABASE_BACKUP_URL: backupUrl }
}

async function withAdmin<T>(database: string, work: (client: pg.Client) => Promise<T>): Promise<T> {
  const client = new pg.Client({
    connectionString: clusterUrl('admin', database),
    application_name: 'longpull-test',
  })
  await client.connect()
  try {
    return await work(client)
  } finally {
    await client.end()
  }
}
