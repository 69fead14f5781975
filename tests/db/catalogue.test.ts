import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { createTestDatabase, queryAsAdmin, type TestDatabase } from '../support/database'
import { insertTestShop, withClient, type TestShop } from '../support/shops'

/**
 * S2: a query that forgets its `where shop_id` returns nothing of another shop. Asked of the catalogue itself, so that a
 * table added later is held to it too.
 */

let database: TestDatabase
let shops: { a: TestShop; b: TestShop }

beforeAll(async () => {
  database = await createTestDatabase({ content: 'migrated' })
  shops = { a: await insertTestShop(database, 'A'), b: await insertTestShop(database, 'B') }
})
afterAll(() => database.drop())

/** Tables without a shop, each with its reason. */
const WITHOUT_SHOP: Record<string, string> = {
  knex_migrations: 'which migrations ran; the same for every shop',
  knex_migrations_lock: 'the row by which migrations lock',
  users: 'a person may belong to several shops; no right of the serving role',
  sign_in_attempts: 'counts by hashed address, before anybody is known; no right of the serving role',
}

/** Unique indexes that hold over all shops, each with its reason. */
const OVER_ALL_SHOPS: Record<string, string> = {
  shops_pkey: 'the id of the shop itself',
  sessions_token_hash_key: 'a token is looked up before its shop is known; 256 random bits tell nothing',
}

/** The functions that run with the owner's rights: all that reach past the row rules, by name. */
const OWNER_FUNCTIONS = [
  'begin_session',
  'count_attempts',
  'end_session',
  'find_sign_in',
  'forgive_attempts',
  'open_session',
  'replace_password_hash',
  'search_builds',
  'update_profile',
]

interface ShopTable {
  name: string
  column: 'shop_id' | 'id'
}

async function listShopTables(): Promise<ShopTable[]> {
  return queryAsAdmin<{ name: string; column: 'shop_id' | 'id' } & ShopTable>(
    database,
    `select c.relname as name, 'shop_id' as column from pg_class c join pg_attribute a on a.attrelid = c.oid and a.attname = 'shop_id'
     where c.relnamespace = 'public'::regnamespace and c.relkind in ('r', 'p')
     union all select 'shops', 'id' order by 1`,
  )
}

