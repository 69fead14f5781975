import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { startApp, type TestApp } from '../support/app'
import { createTestDatabase, queryAsAdmin, type TestDatabase } from '../support/database'
import { callApi, signIn, type SignedIn } from '../support/sign-in'

let database: TestDatabase
let app: TestApp

beforeAll(async () => {
  database = await createTestDatabase()
  app = await startApp({ database })
})
afterAll(async () => {
  await app.stop()
  await database.drop()
})

const API_CALLS: [string, string, unknown?][] = [
  ['GET', '/api/auth/me'],
  ['GET', '/api/builds'],
  ['GET', '/api/coolers'],
  ['PATCH', '/api/auth/me', { theme: 'dark' }],
  ['POST', '/api/estimate', {}],
  ['GET', '/api/_auth/session'],
]

/** Replays a cookie everywhere it could still work. */
async function replay(cookie: string): Promise<Record<string, number>> {
  const seen: Record<string, number> = {}
  for (const [method, path, body] of API_CALLS)
    seen[`${method} ${path}`] = (await callApi(app, method, path, { body, headers: { cookie } })).status
  return seen
}

const everywhere = (status: number): Record<string, number> =>
  Object.fromEntries(API_CALLS.map(([method, path]) => [`${method} ${path}`, status]))

async function expectDead(person: SignedIn): Promise<void> {
  expect(await replay(person.cookie)).toEqual(everywhere(401))
}

const aged = (person: SignedIn, change: string) =>
  queryAsAdmin(database, `update sessions set ${change} where user_id = $1 and revoked_at is null`, [
    person.me.user.id,
  ])

describe('S5: an ended session is dead', () => {
  it('after signing out, on every call and with every way of sending it', async () => {
    const person = await signIn(app, 'estimator')
    expect((await person.call('GET', '/api/auth/me')).status).toBe(200)
    expect((await person.call('GET', '/api/_auth/session')).body).toMatchObject({
      user: { email: 'estimator@longpull.test' },
    })
    const out = await person.call('POST', '/api/auth/sign-out')
    expect(out.status).toBe(204)
    expect(out.headers.getSetCookie().join()).toMatch(/^longpull=;.*Max-Age=0/)
    await expectDead(person)
  })

  it('a page replayed with its cookie is refused, shows nothing of the shop and takes the cookie away', async () => {
    const person = await signIn(app, 'estimator')
    await person.call('POST', '/api/auth/sign-out')
    const page = await fetch(`${app.baseUrl}/builds`, {
      headers: { cookie: person.cookie },
      redirect: 'manual',
    })
    const text = await page.text()
    expect(page.status).toBe(401)
    expect(text).toContain('/sign-in')
    expect(text).not.toContain(person.me.shop.name)
    expect(page.headers.getSetCookie().join()).toMatch(/longpull=;.*Max-Age=0/)
  })

  it('never by header, alive or dead', async () => {
    const person = await signIn(app, 'estimator')
    const [name = '', value = ''] = [person.cookies[0]?.name, person.cookies[0]?.value]
    for (const header of [`x-${name}-session`, 'x-nuxt-session-session', 'authorization'])
      expect((await callApi(app, 'GET', '/api/auth/me', { headers: { [header]: value } })).status).toBe(401)
  })

  it('31 minutes after its last use, and 12 hours after its start', async () => {
    const idle = await signIn(app, 'technician')
    await aged(idle, `last_used_at = now() - interval '31 minutes'`)
    await expectDead(idle)
    const old = await signIn(app, 'technician')
    await aged(old, `created_at = now() - interval '12 hours 1 second'`)
    await expectDead(old)
  })

  it('when the person is disabled, the membership ends or the shop is suspended, in the same second', async () => {
    const person = await signIn(app, 'otherOwner')
    for (const [table, key, id] of [
      ['users', 'disabled_at', person.me.user.id],
      ['memberships', 'ended_at', person.me.shop.id],
      ['shops', 'suspended_at', person.me.shop.id],
    ] as const) {
      const column = table === 'memberships' ? 'shop_id' : 'id'
      await queryAsAdmin(database, `update ${table} set ${key} = now() where ${column} = $1`, [id])
      await expectDead(person)
      await queryAsAdmin(database, `update ${table} set ${key} = null where ${column} = $1`, [id])
      expect((await person.call('GET', '/api/auth/me')).status).toBe(200)
    }
  })

  it('signing in again ends the session the cookie had, and starts its age anew', async () => {
    const first = await signIn(app, 'customer')
    const again = await callApi(app, 'POST', '/api/auth/sign-in', {
      body: { email: 'customer@longpull.test', password: 'longpull-demo' },
      headers: { cookie: first.cookie },
    })
    expect(again.status).toBe(200)
    await expectDead(first)
    const cookie = again.headers.getSetCookie()[0]?.split(';')[0] ?? ''
    expect((await callApi(app, 'GET', '/api/auth/me', { headers: { cookie } })).status).toBe(200)
  })

  it('signing out twice, or without ever signing in, is simply done', async () => {
    const person = await signIn(app, 'customer')
    expect((await person.call('POST', '/api/auth/sign-out')).status).toBe(204)
    expect((await person.call('POST', '/api/auth/sign-out')).status).toBe(204)
    expect((await callApi(app, 'POST', '/api/auth/sign-out')).status).toBe(204)
  })

  it('writes down who came and went', async () => {
    const person = await signIn(app, 'owner')
    await person.call('POST', '/api/auth/sign-out')
    const acts = await queryAsAdmin<{ action: string }>(
      database,
      'select action from audit_events where user_id = $1 order by at, id',
      [person.me.user.id],
    )
    expect(acts.map(({ action }) => action)).toEqual(['session.open', 'session.close'])
  })
})

