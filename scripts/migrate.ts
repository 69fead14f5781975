import { runMigrations } from '../server/db/migrate'

/** Brings the database of DATABASE_OWNER_URL to the newest migration. Safe to run by several starters at once. */
try {
  const names = await runMigrations({ say: (line) => console.log(`migrate: ${line}`) })
  for (const name of names) console.log(`migrate: ran ${name}`)
  console.log(names.length === 0 ? 'migrate: nothing to do' : `migrate: ${names.length} done`)
} catch (error) {
  console.error(`migrate: ${error instanceof Error ? error.message : String(error)}`)
  process.exitCode = 1
}