describe('S2: the database keeps shops apart by itself', () => {
  it('holds every table of a shop to the row rules, forced on its owner, for reading and writing', async () => {
    const tables = await queryAsAdmin<{ name: string; secured: boolean; forced: boolean; rules: number }>(
      database,
      `select c.relname as name, c.relrowsecurity as secured, c.relforcerowsecurity as forced,
         (select count(*)::int from pg_policy p where p.polrelid = c.oid and p.polqual is not null
            and p.polwithcheck is not null and p.polcmd = '*' and p.polroles = '{0}'::oid[]) as rules
       from pg_class c where c.relnamespace = 'public'::regnamespace and c.relkind in ('r', 'p', 'f', 'm')`,
    )
    const withoutShop = tables.filter(({ name }) => name in WITHOUT_SHOP).map(({ name }) => name)
    expect(withoutShop.sort()).toEqual(Object.keys(WITHOUT_SHOP).sort())
    const held = tables.filter(({ name }) => !(name in WITHOUT_SHOP))
    expect(held.map(({ name }) => name).sort()).toEqual((await listShopTables()).map(({ name }) => name))
    expect(held.filter(({ secured, forced, rules }) => !secured || !forced || rules !== 1)).toEqual([])
  })

  it('opens rows past the rules to the owner role alone, for its functions', async () => {
    const rules = await queryAsAdmin<{ name: string; roles: string; command: string }>(
      database,
      `select tablename as name, roles::text as roles, cmd as command from pg_policies where policyname <> 'of_shop' order by 1`,
    )
    expect(rules).toEqual([
      { name: 'builds', roles: '{longpull_owner}', command: 'SELECT' },
      { name: 'customers', roles: '{longpull_owner}', command: 'SELECT' },
      { name: 'memberships', roles: '{longpull_owner}', command: 'SELECT' },
      { name: 'sessions', roles: '{longpull_owner}', command: 'ALL' },
      { name: 'shops', roles: '{longpull_owner}', command: 'SELECT' },
    ])
  })

  it('gives the serving role nothing it could walk round the rules with', async () => {
    const [role] = await queryAsAdmin<{
      super: boolean
      bypass: boolean
      owns: number
      roles: number
      truncates: number
      creates: boolean
    }>(
      database,
      `select r.rolsuper or r.rolcreaterole or r.rolcreatedb or r.rolreplication as super, r.rolbypassrls as bypass,
         (select count(*)::int from pg_class where relowner = r.oid)
           + (select count(*)::int from pg_proc where proowner = r.oid)
           + (select count(*)::int from pg_namespace where nspowner = r.oid) as owns,
         (select count(*)::int from pg_auth_members where member = r.oid) as roles,
         (select count(*)::int from pg_class where relnamespace = 'public'::regnamespace and relkind in ('r', 'p')
            and has_table_privilege(r.oid, oid, 'truncate, references, trigger')) as truncates,
         has_schema_privilege(r.oid, 'public', 'create') or has_schema_privilege(r.oid, 'app', 'create')
           or has_database_privilege(r.oid, current_database(), 'create') as creates
       from pg_roles r where r.rolname = 'longpull_app'`,
    )
    expect(role).toEqual({ super: false, bypass: false, owns: 0, roles: 0, truncates: 0, creates: false })
  })

  it('lets the serving role read neither passwords nor sessions, and write neither shops nor people', async () => {
    const rights = await queryAsAdmin<{ name: string; right: string }>(
      database,
      `select c.relname as name, p.verb as "right" from pg_class c
       cross join unnest(array['select', 'insert', 'update', 'delete']) as p(verb)
       where c.relnamespace = 'public'::regnamespace and c.relkind = 'r'
         and c.relname in ('users', 'sessions', 'sign_in_attempts', 'shops', 'memberships', 'knex_migrations', 'knex_migrations_lock')
         and has_table_privilege('longpull_app', c.oid, p.verb) order by 1, 2`,
    )
    expect(rights).toEqual([
      { name: 'knex_migrations', right: 'select' },
      { name: 'memberships', right: 'select' },
      { name: 'shops', right: 'select' },
    ])
  })

  it('has no view that runs with its owner’s rights', async () => {
    const views = await queryAsAdmin<{ name: string }>(
      database,
      `select relname as name from pg_class where relnamespace in ('public'::regnamespace, 'app'::regnamespace)
         and relkind in ('v', 'm') and not coalesce(reloptions @> '{security_invoker=true}', false)
         and relname not like 'pg_%'`,
    )
    expect(views).toEqual([])
  })

  it('fixes the search path of every function that runs with the owner’s rights, and knows each by name', async () => {
    const functions = await queryAsAdmin<{ name: string; path: string; open: boolean }>(
      database,
      `select p.proname as name, coalesce(array_to_string(p.proconfig, ','), '') as path,
         has_function_privilege('public', p.oid, 'execute') as open
       from pg_proc p join pg_namespace n on n.oid = p.pronamespace
       where p.prosecdef and n.nspname not in ('pg_catalog', 'information_schema') order by 1`,
    )
    expect(functions.map(({ name }) => name)).toEqual(OWNER_FUNCTIONS)
    for (const { name, path, open } of functions)
      expect({ name, path, open }).toEqual({ name, path: 'search_path=pg_catalog, pg_temp', open: false })
  })

  it('has shop_id in every reference between tables of a shop', async () => {
    const references = await queryAsAdmin<{ name: string; definition: string }>(
      database,
      `select k.conname as name, pg_get_constraintdef(k.oid) as definition from pg_constraint k
       where k.contype = 'f'
         and exists (select from pg_attribute where attrelid = k.conrelid and attname = 'shop_id')
         and exists (select from pg_attribute where attrelid = k.confrelid and attname = 'shop_id')
         and not (
           exists (select from pg_attribute where attrelid = k.conrelid and attname = 'shop_id' and attnum = k.conkey[1])
           and exists (select from pg_attribute where attrelid = k.confrelid and attname = 'shop_id' and attnum = k.confkey[1])
         )`,
    )
    expect(references).toEqual([])
  })

  it('begins every unique index of a shop’s table with shop_id', async () => {
    const indexes = await queryAsAdmin<{ name: string }>(
      database,
      `select i.relname as name from pg_index x join pg_class i on i.oid = x.indexrelid join pg_class t on t.oid = x.indrelid
       where x.indisunique and t.relnamespace = 'public'::regnamespace
         and (t.relname = 'shops' or exists (select from pg_attribute where attrelid = t.oid and attname = 'shop_id'))
         and coalesce((select attname from pg_attribute where attrelid = t.oid and attnum = x.indkey[0]), '') <> 'shop_id'
       order by 1`,
    )
    expect(indexes.map(({ name }) => name)).toEqual(Object.keys(OVER_ALL_SHOPS).sort())
  })

  it('keeps every time with its zone and every amount of money in whole cents', async () => {
    const columns = await queryAsAdmin<{ name: string; type: string }>(
      database,
      `select table_name || '.' || column_name as name, data_type as type from information_schema.columns
       where table_schema = 'public' and table_name not like 'knex_%'
         and (data_type = 'timestamp without time zone' or data_type in ('money', 'real')
           or (column_name like '%cents' and data_type <> 'bigint'))`,
    )
    expect(columns).toEqual([])
  })
})

