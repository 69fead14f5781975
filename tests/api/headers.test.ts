import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { startApp, type TestApp } from '../support/app'
import { createTestDatabase, type TestDatabase } from '../support/database'
import { signIn, type SignedIn } from '../support/sign-in'

/** S12 and S21, as far as they concern the API. */

let database: TestDatabase
let app: TestApp
let secured: TestApp
let person: SignedIn

beforeAll(async () => {
  database = await createTestDatabase()
  app = await startApp({ database })
  secured = await startApp({ database, env: { PUBLIC_URL: 'https://longpull.example.test' } })
  person = await signIn(app, 'owner')
})
afterAll(async () => {
  await app.stop()
  await secured.stop()
  await database.drop()
})

const PATHS: [string, string, number][] = [
  ['an answer', '/api/builds', 200],
  ['a refusal', '/api/builds?sort=price', 400],
  ['nothing there', '/api/nothing', 404],
  ['a probe', '/livez', 200],
]

describe('S12: headers of the API', () => {
  it.each(PATHS)('%s: kept nowhere, embedded nowhere, guessed at by nobody', async (_what, path, status) => {
    const response = await fetch(`${app.baseUrl}${path}`, { headers: { cookie: person.cookie } })
    expect(response.status).toBe(status)
    expect(response.headers.get('content-type')).toMatch(/^application\/json/)
    expect(Object.fromEntries(response.headers)).toMatchObject({
      'cache-control': 'no-store',
      'x-content-type-options': 'nosniff',
      'referrer-policy': 'same-origin',
      'content-security-policy': expect.stringMatching(
        /^default-src 'none'; frame-ancestors 'none'/,
      ) as string,
    })
    expect(response.headers.get('x-powered-by')).toBeNull()
    expect(response.headers.get('access-control-allow-origin')).toBeNull()
    expect(response.headers.get('strict-transport-security')).toBeNull()
  })

  it('strict transport security for a year or more, on pages and API, where the address is https only', async () => {
    for (const path of ['/api/health', '/sign-in']) {
      const secure = await fetch(`${secured.baseUrl}${path}`, { redirect: 'manual' })
      const [, age = '0'] =
        /^max-age=(\d+); includeSubDomains$/.exec(secure.headers.get('strict-transport-security') ?? '') ?? []
      expect(Number(age), path).toBeGreaterThanOrEqual(31_536_000)
      const plain = await fetch(`${app.baseUrl}${path}`, { redirect: 'manual' })
      expect(plain.headers.get('strict-transport-security'), path).toBeNull()
    }
  })

  it('a request id is made here, never taken from outside, and stands in header, body and log', async () => {
    const response = await fetch(`${app.baseUrl}/api/nothing`, { headers: { 'x-request-id': 'made-up' } })
    const { error } = (await response.json()) as { error: { requestId: string } }
    expect(response.headers.get('x-request-id')).toBe(error.requestId)
    expect(error.requestId).toMatch(/^[0-9a-f-]{36}$/)
    await expect.poll(() => app.logs().some((line) => line.includes(error.requestId))).toBe(true)
  })
})

describe('S21: nothing hidden is served', () => {
  it.each([
    '/.git/config',
    '/.env',
    '/package.json',
    '/nuxt.config.ts',
    '/server/api/health.get.ts',
    '/__nuxt_devtools__/client/',
    '/_vfs.json',
  ])('%s is not there', async (path) => {
    const response = await fetch(`${app.baseUrl}${path}`, { redirect: 'manual' })
    expect(response.status).toBe(404)
  })

  it.each(['NUXT_SESSION_PASSWORD', 'DATABASE_URL'])(
    'without %s it does not start, and says so',
    async (name) => {
      const broken = await startApp({ database, env: { [name]: undefined }, untilReady: false })
      await broken.ended
      expect(broken.logs().join('\n')).toContain(`${name} must be set`)
      await expect(fetch(`${broken.baseUrl}/livez`)).rejects.toThrow()
    },
  )

  it('tells nobody what it runs on', async () => {
    for (const path of ['/api/health', '/readyz', '/livez']) {
      const text = await (await fetch(`${app.baseUrl}${path}`)).text()
      expect(text).not.toMatch(/\d+\.\d+|node|nuxt|postgres/i)
    }
  })
})
