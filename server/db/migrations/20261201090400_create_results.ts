import type { Knex } from 'knex'
import { protectShopTable } from '../tenant-table'

/**
 * Why: an answer is kept with its whole input and the version of the model, and never changed: the serving role may
 * insert and read, not update or delete. Results go only with the build, scenario or set-up they belong to.
 * Lost by going down: every stored answer; each could be computed again, by the model of that day.
 */
export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    create table results (
      shop_id uuid not null references shops (id),
      id uuid not null,
      build_id uuid not null,
      scenario_id uuid not null,
      setup_id uuid not null,
      model_version text not null,
      input jsonb not null,
      answer jsonb not null,
      locked_answer jsonb,
      peak_sump_c double precision not null,
      peak_cooler_inlet_c double precision not null,
      judgement text not null check (judgement in ('fine', 'watch', 'ease-off', 'stop')),
      build_version integer not null,
      build_physics_version integer not null,
      scenario_version integer not null,
      scenario_physics_version integer not null,
      setup_version integer not null,
      setup_physics_version integer not null,
      created_at timestamptz not null default clock_timestamp(),
      created_by uuid not null,
      primary key (shop_id, id),
      foreign key (shop_id, build_id) references builds (shop_id, id) on delete cascade,
      foreign key (shop_id, build_id, scenario_id) references scenarios (shop_id, build_id, id) on delete cascade,
      foreign key (shop_id, build_id, setup_id) references setups (shop_id, build_id, id) on delete cascade,
      foreign key (shop_id, created_by) references memberships (shop_id, user_id)
    )`)
  await knex.raw(
    'create index results_newest on results (shop_id, scenario_id, setup_id, created_at desc, id desc)',
  )
  await knex.raw('create index results_build on results (shop_id, build_id)')
  await knex.raw('create index results_setup on results (shop_id, build_id, setup_id)')
  await protectShopTable(knex, 'results', 'select, insert')
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw('drop table results')
}
