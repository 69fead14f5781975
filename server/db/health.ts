import { MIGRATION_TABLE } from './config'
import { MIGRATION_NAMES } from './migration-names'
import { withoutShop } from './with-shop'

async function withinMs<T>(limitMs: number, work: Promise<T>): Promise<T> {
  let timer: NodeJS.Timeout | undefined
  const late = new Promise<never>((_resolve, reject) => {
    timer = setTimeout(() => reject(new Error('The database did not answer in time.')), limitMs)
  })
  try {
    return await Promise.race([work, late])
  } finally {
    clearTimeout(timer)
    work.catch(() => undefined)
  }
}

/** Whether the database answers within a second. */
export async function isDatabaseUp(): Promise<boolean> {
  try {
    await withinMs(
      1000,
      withoutShop((trx) => trx.raw('select 1')),
    )
    return true
  } catch {
    return false
  }
}

/** Whether the database answers within a second and every migration this build knows has run. */
export async function isDatabaseReady(): Promise<boolean> {
  try {
    const done = await withinMs(
      1000,
      withoutShop((trx) =>
        trx(MIGRATION_TABLE)
          .whereIn('name', [...MIGRATION_NAMES])
          .count<{ count: number }[]>('name as count'),
      ),
    )
    return done[0]?.count === MIGRATION_NAMES.length
  } catch {
    return false
  }
}
