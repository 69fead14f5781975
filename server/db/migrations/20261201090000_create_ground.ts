import type { Knex } from 'knex'

/**
 * Why: a schema of its own for the functions the serving role may call, so that tables and functions are granted apart;
 * trigram search where the extension can be had (search works without it, by reading every name of the shop).
 * Lost by going down: nothing but the empty schema. The extension stays, since others may use it.
 */
export async function up(knex: Knex): Promise<void> {
  await knex.raw('create schema app')
  await knex.raw('grant usage on schema app to longpull_app')
  await knex.raw('revoke create on schema public from public')
  await knex.raw('grant usage on schema public to longpull_app, longpull_backup')
  await knex.raw(`
    do $$
    begin
      create extension if not exists pg_trgm;
    exception when insufficient_privilege or undefined_file or feature_not_supported then
      raise notice 'pg_trgm is not to be had here: searching reads every name of the shop';
    end
    $$`)
  // The serving role asks which migrations ran, for /readyz; the backup role reads all there is.
  await knex.raw('grant select on knex_migrations to longpull_app, longpull_backup')
  await knex.raw('grant select on knex_migrations_lock to longpull_backup')
}

export async function down(knex: Knex): Promise<void> {
  await knex.raw('revoke select on knex_migrations from longpull_app, longpull_backup')
  await knex.raw('revoke select on knex_migrations_lock from longpull_backup')
  await knex.raw('revoke usage on schema public from longpull_app, longpull_backup')
  await knex.raw('drop schema app')
}
