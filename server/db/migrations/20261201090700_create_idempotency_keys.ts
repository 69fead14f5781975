import type { Knex } from 'knex'
import { protectShopTable } from '../tenant-table'

/**
 * Why: a create whose answer was lost is sent again. Key, hash of the request and the answer are written in the
 * transaction of the effect, so that a repeat gets the first answer and changes nothing. Kept for 24 hours.
 * `answer` is text, not jsonb, so that the repeat is the same to the byte.
 * Lost by going down: repeats of creates made before then meet a conflict instead of their first answer.
 */
export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    create table idempotency_keys (
      shop_id uuid not null references shops (id),
      route text not null,
      key text not null check (length(key) between 1 and 200),
      user_id uuid not null,
      request_hash bytea not null check (length(request_hash) = 32),
      status smallint,
      etag text,
      answer text,
      created_at timestamptz not null default now(),
      primary key (shop_id, route, key),
      foreign key (shop_id, user_id) references memberships (shop_id, user_id)
    )`)
  await knex.raw('create index idempotency_keys_age on idempotency_keys (shop_id, created_at)')
  await protectShopTable(knex, 'idempotency_keys', 'select, insert, update, delete')
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw('drop table idempotency_keys')
}
