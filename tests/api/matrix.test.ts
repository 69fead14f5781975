import { v7 as createId } from 'uuid'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { API_ROUTES } from '../../server/utils/api-routes'
import { deriveInput } from '../../shared/build-sheet'
import { PERMISSIONS, type Action } from '../../shared/permissions'
import type { Role } from '../../shared/schemas/auth'
import type { BuildAnswer, BuildList } from '../../shared/schemas/build'
import type { CatalogueCoolerList } from '../../shared/schemas/catalogue-cooler'
import type { ErrorBodySchema } from '../../shared/schemas/error'
import type { z } from 'zod'
import { startApp, type TestApp } from '../support/app'
import { createTestDatabase, queryAsAdmin, type TestDatabase } from '../support/database'
import { draftBuild, draftScenario, draftSetup } from '../support/drafts'
import { listBuiltRoutes } from '../support/routes'
import { callApi, signIn, type Answer, type DemoPerson, type SignedIn } from '../support/sign-in'

/**
 * S1 (and S20): every route of the build × everybody who could call it. A route that is not in this table fails.
 */

interface Call {
  path: string
  body?: unknown
  headers?: Record<string, string>
}

interface Row {
  /** What a role must include; undefined for a call without a session. */
  action?: Action
  /** Status when all is well. */
  success: number
  /** A good call on rows of the person's own shop; it may make rows for it first. */
  good: (person: SignedIn) => Promise<Call> | Call
  /** Calls whose input is wrong, each with the path that must be named. */
  bad?: (call: Call) => (Call & { names: string })[]
  /** The same call on another shop's rows: wherever an id can stand. */
  foreign?: (call: Call, other: Fixture) => Call[]
  /** Calls that meet a state they do not fit, each with its status. */
  conflict?: (call: Call, person: SignedIn) => Promise<(Call & { status: number })[]>
}

type Fixture = BuildAnswer

let database: TestDatabase
let app: TestApp
let people: Record<DemoPerson, SignedIn>
let other: Fixture
const draft = draftBuild()
const input = deriveInput({ sheet: draft.sheet, scenario: draft.scenario })

beforeAll(async () => {
  database = await createTestDatabase()
  app = await startApp({ database })
  people = {
    owner: await signIn(app, 'owner'),
    estimator: await signIn(app, 'estimator'),
    technician: await signIn(app, 'technician'),
    customer: await signIn(app, 'customer'),
    otherOwner: await signIn(app, 'otherOwner'),
  }
  other = await makeBuild(people.otherOwner)
})
afterAll(async () => {
  await app.stop()
  await database.drop()
})

const send = (
  person: SignedIn | undefined,
  method: string,
  { path, body, headers }: Call,
): Promise<Answer> =>
  person === undefined
    ? callApi(app, method, path, { body, headers })
    : person.call(method, path, { body, headers })

async function makeBuild(person: SignedIn): Promise<Fixture> {
  const answer = await person.call('POST', '/api/builds', { body: draftBuild() })
  if (answer.status !== 201) throw new Error(`making a build: ${answer.status} ${answer.text}`)
  return answer.body as Fixture
}

/** Rows are made by somebody of the shop who may; the call itself is then the person's. */
const makerFor = (person: SignedIn): SignedIn =>
  person.me.shop.id === people.otherOwner.me.shop.id ? people.otherOwner : people.estimator
const fresh = (person: SignedIn): Promise<Fixture> => makeBuild(makerFor(person))

async function makeSetup(person: SignedIn, buildId: string): Promise<string> {
  const setup = draftSetup()
  await makerFor(person).call('POST', `/api/builds/${buildId}/setups`, { body: setup })
  return setup.id
}
async function makeScenario(person: SignedIn, buildId: string): Promise<string> {
  const scenario = draftScenario()
  await makerFor(person).call('POST', `/api/builds/${buildId}/scenarios`, { body: scenario })
  return scenario.id
}

const FIRST = { 'if-match': '"1"' }
const stranger = '01890a5d-ac96-774b-bcce-b302099a8057'

