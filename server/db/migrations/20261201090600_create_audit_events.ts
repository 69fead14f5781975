import type { Knex } from 'knex'
import { protectShopTable } from '../tenant-table'

/**
 * Why: who did what, written in the transaction of the act itself, so that neither stands without the other. Append
 * only: the serving role may insert and read.
 * Lost by going down: the record of every act.
 */
export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    create table audit_events (
      shop_id uuid not null references shops (id),
      id uuid not null,
      at timestamptz not null default now(),
      user_id uuid not null,
      action text not null check (length(action) between 1 and 60),
      subject_kind text not null check (length(subject_kind) between 1 and 40),
      subject_id uuid not null,
      request_id uuid not null,
      detail jsonb not null default '{}',
      primary key (shop_id, id),
      foreign key (shop_id, user_id) references memberships (shop_id, user_id)
    )`)
  await knex.raw('create index audit_events_subject on audit_events (shop_id, subject_id, at)')
  await knex.raw('create index audit_events_at on audit_events (shop_id, at)')
  await protectShopTable(knex, 'audit_events', 'select, insert')
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw('drop table audit_events')
}
