import type { Knex } from 'knex'
import { grantFunction, openToOwner, protectShopTable } from '../tenant-table'

/**
 * Why: a cookie alone cannot be revoked, so every request asks this table. A token is kept as its SHA-256 only. The
 * serving role has no right on the tables; it calls these functions, whose search path is fixed:
 * - `find_sign_in`, `open_session`, `end_session`, `begin_session` for signing in, out and each request;
 * - `update_profile`, `replace_password_hash` for the signed-in person's own row;
 * - `count_attempts`, `forgive_attempts` for the limit on signing in, shared by all processes.
 * A session ends 30 minutes after its last use and 12 hours after its start.
 * Lost by going down: every session (all must sign in again) and the counts of failed attempts.
 */
export async function up(knex: Knex): Promise<void> {
  await knex.raw(`
    create table sessions (
      shop_id uuid not null,
      id uuid not null,
      user_id uuid not null,
      token_hash bytea not null check (length(token_hash) = 32),
      peer_address text not null,
      user_agent text not null,
      created_at timestamptz not null default now(),
      last_used_at timestamptz not null default now(),
      revoked_at timestamptz,
      primary key (shop_id, id),
      foreign key (shop_id, user_id) references memberships (shop_id, user_id)
    )`)
  await knex.raw('create unique index sessions_token_hash_key on sessions (token_hash)')
  await knex.raw('create index sessions_person on sessions (shop_id, user_id)')
  await protectShopTable(knex, 'sessions', '')
  await openToOwner(knex, 'sessions', 'all')

  await knex.raw(`
    create table sign_in_attempts (
      bucket bytea primary key check (length(bucket) = 32),
      attempts integer not null,
      since timestamptz not null
    )`)
  await knex.raw('create index sign_in_attempts_since on sign_in_attempts (since)')
  await knex.raw('revoke all on sign_in_attempts from public')
  await knex.raw('grant select on sign_in_attempts to longpull_backup')

  await knex.raw(`
    create function app.count_attempts(wanted_bucket bytea, most integer, within interval)
    returns integer
    language plpgsql security definer set search_path = pg_catalog, pg_temp as $$
    declare
      counted public.sign_in_attempts;
    begin
      delete from public.sign_in_attempts where bucket in (
        select bucket from public.sign_in_attempts where since < now() - within limit 100 for update skip locked
      ) and bucket <> wanted_bucket;
      insert into public.sign_in_attempts as known (bucket, attempts, since)
      values (wanted_bucket, 1, clock_timestamp())
      on conflict (bucket) do update set
        attempts = case when known.since < clock_timestamp() - within then 1 else known.attempts + 1 end,
        since = case when known.since < clock_timestamp() - within then clock_timestamp() else known.since end
      returning * into counted;
      if counted.attempts <= most then
        return 0;
      end if;
      return greatest(1, ceil(extract(epoch from counted.since + within - clock_timestamp()))::integer);
    end
    $$`)
  await knex.raw(
    `comment on function app.count_attempts is 'Counts one attempt; 0 while it is within the limit, else the seconds to wait.'`,
  )
  await knex.raw(`
    create function app.forgive_attempts(known_bucket bytea, forgiven integer) returns void
    language sql security definer set search_path = pg_catalog, pg_temp as $$
      update public.sign_in_attempts set attempts = greatest(0, attempts - forgiven) where bucket = known_bucket
    $$`)
  await knex.raw(`
    create function app.find_sign_in(wanted_email text)
    returns table (user_id uuid, shop_id uuid, password_hash text)
    language sql stable security definer set search_path = pg_catalog, pg_temp as $$
      select u.id, m.shop_id, u.password_hash
      from public.users u
      join public.memberships m on m.user_id = u.id and m.ended_at is null
      join public.shops p on p.id = m.shop_id and p.suspended_at is null
      where u.email = wanted_email and u.disabled_at is null
      order by m.created_at, m.shop_id
      limit 1
    $$`)
  await knex.raw(`
    create function app.open_session(
      of_shop uuid, new_id uuid, of_user uuid, new_hash bytea, from_address text, agent text, replaced_hash bytea
    ) returns void
    language sql security definer set search_path = pg_catalog, pg_temp as $$
      update public.sessions set revoked_at = now() where token_hash = replaced_hash and revoked_at is null;
      insert into public.sessions (shop_id, id, user_id, token_hash, peer_address, user_agent)
      values (of_shop, new_id, of_user, new_hash, from_address, agent);
    $$`)
  await knex.raw(`
    create function app.end_session(known_hash bytea) returns void
    language sql security definer set search_path = pg_catalog, pg_temp as $$
      update public.sessions set revoked_at = now() where token_hash = known_hash and revoked_at is null
    $$`)
  await knex.raw(`
    create function app.begin_session(known_hash bytea)
    returns table (
      session_id uuid, user_id uuid, user_name text, email text, unit_system text, theme text,
      shop_id uuid, shop_name text, shop_unit_system text, role text
    )
    language plpgsql security definer set search_path = pg_catalog, pg_temp as $$
    #variable_conflict use_column
    declare
      found_row record;
    begin
      select s.id, s.last_used_at, u.id as user_id, u.name as user_name, u.email, u.unit_system, u.theme,
        p.id as shop_id, p.name as shop_name, p.unit_system as shop_unit_system, m.role
      into found_row
      from public.sessions s
      join public.users u on u.id = s.user_id and u.disabled_at is null
      join public.memberships m on m.shop_id = s.shop_id and m.user_id = s.user_id and m.ended_at is null
      join public.shops p on p.id = s.shop_id and p.suspended_at is null
      where s.token_hash = known_hash
        and s.revoked_at is null
        and s.last_used_at > now() - interval '30 minutes'
        and s.created_at > now() - interval '12 hours';
      if not found then
        return;
      end if;
      -- Once a minute is enough to keep a session alive, and skipping a locked row keeps parallel requests of one
      -- session from waiting for each other.
      if found_row.last_used_at < now() - interval '1 minute' then
        update public.sessions set last_used_at = now() where token_hash = (
          select token_hash from public.sessions where token_hash = known_hash for update skip locked
        );
      end if;
      perform set_config('app.shop_id', found_row.shop_id::text, true);
      perform set_config('app.user_id', found_row.user_id::text, true);
      perform set_config('app.role', found_row.role, true);
      return query select found_row.id, found_row.user_id, found_row.user_name, found_row.email, found_row.unit_system,
        found_row.theme, found_row.shop_id, found_row.shop_name, found_row.shop_unit_system, found_row.role;
    end
    $$`)
  await knex.raw(`
    create function app.update_profile(new_unit_system text, new_theme text) returns void
    language sql security definer set search_path = pg_catalog, pg_temp as $$
      update public.users
      set unit_system = coalesce(new_unit_system, unit_system), theme = coalesce(new_theme, theme)
      where id = nullif(current_setting('app.user_id', true), '')::uuid
    $$`)
  await knex.raw(`
    create function app.replace_password_hash(of_user uuid, former_hash text, new_hash text) returns void
    language sql security definer set search_path = pg_catalog, pg_temp as $$
      update public.users set password_hash = new_hash where id = of_user and password_hash = former_hash
    $$`)
  for (const signature of SIGNATURES) await grantFunction(knex, signature)
}

const SIGNATURES = [
  'app.count_attempts(bytea, integer, interval)',
  'app.forgive_attempts(bytea, integer)',
  'app.find_sign_in(text)',
  'app.open_session(uuid, uuid, uuid, bytea, text, text, bytea)',
  'app.end_session(bytea)',
  'app.begin_session(bytea)',
  'app.update_profile(text, text)',
  'app.replace_password_hash(uuid, text, text)',
]

export async function down(knex: Knex): Promise<void> {
  for (const signature of SIGNATURES) await knex.raw(`drop function ${signature}`)
  await knex.raw('drop table sign_in_attempts')
  await knex.raw('drop table sessions')
}