/** Every column of every table that a caller might try to set, and the one name that reaches past an object. */
const SMUGGLED = [
  'shop_id',
  'shopId',
  'version',
  'role',
  'created_by',
  'createdBy',
  'physics_version',
  'total_cents',
]
const smuggle = (call: Call, names: string[] = SMUGGLED) =>
  names.map((name) => ({ ...call, body: { ...(call.body as object), [name]: 1 }, names: name }))
const withoutVersion = (call: Call) => ({ ...call, headers: {}, status: 428 })
const staleVersion = (call: Call) => ({ ...call, headers: { 'if-match': '"7"' }, status: 412 })
const replaceId = (call: Call, from: string, to: string): Call => ({
  ...call,
  path: call.path.replace(from, to),
})
const buildIdOf = (call: Call): string => /\/api\/builds\/([^/?]+)/.exec(call.path)?.[1] ?? ''
const lastIdOf = (call: Call): string => /\/(?:scenarios|setups)\/([^/?]+)/.exec(call.path)?.[1] ?? ''

const ROWS: Record<string, Row> = {
  'GET /livez': { success: 200, good: () => ({ path: '/livez' }) },
  'GET /readyz': { success: 200, good: () => ({ path: '/readyz' }) },
  'GET /api/health': {
    success: 200,
    good: () => ({ path: '/api/health' }),
    bad: () => [{ path: '/api/health?deep=1', names: 'deep' }],
  },
  'GET /api/_nuxt_icon/:collection': {
    success: 200,
    good: () => ({ path: '/api/_nuxt_icon/lucide.json?icons=sun' }),
  },
  'GET /api/_auth/session': {
    action: 'profile.read',
    success: 200,
    good: () => ({ path: '/api/_auth/session' }),
  },
  'POST /api/auth/sign-in': {
    success: 200,
    good: () => ({
      path: '/api/auth/sign-in',
      body: { email: 'owner@othershop.test', password: 'longpull-demo' },
      // Signing in with a live cookie would end that session.
      headers: { cookie: '' },
    }),
    bad: (call) => [
      { ...call, body: { password: 'x' }, names: 'email' },
      { ...call, body: { email: 'nobody', password: 'x' }, names: 'email' },
      ...smuggle(call, ['role']),
    ],
  },
  'POST /api/auth/sign-out': {
    success: 204,
    good: () => ({ path: '/api/auth/sign-out', headers: { cookie: '' } }),
  },
  'GET /api/auth/me': { action: 'profile.read', success: 200, good: () => ({ path: '/api/auth/me' }) },
  'PATCH /api/auth/me': {
    action: 'profile.update',
    success: 200,
    good: () => ({ path: '/api/auth/me', body: { unitSystem: 'metric' } }),
    bad: (call) => [
      { ...call, body: {}, names: 'body' },
      { ...call, body: { theme: 'sepia' }, names: 'theme' },
      ...smuggle(call, [...SMUGGLED, 'email', 'password_hash', 'name']),
    ],
  },
  'GET /api/builds': {
    action: 'build.read',
    success: 200,
    good: () => ({ path: '/api/builds?search=truck&sort=customer&direction=desc&page=1' }),
    bad: () => [
      { path: '/api/builds?sort=price', names: 'sort' },
      { path: '/api/builds?page=0', names: 'page' },
      { path: '/api/builds?page=1&page=2', names: 'page' },
      { path: '/api/builds?shop_id=1', names: 'shop_id' },
    ],
  },
  'POST /api/builds': {
    action: 'build.create',
    success: 201,
    good: () => ({ path: '/api/builds', body: draftBuild() }),
    bad: (call) => {
      const draft = call.body as ReturnType<typeof draftBuild>
      const values = draft.sheet.values
      return [
        { ...call, body: { ...draft, id: 'first' }, names: 'id' },
        { ...call, body: { ...draft, name: '' }, names: 'name' },
        { ...call, body: { ...draft, name: 'a\u0000b' }, names: 'name' },
        {
          ...call,
          body: {
            ...draft,
            sheet: { ...draft.sheet, values: values.filter(({ path }) => path !== 'vehicle.massKg') },
          },
          names: 'sheet.vehicle.massKg',
        },
        {
          ...call,
          body: {
            ...draft,
            scenario: {
              ...draft.scenario,
              duty: { ...draft.scenario.duty, segments: [{ kind: 'idle', durationS: 60, topGear: 9 }] },
            },
          },
          names: 'scenario.duty.segments.0.topGear',
        },
        ...smuggle(call),
      ]
    },
    conflict: async (call) => [
      { ...call, body: { ...(call.body as object), name: 'Another under the same id' }, status: 409 },
      {
        ...call,
        headers: { 'idempotency-key': 'another-key' },
        status: 409,
      },
    ],
  },
  'GET /api/builds/:id': {
    action: 'build.read',
    success: 200,
    good: async (person) => ({ path: `/api/builds/${(await fresh(person)).build.id}` }),
    foreign: (_call, { build }) => [{ path: `/api/builds/${build.id}` }],
  },
  'PATCH /api/builds/:id': {
    action: 'build.update',
    success: 200,
    good: async (person) => ({
      path: `/api/builds/${(await fresh(person)).build.id}`,
      body: { name: 'Renamed', stage: 'sized' },
      headers: FIRST,
    }),
    bad: (call) => [
      { ...call, body: {}, names: 'body' },
      { ...call, body: { stage: 'sold' }, names: 'stage' },
      { ...call, headers: { 'if-match': '*' }, names: 'If-Match' },
      ...smuggle(call, [...SMUGGLED, 'customer_id', 'customerId', 'id', 'updated_at']),
    ],
    foreign: (call, { build }) => [replaceId(call, buildIdOf(call), build.id)],
    conflict: async (call) => [withoutVersion(call), staleVersion(call)],
  },
  'DELETE /api/builds/:id': {
    action: 'build.delete',
    success: 204,
    good: async (person) => ({ path: `/api/builds/${(await fresh(person)).build.id}`, headers: FIRST }),
    bad: (call) => [{ ...call, headers: { 'if-match': 'newest' }, names: 'If-Match' }],
    foreign: (call, { build }) => [replaceId(call, buildIdOf(call), build.id)],
    conflict: async (_call, person) => {
      const path = `/api/builds/${(await fresh(person)).build.id}`
      return [withoutVersion({ path }), staleVersion({ path })]
    },
  },
  'POST /api/builds/:id/scenarios': {
    action: 'scenario.create',
    success: 201,
    good: async (person) => ({
      path: `/api/builds/${(await fresh(person)).build.id}/scenarios`,
      body: draftScenario(),
    }),
    bad: (call) => [
      { ...call, body: { ...(call.body as object), duty: { ambientC: 200 } }, names: 'duty.ambientC' },
      ...smuggle(call, [...SMUGGLED, 'buildId', 'build_id']),
    ],
    foreign: (call, { build }) => [replaceId(call, buildIdOf(call), build.id)],
    conflict: async (call) => [
      { ...call, body: { ...(call.body as object), name: 'Another under the same id' }, status: 409 },
    ],
  },
  'GET /api/builds/:id/scenarios/:scenarioId': {
    action: 'scenario.read',
    success: 200,
    good: async (person) => {
      const { build, scenarios } = await fresh(person)
      return { path: `/api/builds/${build.id}/scenarios/${scenarios[0]?.id}` }
    },
    foreign: (call, { build, scenarios }) => [
      replaceId(call, lastIdOf(call), scenarios[0]?.id ?? ''),
      { path: `/api/builds/${build.id}/scenarios/${scenarios[0]?.id}` },
    ],
  },
  'PATCH /api/builds/:id/scenarios/:scenarioId': {
    action: 'scenario.update',
    success: 200,
    good: async (person) => {
      const { build, scenarios } = await fresh(person)
      return {
        path: `/api/builds/${build.id}/scenarios/${scenarios[0]?.id}`,
        body: { name: 'Hotter', load: { trailerMassKg: 1500 } },
        headers: FIRST,
      }
    },
    bad: (call) => [
      { ...call, body: {}, names: 'body' },
      { ...call, body: { load: { trailerMassKg: -1 } }, names: 'load.trailerMassKg' },
      ...smuggle(call, [...SMUGGLED, 'buildId', 'id']),
    ],
    foreign: (call, { build, scenarios }) => [
      replaceId(call, lastIdOf(call), scenarios[0]?.id ?? ''),
      { ...call, path: `/api/builds/${build.id}/scenarios/${scenarios[0]?.id}` },
    ],
    conflict: async (call) => [withoutVersion(call), staleVersion(call)],
  },
  'DELETE /api/builds/:id/scenarios/:scenarioId': {
    action: 'scenario.delete',
    success: 204,
    good: async (person) => {
      const { build } = await fresh(person)
      const id = await makeScenario(person, build.id)
      return { path: `/api/builds/${build.id}/scenarios/${id}`, headers: FIRST }
    },
    foreign: (call, { build, scenarios }) => [
      replaceId(call, lastIdOf(call), scenarios[0]?.id ?? ''),
      { ...call, path: `/api/builds/${build.id}/scenarios/${scenarios[0]?.id}` },
    ],
    conflict: async (_call, person) => {
      const { build, scenarios } = await fresh(person)
      const only = {
        path: `/api/builds/${build.id}/scenarios/${scenarios[0]?.id}`,
        headers: FIRST,
        status: 409,
      }
      const { build: second } = await fresh(person)
      const path = `/api/builds/${second.id}/scenarios/${await makeScenario(person, second.id)}`
      return [only, withoutVersion({ path }), staleVersion({ path })]
    },
  },
  'GET /api/builds/:id/scenarios/:scenarioId/results': {
    action: 'result.read',
    success: 200,
    good: async (person) => {
      const { build, scenarios } = await fresh(person)
      return { path: `/api/builds/${build.id}/scenarios/${scenarios[0]?.id}/results` }
    },
    foreign: (call, { build, scenarios }) => [
      replaceId(call, lastIdOf(call), scenarios[0]?.id ?? ''),
      { path: `/api/builds/${build.id}/scenarios/${scenarios[0]?.id}/results` },
    ],
  },
  'POST /api/builds/:id/scenarios/:scenarioId/results': {
    action: 'result.create',
    success: 201,
    good: async (person) => {
      const { build, scenarios, setups } = await fresh(person)
      return {
        path: `/api/builds/${build.id}/scenarios/${scenarios[0]?.id}/results`,
        body: { id: createId(), setupId: setups[0]?.id },
      }
    },
    bad: (call) => [
      { ...call, body: { id: createId() }, names: 'setupId' },
      ...smuggle(call, [...SMUGGLED, 'answer', 'input', 'judgement']),
    ],
    foreign: (call, { build, scenarios, setups }) => [
      { ...call, body: { id: createId(), setupId: setups[0]?.id } },
      replaceId(call, lastIdOf(call), scenarios[0]?.id ?? ''),
      { ...call, path: `/api/builds/${build.id}/scenarios/${scenarios[0]?.id}/results` },
    ],
    conflict: async (call, person) => {
      const { build, scenarios, setups } = await fresh(person)
      return [
        {
          path: `/api/builds/${build.id}/scenarios/${scenarios[0]?.id}/results`,
          body: { ...(call.body as object), setupId: setups[1]?.id },
          status: 409,
        },
      ]
    },
  },
  'POST /api/builds/:id/setups': {
    action: 'setup.create',
    success: 201,
    good: async (person) => ({
      path: `/api/builds/${(await fresh(person)).build.id}/setups`,
      body: draftSetup(),
    }),
    bad: (call) => [
      { ...call, body: { ...(call.body as object), change: { topGear: 9 } }, names: 'change.topGear' },
      { ...call, body: { ...(call.body as object), change: { colour: 'red' } }, names: 'change.colour' },
      ...smuggle(call, [...SMUGGLED, 'kind', 'buildId']),
    ],
    foreign: (call, { build }) => [replaceId(call, buildIdOf(call), build.id)],
    conflict: async (call) => [
      { ...call, body: { ...(call.body as object), name: 'Another under the same id' }, status: 409 },
    ],
  },
  'PATCH /api/builds/:id/setups/:setupId': {
    action: 'setup.update',
    success: 200,
    good: async (person) => {
      const { build } = await fresh(person)
      const id = await makeSetup(person, build.id)
      return { path: `/api/builds/${build.id}/setups/${id}`, body: { name: 'Slower yet' }, headers: FIRST }
    },
    bad: (call) => [
      { ...call, body: {}, names: 'body' },
      { ...call, body: { change: { speedMps: 0 } }, names: 'change.speedMps' },
      ...smuggle(call, [...SMUGGLED, 'kind', 'id']),
    ],
    foreign: (call, { build, setups }) => [
      replaceId(call, lastIdOf(call), setups[0]?.id ?? ''),
      { ...call, path: `/api/builds/${build.id}/setups/${setups[1]?.id}` },
    ],
    conflict: async (call, person) => {
      const { build, setups } = await fresh(person)
      const asItIs = `/api/builds/${build.id}/setups/${setups[0]?.id}`
      return [withoutVersion(call), staleVersion(call), { ...call, path: asItIs, status: 409 }]
    },
  },
  'DELETE /api/builds/:id/setups/:setupId': {
    action: 'setup.delete',
    success: 204,
    good: async (person) => {
      const { build } = await fresh(person)
      const id = await makeSetup(person, build.id)
      return { path: `/api/builds/${build.id}/setups/${id}`, headers: FIRST }
    },
    foreign: (call, { build, setups }) => [
      replaceId(call, lastIdOf(call), setups[0]?.id ?? ''),
      { ...call, path: `/api/builds/${build.id}/setups/${setups[1]?.id}` },
    ],
    conflict: async (_call, person) => {
      const { build, setups } = await fresh(person)
      const path = `/api/builds/${build.id}/setups/${await makeSetup(person, build.id)}`
      const standing = `/api/builds/${build.id}/setups/${setups[1]?.id}`
      return [
        withoutVersion({ path }),
        staleVersion({ path }),
        { path: standing, headers: FIRST, status: 409 },
      ]
    },
  },
  'GET /api/coolers': { action: 'cooler.read', success: 200, good: () => ({ path: '/api/coolers' }) },
  'POST /api/estimate': {
    action: 'estimate.run',
    success: 200,
    good: () => ({ path: '/api/estimate?step=1', body: input }),
    bad: (call) => [
      { path: '/api/estimate?step=2', body: input, names: 'step' },
      { ...call, body: { ...(call.body as object), duty: { ambientC: 'hot' } }, names: 'duty.ambientC' },
      ...smuggle(call, ['shop_id']),
    ],
  },
  'POST /api/estimate/sweep': {
    action: 'estimate.run',
    success: 200,
    good: () => ({ path: '/api/estimate/sweep', body: { input, speedMps: 20, grades: [0, 0.05] } }),
    bad: (call) => [{ ...call, body: { ...(call.body as object), grades: ['steep'] }, names: 'grades.0' }],
  },
  'POST /api/estimate/sizing': {
    action: 'estimate.run',
    success: 200,
    good: () => ({
      path: '/api/estimate/sizing',
      body: {
        input,
        construction: 'stacked-plate',
        position: 'ahead-of-condenser',
        targets: { sumpC: 110 },
        basis: 'peak',
      },
    }),
    bad: (call) => [{ ...call, body: { ...(call.body as object), targets: {} }, names: 'targets' }],
  },
  'POST /api/estimate/replay': {
    action: 'estimate.run',
    success: 200,
    good: () => ({
      path: '/api/estimate/replay',
      body: { input, trace: { timeS: [0, 10, 20], speedMps: [20, 20, 20], grade: [0, 0.02, 0.02] } },
    }),
    bad: (call) => [
      {
        ...call,
        body: { input, trace: { timeS: [0, 0], speedMps: [20, 20], grade: [0, 0] } },
        names: 'trace.timeS.1',
      },
    ],
  },
}

