import type { Knex } from 'knex'
import { openToOwner, protectShopTable } from '../tenant-table'

/**
 * Why: a shop is the tenant; a person may belong to several shops, each time with a role. The serving role has no right
 * on `users` at all: passwords and addresses of all shops are in one table, so it reaches them by functions only.
 * Lost by going down: every shop, person and membership.
 */
export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    create table shops (
      id uuid primary key,
      name text not null check (length(name) between 1 and 120),
      unit_system text not null default 'us' check (unit_system in ('us', 'metric')),
      suspended_at timestamptz,
      created_at timestamptz not null default now()
    )`)
  await knex.raw(`
    create table users (
      id uuid primary key,
      email text not null check (email = lower(email) and length(email) between 3 and 254),
      name text not null check (length(name) between 1 and 120),
      password_hash text not null,
      unit_system text check (unit_system in ('us', 'metric')),
      theme text not null default 'system' check (theme in ('light', 'dark', 'system')),
      disabled_at timestamptz,
      created_at timestamptz not null default now()
    )`)
  await knex.raw('create unique index users_email_key on users (email)')
  await knex.raw(`
    create table memberships (
      shop_id uuid not null references shops (id),
      user_id uuid not null references users (id),
      role text not null check (role in ('owner', 'estimator', 'technician', 'customer')),
      ended_at timestamptz,
      created_at timestamptz not null default now(),
      created_by uuid,
      primary key (shop_id, user_id),
      foreign key (shop_id, created_by) references memberships (shop_id, user_id)
    )`)
  await knex.raw('create index memberships_user_id on memberships (user_id)')
  await protectShopTable(knex, 'shops', 'select', 'id')
  await openToOwner(knex, 'shops', 'select')
  await protectShopTable(knex, 'memberships', 'select')
  await openToOwner(knex, 'memberships', 'select')
  await knex.raw('revoke all on users from public')
  await knex.raw('grant select on users to longpull_backup')
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw('drop table memberships')
  await knex.raw('drop table users')
  await knex.raw('drop table shops')
}
