import type { Knex } from 'knex'
import { grantFunction, openToOwner } from '../tenant-table'

/**
 * Why: under row-level security PostgreSQL may not use a trigram index for `like`, since that operator could leak rows
 * it is shown; a big shop would wait the best part of a second. This function runs as the owner, keeps to the shop of
 * the transaction by its own `where`, and gives out ids only, which the caller joins under the row rules.
 * Lost by going down: search by name; no data.
 */
export async function up(knex: Knex): Promise<void> {
  await openToOwner(knex, 'builds', 'select')
  await openToOwner(knex, 'customers', 'select')
  const found = await knex.raw<{ rows: { schema: string }[] }>(
    `select n.nspname as schema from pg_extension e join pg_namespace n on n.oid = e.extnamespace where extname = 'pg_trgm'`,
  )
  const schema = found.rows[0]?.schema
  if (schema !== undefined) {
    await knex.raw(
      'create index builds_name_trigrams on builds using gin (lower(name) ??.gin_trgm_ops)'.replace(
        '??',
        `"${schema}"`,
      ),
    )
    await knex.raw(
      'create index customers_name_trigrams on customers using gin (lower(name) ??.gin_trgm_ops)'.replace(
        '??',
        `"${schema}"`,
      ),
    )
  }
  await knex.raw(`
    create function app.search_builds(wanted text) returns setof uuid
    language sql stable security definer set search_path = pg_catalog, pg_temp as $$
      select b.id from public.builds b
      where b.shop_id = nullif(current_setting('app.shop_id', true), '')::uuid
        and lower(b.name) like '%' || replace(replace(replace(lower(wanted), '\\', '\\\\'), '%', '\\%'), '_', '\\_') || '%'
      union
      select b.id from public.customers c
      join public.builds b on b.shop_id = c.shop_id and b.customer_id = c.id
      where c.shop_id = nullif(current_setting('app.shop_id', true), '')::uuid
        and lower(c.name) like '%' || replace(replace(replace(lower(wanted), '\\', '\\\\'), '%', '\\%'), '_', '\\_') || '%'
    $$`)
  await grantFunction(knex, 'app.search_builds(text)')
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw('drop function app.search_builds(text)')
  await knex.raw('drop index if exists builds_name_trigrams, customers_name_trigrams')
  await knex.raw('drop policy of_functions on customers')
  await knex.raw('drop policy of_functions on builds')
}