/** Routes of the framework that are no calls of ours. */
const FRAMEWORK = ['/**', '/__nuxt_error', '/__nuxt_island/**']
/** Ways the session module would have into the session, shut in front of it. */
const SHUT = ['DELETE /api/_auth/session']

const splitKey = (key: string): [string, string] => key.split(' ') as [string, string]
const roles: Role[] = ['owner', 'estimator', 'technician', 'customer']
const maker = (action: Action | undefined): SignedIn =>
  people[
    action === undefined || (PERMISSIONS[action] as readonly Role[]).includes('estimator')
      ? 'estimator'
      : 'owner'
  ]

type ErrorBody = z.infer<typeof ErrorBodySchema>
const issuesOf = (answer: Answer): string[] =>
  ((answer.body as ErrorBody).error.issues ?? []).map(({ path }) => path)

/** A checksum of every row of a shop, table by table. */
async function checksums(shopId: string): Promise<unknown[]> {
  const tables = await queryAsAdmin<{ name: string }>(
    database,
    `select c.relname as name from pg_class c join pg_attribute a on a.attrelid = c.oid and a.attname = 'shop_id'
     where c.relnamespace = 'public'::regnamespace and c.relkind = 'r' and c.relname <> 'sessions' order by 1`,
  )
  return Promise.all(
    tables.map(async ({ name }) => [
      name,
      await queryAsAdmin(
        database,
        `select count(*)::int as rows, coalesce(md5(string_agg(t::text, '|' order by t::text)), '') as sum from ${name} t where shop_id = $1`,
        [shopId],
      ),
    ]),
  )
}

