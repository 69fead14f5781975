import type { Knex } from 'knex'
import { protectShopTable } from '../tenant-table'

/**
 * Why: the parts a shop can buy, each with the ratings its maker gives, at whatever conditions the maker chose.
 * Lost by going down: every shop's catalogue.
 */
export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    create table coolers (
      shop_id uuid not null references shops (id),
      id uuid not null,
      name text not null check (length(name) between 1 and 120),
      construction text not null check (construction in ('stacked-plate', 'plate-fin', 'tube-fin', 'in-tank')),
      face_area_m2 double precision check (face_area_m2 > 0),
      width_m double precision not null check (width_m > 0),
      height_m double precision not null check (height_m > 0),
      depth_m double precision not null check (depth_m > 0),
      ports text not null check (length(ports) between 1 and 80),
      price_cents bigint not null check (price_cents >= 0),
      note text check (length(note) <= 500),
      version integer not null default 1,
      created_at timestamptz not null default now(),
      created_by uuid not null,
      primary key (shop_id, id),
      foreign key (shop_id, created_by) references memberships (shop_id, user_id),
      check ((construction = 'in-tank') = (face_area_m2 is null))
    )`)
  await knex.raw('create index coolers_name on coolers (shop_id, lower(name), id)')
  await knex.raw(`
    create table cooler_ratings (
      shop_id uuid not null references shops (id),
      cooler_id uuid not null,
      position smallint not null check (position >= 0),
      heat_w double precision not null check (heat_w > 0),
      inlet_difference_k double precision not null check (inlet_difference_k > 0),
      oil_flow_m3_s double precision not null check (oil_flow_m3_s > 0),
      pressure_drop_pa double precision not null check (pressure_drop_pa > 0),
      oil_in_c double precision,
      air_velocity_mps double precision check (air_velocity_mps > 0),
      coolant_flow_m3_s double precision check (coolant_flow_m3_s > 0),
      primary key (shop_id, cooler_id, position),
      foreign key (shop_id, cooler_id) references coolers (shop_id, id) on delete cascade,
      check ((air_velocity_mps is null) <> (coolant_flow_m3_s is null))
    )`)
  await protectShopTable(knex, 'coolers', 'select, insert, update, delete')
  await protectShopTable(knex, 'cooler_ratings', 'select, insert, update, delete')
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw('drop table cooler_ratings')
  await knex.raw('drop table coolers')
}