describe('S2: as the serving role', () => {
  const DENIED = '42501'

  it('no shop set: 0 rows of every table', async () => {
    await withClient(database.appUrl, async (client) => {
      for (const { name } of await listShopTables()) {
        try {
          const { rowCount } = await client.query(`select from ${name}`)
          expect(rowCount, name).toBe(0)
        } catch (error) {
          expect((error as { code?: string }).code, name).toBe(DENIED)
        }
      }
    })
  })

  it('a forgotten where shows the shop of the transaction and no other', async () => {
    await withClient(database.appUrl, async (client) => {
      await client.query('begin')
      await client.query('select * from app.begin_session($1)', [shops.a.tokenHash])
      for (const { name, column } of await listShopTables()) {
        await client.query('savepoint before')
        try {
          const { rows } = await client.query<{ shop: string }>(
            `select distinct ${column} as shop from ${name}`,
          )
          expect(
            rows.filter(({ shop }) => shop !== shops.a.shopId),
            name,
          ).toEqual([])
        } catch (error) {
          expect((error as { code?: string }).code, name).toBe(DENIED)
          await client.query('rollback to before')
        }
      }
      expect((await client.query('select from shops')).rowCount).toBe(1)
      expect((await client.query('select from memberships')).rowCount).toBe(1)
    })
  })

  it('writing another shop’s id fails for every table, and its rows cannot be changed or deleted', async () => {
    await withClient(database.appUrl, async (client) => {
      await client.query('begin')
      await client.query('select * from app.begin_session($1)', [shops.a.tokenHash])
      for (const { name, column } of await listShopTables()) {
        const columns = await listRequiredColumns(name)
        await client.query('savepoint before')
        const names = columns.map(({ column: one }) => one)
        const values = columns.map(({ column: one, type }) =>
          one === column ? shops.b.shopId : sampleOf(type),
        )
        const places = values.map((_value, index) => `$${index + 1}`)
        await expect(
          client.query(`insert into ${name} (${names.join(', ')}) values (${places.join(', ')})`, values),
          name,
        ).rejects.toMatchObject({ code: DENIED })
        await client.query('rollback to before')
        for (const statement of [
          `update ${name} set ${column} = ${column} where ${column} = $1`,
          `delete from ${name} where ${column} = $1`,
        ]) {
          try {
            expect((await client.query(statement, [shops.b.shopId])).rowCount, statement).toBe(0)
          } catch (error) {
            expect((error as { code?: string }).code, statement).toBe(DENIED)
            await client.query('rollback to before')
          }
        }
      }
    })
  })

  it('a row of one’s own cannot be moved to another shop', async () => {
    await withClient(database.appUrl, async (client) => {
      await client.query('begin')
      await client.query('select * from app.begin_session($1)', [shops.a.tokenHash])
      await client.query('insert into customers (shop_id, id, name, created_by) values ($1, $2, $3, $4)', [
        shops.a.shopId,
        shops.a.userId,
        'Moved',
        shops.a.userId,
      ])
      await expect(client.query('update customers set shop_id = $1', [shops.b.shopId])).rejects.toMatchObject(
        {
          code: DENIED,
        },
      )
    })
  })
})

describe('answers and acts are kept as they were written', () => {
  it.each(['results', 'audit_events'])(
    '%s: the serving role can neither change, delete nor empty it',
    async (table) => {
      await withClient(database.appUrl, async (client) => {
        for (const statement of [
          `update ${table} set shop_id = shop_id`,
          `delete from ${table}`,
          `truncate ${table}`,
          `alter table ${table} disable trigger all`,
        ])
          await expect(client.query(statement), statement).rejects.toMatchObject({ code: '42501' })
      })
    },
  )
})

async function listRequiredColumns(table: string): Promise<{ column: string; type: string }[]> {
  return queryAsAdmin<{ column: string; type: string }>(
    database,
    `select column_name as column, udt_name as type from information_schema.columns
     where table_schema = 'public' and table_name = $1 and is_generated = 'NEVER' and is_nullable = 'NO'
       and column_default is null order by ordinal_position`,
    [table],
  )
}

/** Some value of a type; it need fit no rule but that of the shop, which is looked at first. */
function sampleOf(type: string): unknown {
  if (type === 'uuid') return shops.a.userId
  if (type === 'jsonb') return '{}'
  if (type === 'bytea') return Buffer.alloc(32)
  if (type === 'text') return 'call'
  if (type === 'timestamptz') return new Date()
  return 1
}