describe('S1: every route of the build is in the table, with its methods', () => {
  it('in this table', () => {
    const built = listBuiltRoutes()
      .filter(({ path }) => !FRAMEWORK.includes(path))
      .map(({ path, method }) => `${method ?? 'GET'} ${path}`)
      .filter((key) => !SHUT.includes(key))
    expect([...new Set(built)].sort()).toEqual(Object.keys(ROWS).sort())
  })

  it('and in the server’s own, which tells 404 from 405', () => {
    const known = Object.entries(API_ROUTES).flatMap(([path, methods]) =>
      methods.map((method) => `${method} ${path}`),
    )
    expect(known.sort()).toEqual(Object.keys(ROWS).sort())
  })

  it.each(SHUT)('%s is shut', async (key) => {
    const [method, path] = splitKey(key)
    expect((await send(people.owner, method, { path })).status).toBe(405)
  })
})

describe.each(Object.keys(ROWS))('S1: %s', (key) => {
  const [method] = splitKey(key)
  const row = ROWS[key] as Row

  it('nobody: only where no session is needed', async () => {
    const call = await row.good(people.estimator)
    const answer = await send(undefined, method, call)
    expect(answer.status).toBe(row.action === undefined ? row.success : 401)
    if (row.action !== undefined) expect(answer.body).toMatchObject({ error: { code: 'not_signed_in' } })
  })

  it.each(roles)('%s: as the table of permissions says', async (role) => {
    const allowed = row.action === undefined || (PERMISSIONS[row.action] as readonly Role[]).includes(role)
    const answer = await send(people[role], method, await row.good(people[role]))
    expect(answer.status, answer.text).toBe(allowed ? row.success : 403)
    if (!allowed) expect(answer.body).toMatchObject({ error: { code: 'not_allowed' } })
  })

  it('the owner of another shop: in the own shop', async () => {
    const answer = await send(people.otherOwner, method, await row.good(people.otherOwner))
    expect(answer.status, answer.text).toBe(row.success)
  })

  if (row.bad !== undefined)
    it('bad or unknown fields: 400 that names the path', async () => {
      const person = maker(row.action)
      for (const { names, ...call } of row.bad?.(await row.good(person)) ?? []) {
        const answer = await send(row.action === undefined ? undefined : person, method, call)
        expect(answer.status, `${names}: ${answer.text}`).toBe(400)
        expect(issuesOf(answer), JSON.stringify(answer.body)).toContain(names)
      }
    })

  if (row.foreign !== undefined)
    it('an id of another shop is answered exactly like one that does not exist, and nothing of that shop changes', async () => {
      const before = await checksums(people.otherOwner.me.shop.id)
      const person = maker(row.action)
      const good = await row.good(person)
      const unknown: Fixture = {
        build: { ...other.build, id: stranger },
        scenarios: other.scenarios.map((scenario) => ({ ...scenario, id: stranger })),
        setups: other.setups.map((setup) => ({ ...setup, id: stranger })),
      }
      const foreign = row.foreign?.(good, other) ?? []
      const strange = row.foreign?.(good, unknown) ?? []
      for (const [index, call] of foreign.entries()) {
        const answer = await send(person, method, call)
        const compared = await send(person, method, strange[index] as Call)
        expect([answer.status, compared.status], `${call.path}: ${answer.text}`).toEqual([404, 404])
        expect(answer.text.length).toBe(compared.text.length)
      }
      expect(await checksums(people.otherOwner.me.shop.id)).toEqual(before)
    })

  if (row.conflict !== undefined)
    it('what does not fit the state: 409, 412 or 428', async () => {
      const person = maker(row.action)
      const good = await row.good(person)
      if (row.success === 201) await send(person, method, good)
      for (const { status, ...call } of (await row.conflict?.(good, person)) ?? []) {
        const answer = await send(person, method, call)
        expect(answer.status, `${call.path}: ${answer.text}`).toBe(status)
        if (status === 412)
          expect(answer.body).toMatchObject({ error: { code: 'stale_version', currentVersion: 1 } })
      }
    })

  if (method === 'GET')
    it('S11: reading changes no table', async () => {
      const call = await row.good(people.estimator)
      const shopId = people.estimator.me.shop.id
      const before = await checksums(shopId)
      await send(people.estimator, method, call)
      expect(await checksums(shopId)).toEqual(before)
    })
})

