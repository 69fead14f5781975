import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { API_ROUTES } from '../../server/utils/api-routes'
import { startApp, type TestApp } from '../support/app'
import { createTestDatabase, type TestDatabase } from '../support/database'
import { signIn, type SignedIn } from '../support/sign-in'

/** S11: no other site makes a browser write here. */

let database: TestDatabase
let app: TestApp
let person: SignedIn

beforeAll(async () => {
  database = await createTestDatabase()
  app = await startApp({ database })
  person = await signIn(app, 'owner')
})
afterAll(async () => {
  await app.stop()
  await database.drop()
})

const WRITING = Object.entries(API_ROUTES).flatMap(([route, methods]) =>
  methods
    .filter((method) => method !== 'GET')
    .map((method) => [method, route.replace(/:[A-Za-z]+/g, '01890a5d-ac96-774b-bcce-b302099a8057')] as const),
)

async function statusOf(
  method: string,
  path: string,
  headers: Record<string, string>,
  body?: string,
): Promise<number> {
  const response = await fetch(`${app.baseUrl}${path}`, { method, headers, body, redirect: 'manual' })
  await response.arrayBuffer()
  return response.status
}

const JSON_TYPE = { 'content-type': 'application/json' }

describe.each(WRITING)('S11: %s %s', (method, path) => {
  it('refuses another site’s request in each of its forms', async () => {
    const own = { cookie: person.cookie, origin: app.baseUrl }
    const refused: [string, Record<string, string>, string][] = [
      ['Origin of another site', { ...own, ...JSON_TYPE, origin: 'https://elsewhere.test' }, '{}'],
      ['Origin null', { ...own, ...JSON_TYPE, origin: 'null' }, '{}'],
      ['Origin of another port', { ...own, ...JSON_TYPE, origin: 'http://127.0.0.1:1' }, '{}'],
      [
        'Origin that only begins alike',
        { ...own, ...JSON_TYPE, origin: `${app.baseUrl}.elsewhere.test` },
        '{}',
      ],
      ['Sec-Fetch-Site cross-site', { ...own, ...JSON_TYPE, 'sec-fetch-site': 'cross-site' }, '{}'],
      ['Sec-Fetch-Site same-site', { ...own, ...JSON_TYPE, 'sec-fetch-site': 'same-site' }, '{}'],
      ['text/plain', { ...own, 'content-type': 'text/plain' }, '{}'],
      ['a form', { ...own, 'content-type': 'application/x-www-form-urlencoded' }, 'a=1'],
      ['a form with parts', { ...own, 'content-type': 'multipart/form-data; boundary=x' }, '--x--'],
      ['JSON in name only', { ...own, 'content-type': 'text/plain; application/json' }, '{}'],
      ['a session cookie without a word from the browser', { ...JSON_TYPE, cookie: person.cookie }, '{}'],
    ]
    for (const [what, headers, body] of refused)
      expect(await statusOf(method, path, headers, body), what).toBe(403)
  })

  it('takes what the own pages send', async () => {
    const own = { ...JSON_TYPE, origin: app.baseUrl, 'sec-fetch-site': 'same-origin' }
    expect(await statusOf(method, path, own, '{}')).not.toBe(403)
  })
})

describe('S11: without a session', () => {
  it('signing in works for a program that sends neither Origin nor Sec-Fetch-Site', async () => {
    const body = JSON.stringify({ email: 'owner@longpull.test', password: 'longpull-demo' })
    expect(await statusOf('POST', '/api/auth/sign-in', JSON_TYPE, body)).toBe(200)
  })

  it('a page typed into the address bar (Sec-Fetch-Site: none) is no other site', async () => {
    const headers = { ...JSON_TYPE, cookie: person.cookie, 'sec-fetch-site': 'none' }
    expect(await statusOf('PATCH', '/api/auth/me', headers, '{"theme":"light"}')).toBe(200)
  })
})
