import type { Knex } from 'knex'

/**
 * Holds a table to the shop of the transaction: row-level security, forced on the owner too, by a rule for reading and
 * writing. `nullif` matters: after a local setting ends its value is an empty string, which is no uuid.
 *
 * Used by migrations that have run: add a new function rather than changing what this one does.
 *
 * @param column - the column that holds the shop's id
 * @param rights - what the serving role may do; the backup role reads everything
 */
export async function protectShopTable(
  knex: Knex,
  table: string,
  rights: string,
  column: 'shop_id' | 'id' = 'shop_id',
): Promise<void> {
  const own = `${column} = nullif(current_setting('app.shop_id', true), '')::uuid`
  await knex.raw(`alter table ${table} enable row level security`)
  await knex.raw(`alter table ${table} force row level security`)
  await knex.raw(`create policy of_shop on ${table} using (${own}) with check (${own})`)
  await knex.raw(`revoke all on ${table} from public`)
  if (rights !== '') await knex.raw(`grant ${rights} on ${table} to longpull_app`)
  await knex.raw(`grant select on ${table} to longpull_backup`)
}

/**
 * Lets the owner role, as which the SECURITY DEFINER functions run, see past the row rule of one table. The serving role
 * is not a member of it and never becomes it.
 */
export async function openToOwner(knex: Knex, table: string, command: 'select' | 'all'): Promise<void> {
  const check = command === 'all' ? 'with check (true)' : ''
  await knex.raw(
    `create policy of_functions on ${table} for ${command} to current_user using (true) ${check}`,
  )
}

/** Makes a function callable by the serving role and nobody else. */
export async function grantFunction(knex: Knex, signature: string): Promise<void> {
  await knex.raw(`revoke all on function ${signature} from public`)
  await knex.raw(`grant execute on function ${signature} to longpull_app`)
}