describe('S1: with the row rules switched off, the queries by themselves', () => {
  beforeAll(() => setRowRules('disable'))
  afterAll(() => setRowRules('enable'))

  const withForeign = Object.keys(ROWS).filter((key) => ROWS[key]?.foreign !== undefined)

  it.each(withForeign)('%s: another shop’s id is not found', async (key) => {
    const [method] = splitKey(key)
    const row = ROWS[key] as Row
    const before = await checksums(people.otherOwner.me.shop.id)
    const person = maker(row.action)
    for (const call of row.foreign?.(await row.good(person), other) ?? []) {
      const answer = await send(person, method, call)
      expect(answer.status, `${call.path}: ${answer.text}`).toBe(404)
    }
    expect(await checksums(people.otherOwner.me.shop.id)).toEqual(before)
  })

  it('lists hold the own shop’s rows only', async () => {
    const { builds, total } = (await people.estimator.call('GET', '/api/builds')).body as BuildList
    const own = await queryAsAdmin(database, 'select from builds where shop_id = $1', [
      people.estimator.me.shop.id,
    ])
    expect(total).toBe(own.length)
    expect(builds.filter(({ id }) => id === other.build.id)).toEqual([])
    const found = (await people.estimator.call('GET', '/api/builds?search=test')).body as BuildList
    expect(found.builds.filter(({ id }) => id === other.build.id)).toEqual([])
    const { coolers } = (await people.estimator.call('GET', '/api/coolers')).body as CatalogueCoolerList
    expect(coolers).toHaveLength(24)
    expect(coolers.filter(({ ratings }) => ratings.length > 4)).toEqual([])
  })
})

async function setRowRules(to: 'enable' | 'disable'): Promise<void> {
  const tables = await queryAsAdmin<{ name: string }>(
    database,
    `select tablename as name from pg_policies where policyname = 'of_shop'`,
  )
  for (const { name } of tables) await queryAsAdmin(database, `alter table ${name} ${to} row level security`)
}
