import type { Knex } from 'knex'
import { protectShopTable } from '../tenant-table'

/**
 * Why: the nouns of the main job. A build sheet, a drive cycle and a set-up's change are documents that the schemas of
 * `shared/schemas` describe, so they are kept as jsonb; what is searched, sorted or referred to is a column.
 * `version` counts every change by hand, `physics_version` those that change what the model computes.
 * Lost by going down: every customer, build, scenario and set-up.
 */
export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    create table customers (
      shop_id uuid not null references shops (id),
      id uuid not null,
      name text not null check (length(name) between 1 and 120),
      phone text check (length(phone) <= 40),
      email text check (length(email) <= 254),
      version integer not null default 1,
      created_at timestamptz not null default now(),
      created_by uuid not null,
      updated_at timestamptz not null default now(),
      primary key (shop_id, id),
      foreign key (shop_id, created_by) references memberships (shop_id, user_id)
    )`)
  await knex.raw('create index customers_name on customers (shop_id, lower(name), id)')
  await knex.raw(`
    create table builds (
      shop_id uuid not null references shops (id),
      id uuid not null,
      customer_id uuid,
      name text not null check (length(name) between 1 and 120),
      stage text not null check (stage in ('call', 'sized', 'quoted', 'in-work', 'road-test', 'done')),
      stage_rank smallint not null generated always as (
        case stage when 'call' then 1 when 'sized' then 2 when 'quoted' then 3 when 'in-work' then 4
          when 'road-test' then 5 else 6 end
      ) stored,
      sheet jsonb not null,
      control jsonb not null,
      limits jsonb not null,
      version integer not null default 1,
      physics_version integer not null default 1,
      created_at timestamptz not null default now(),
      created_by uuid not null,
      updated_at timestamptz not null default now(),
      updated_by uuid not null,
      primary key (shop_id, id),
      foreign key (shop_id, customer_id) references customers (shop_id, id),
      foreign key (shop_id, created_by) references memberships (shop_id, user_id),
      foreign key (shop_id, updated_by) references memberships (shop_id, user_id)
    )`)
  await knex.raw('create index builds_updated on builds (shop_id, updated_at desc, id)')
  await knex.raw('create index builds_name on builds (shop_id, lower(name), id)')
  await knex.raw('create index builds_stage on builds (shop_id, stage_rank, id)')
  await knex.raw('create index builds_customer on builds (shop_id, customer_id)')
  await knex.raw(`
    create table scenarios (
      shop_id uuid not null references shops (id),
      id uuid not null,
      build_id uuid not null,
      name text not null check (length(name) between 1 and 120),
      load jsonb not null,
      duty jsonb not null,
      version integer not null default 1,
      physics_version integer not null default 1,
      created_at timestamptz not null default now(),
      created_by uuid not null,
      updated_at timestamptz not null default now(),
      primary key (shop_id, id),
      unique (shop_id, build_id, id),
      foreign key (shop_id, build_id) references builds (shop_id, id) on delete cascade,
      foreign key (shop_id, created_by) references memberships (shop_id, user_id)
    )`)
  await knex.raw('create index scenarios_build on scenarios (shop_id, build_id, created_at, id)')
  await knex.raw(`
    create table setups (
      shop_id uuid not null references shops (id),
      id uuid not null,
      build_id uuid not null,
      name text not null check (length(name) between 1 and 120),
      kind text not null check (kind in ('as-it-is', 'drive-differently', 'custom')),
      change jsonb not null,
      version integer not null default 1,
      physics_version integer not null default 1,
      created_at timestamptz not null default now(),
      created_by uuid not null,
      updated_at timestamptz not null default now(),
      primary key (shop_id, id),
      unique (shop_id, build_id, id),
      foreign key (shop_id, build_id) references builds (shop_id, id) on delete cascade,
      foreign key (shop_id, created_by) references memberships (shop_id, user_id)
    )`)
  await knex.raw('create index setups_build on setups (shop_id, build_id, created_at, id)')
  await knex.raw(
    `create unique index setups_standing_key on setups (shop_id, build_id, kind) where kind <> 'custom'`,
  )
  for (const table of TABLES) await protectShopTable(knex, table, 'select, insert, update, delete')
}

const TABLES = ['customers', 'builds', 'scenarios', 'setups']

export async function down(knex: Knex): Promise<void> {
  for (const table of [...TABLES].reverse()) await knex.raw(`drop table ${table}`)
}