describe('S6: the cookie', () => {
  it('holds a sealed random id only, and the database its hash only', async () => {
    const { cookies } = await signIn(app, 'owner')
    const value = cookies[0]?.value ?? ''
    const rows = await queryAsAdmin<{ row: string }>(database, 'select s::text as row from sessions s')
    expect(rows.length).toBeGreaterThan(0)
    expect(rows.filter(({ row }) => row.includes(value.slice(0, 40)))).toEqual([])
  })

  it('on plain http: no Secure, a plain name, HttpOnly, SameSite, at most 1,024 bytes, for every role', async () => {
    for (const person of ['owner', 'estimator', 'technician', 'customer', 'otherOwner'] as const) {
      const { cookies } = await signIn(app, person)
      expect(cookies).toHaveLength(1)
      expect(cookies[0]?.name).toBe('longpull')
      expect((cookies[0]?.name.length ?? 0) + (cookies[0]?.value.length ?? 0)).toBeLessThanOrEqual(1024)
    }
  })

  it('over https: __Host-, Secure, HttpOnly, SameSite=Lax, Path=/, no Domain', async () => {
    const origin = 'https://longpull.example.test'
    const secured = await startApp({ database, env: { PUBLIC_URL: origin } })
    try {
      const answer = await callApi(secured, 'POST', '/api/auth/sign-in', {
        body: { email: 'owner@longpull.test', password: 'longpull-demo' },
        headers: { origin },
      })
      expect(answer.status).toBe(200)
      const [line = '', ...rest] = answer.headers.getSetCookie()
      expect(rest).toEqual([])
      const [pair = '', ...flags] = line.split('; ')
      expect(pair).toMatch(/^__Host-longpull=/)
      expect(pair.length).toBeLessThanOrEqual(1024)
      expect(flags.filter((flag) => !flag.startsWith('Expires=')).sort()).toEqual([
        'HttpOnly',
        'Path=/',
        'SameSite=Lax',
        'Secure',
      ])
      const expires = new Date(flags.find((flag) => flag.startsWith('Expires='))?.slice(8) ?? 0).getTime()
      expect(Math.abs(expires - Date.now() - 12 * 3_600_000)).toBeLessThan(10_000)
      expect((await callApi(secured, 'GET', '/api/auth/me', { headers: { cookie: pair } })).status).toBe(200)
      // A cookie of the plain name is none here: another name of this host could have set it.
      const plain = pair.replace('__Host-longpull', 'longpull')
      expect((await callApi(secured, 'GET', '/api/auth/me', { headers: { cookie: plain } })).status).toBe(401)
    } finally {
      await secured.stop()
    }
  })

  it('none for a visitor, and none on answers that refuse', async () => {
    for (const path of ['/api/health', '/api/auth/me', '/api/builds', '/api/nowhere', '/sign-in', '/'])
      expect(
        (await fetch(`${app.baseUrl}${path}`, { redirect: 'manual' })).headers.getSetCookie(),
        path,
      ).toEqual([])
  })

  it.each(['', 'x', 'Fe26.2**nothing', `Fe26.2**${'a'.repeat(400)}`, '%00%ff'])(
    'a cookie nobody sealed (%j) is none',
    async (value) => {
      const answer = await callApi(app, 'GET', '/api/auth/me', { headers: { cookie: `longpull=${value}` } })
      expect(answer.status).toBe(401)
    },
  )
})

describe('S7: another sealing secret', () => {
  it('signs everybody out, and never fails', async () => {
    const person = await signIn(app, 'owner')
    const renewed = await startApp({ database })
    try {
      const answer = await callApi(renewed, 'GET', '/api/auth/me', { headers: { cookie: person.cookie } })
      expect(answer.status).toBe(401)
    } finally {
      await renewed.stop()
    }
  })
})
