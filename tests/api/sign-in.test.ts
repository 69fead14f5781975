import { scrypt } from 'node:crypto'
import { promisify } from 'node:util'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { startApp, type TestApp } from '../support/app'
import { createTestDatabase, queryAsAdmin, type TestDatabase } from '../support/database'
import { callApi, DEMO_PASSWORD, type Answer } from '../support/sign-in'

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

const attempt = (
  where: { baseUrl: string },
  email: string,
  password: string,
  headers: Record<string, string> = {},
): Promise<Answer> => callApi(where, 'POST', '/api/auth/sign-in', { body: { email, password }, headers })

const forgetAttempts = () => queryAsAdmin(database, 'delete from sign_in_attempts')

async function storedHash(email: string): Promise<string> {
  const [row] = await queryAsAdmin<{ password_hash: string }>(
    database,
    'select password_hash from users where email = $1',
    [email],
  )
  return row?.password_hash ?? ''
}

const median = (values: number[]): number =>
  [...values].sort((a, b) => a - b)[Math.floor(values.length / 2)] ?? 0

describe('S8: passwords', () => {
  it('are kept as scrypt at one of the settings of the OWASP Password Storage Cheat Sheet (N = 2^15, r = 8, p = 3)', async () => {
    expect(await storedHash('owner@longpull.test')).toMatch(
      /^\$scrypt\$n=32768,r=8,p=3\$[A-Za-z0-9+/]{22}\$[A-Za-z0-9+/]{86}$/,
    )
  })

  it('one kept by weaker settings works, and is kept by today’s from then on', async () => {
    const salt = Buffer.alloc(16, 7)
    const hash = (await promisify<string, Buffer, number, object, Buffer>(scrypt)(DEMO_PASSWORD, salt, 64, {
      N: 2 ** 14,
      r: 8,
      p: 1,
    })) as Buffer
    const bare = (bytes: Buffer) => bytes.toString('base64').replaceAll('=', '')
    await queryAsAdmin(database, 'update users set password_hash = $1 where email = $2', [
      `$scrypt$n=16384,r=8,p=1$${bare(salt)}$${bare(hash)}`,
      'technician@longpull.test',
    ])
    expect((await attempt(app, 'technician@longpull.test', `${DEMO_PASSWORD}x`)).status).toBe(401)
    expect(await storedHash('technician@longpull.test')).toContain('n=16384')
    expect((await attempt(app, 'technician@longpull.test', DEMO_PASSWORD)).status).toBe(200)
    expect(await storedHash('technician@longpull.test')).toContain('n=32768,r=8,p=3')
    expect((await attempt(app, 'technician@longpull.test', DEMO_PASSWORD)).status).toBe(200)
  })

  it('e-mail in any case and with spaces around it; the password to the letter', async () => {
    expect((await attempt(app, '  Owner@LongPull.test ', DEMO_PASSWORD)).status).toBe(200)
    expect((await attempt(app, 'owner@longpull.test', DEMO_PASSWORD.toUpperCase())).status).toBe(401)
    expect((await attempt(app, 'owner@longpull.test', ` ${DEMO_PASSWORD}`)).status).toBe(401)
    await forgetAttempts()
  })

  it('an unknown address gets the same answer as a wrong password, after as long a time', async () => {
    const times: Record<'known' | 'unknown', number[]> = { known: [], unknown: [] }
    const bodies = new Set<string>()
    for (let round = 0; round < 5; round += 1)
      for (const [kind, email] of [
        ['known', 'owner@longpull.test'],
        ['unknown', `nobody${round}@longpull.test`],
      ] as const) {
        const started = performance.now()
        const answer = await attempt(app, email, 'wrong')
        times[kind].push(performance.now() - started)
        expect(answer.status).toBe(401)
        bodies.add(answer.text.replace(/"requestId":"[^"]+"/, ''))
      }
    expect(bodies.size).toBe(1)
    // Without the hash an unknown address would be answered in a few milliseconds, against a quarter of a second.
    expect(median(times.unknown)).toBeGreaterThan(median(times.known) / 2)
    await forgetAttempts()
  })
})

describe('S10: the limit on signing in', () => {
  it('10 wrong passwords for an account from an address in 15 minutes, exactly, over two processes, whatever X-Forwarded-For says', async () => {
    const second = await startApp({ database })
    try {
      const statuses: number[] = []
      for (let round = 0; round < 15; round += 1) {
        const pair = await Promise.all(
          [app, second].map((where, index) =>
            attempt(where, 'estimator@longpull.test', 'wrong', {
              'x-forwarded-for': `203.0.113.${round * 2 + index}`,
              forwarded: `for=198.51.100.${round}`,
              'x-real-ip': `192.0.2.${round}`,
            }),
          ),
        )
        statuses.push(...pair.map(({ status }) => status))
      }
      expect(statuses.filter((status) => status === 401)).toHaveLength(10)
      expect(statuses.filter((status) => status === 429)).toHaveLength(20)
      const right = await attempt(app, 'estimator@longpull.test', DEMO_PASSWORD)
      expect(right.status).toBe(429)
      expect(Number(right.headers.get('retry-after'))).toBeGreaterThan(600)
      expect(Number(right.headers.get('retry-after'))).toBeLessThanOrEqual(900)
      expect((await attempt(app, 'owner@longpull.test', DEMO_PASSWORD)).status).toBe(200)
    } finally {
      await second.stop()
    }
  })

  it('nobody is locked out: the right password works from another address', async () => {
    const behindProxy = await startApp({ database, env: { TRUSTED_PROXY_HOPS: '1' } })
    try {
      // The proxy of our own wrote the right-most entry; what stands left of it is what the caller typed.
      const from = (address: string) => ({ 'x-forwarded-for': `198.51.100.1, ${address}` })
      const right = await attempt(behindProxy, 'estimator@longpull.test', DEMO_PASSWORD, from('203.0.113.9'))
      expect(right.status).toBe(200)
    } finally {
      await behindProxy.stop()
      await forgetAttempts()
    }
  })

  it('is over after a quarter of an hour, and a right password clears it before that', async () => {
    for (let round = 0; round < 9; round += 1) await attempt(app, 'customer@longpull.test', 'wrong')
    expect((await attempt(app, 'customer@longpull.test', DEMO_PASSWORD)).status).toBe(200)
    for (let round = 0; round < 10; round += 1)
      expect((await attempt(app, 'customer@longpull.test', 'wrong')).status).toBe(401)
    expect((await attempt(app, 'customer@longpull.test', DEMO_PASSWORD)).status).toBe(429)
    await queryAsAdmin(database, `update sign_in_attempts set since = since - interval '15 minutes 1 second'`)
    expect((await attempt(app, 'customer@longpull.test', DEMO_PASSWORD)).status).toBe(200)
    await forgetAttempts()
  })

  it('one address guessing at many accounts is stopped at 100', async () => {
    await queryAsAdmin(database, 'delete from sign_in_attempts')
    expect((await attempt(app, 'first@longpull.test', 'wrong')).status).toBe(401)
    // The rest of the hundred, without hashing a hundred times: the newest count is the address's own.
    await queryAsAdmin(database, 'update sign_in_attempts set attempts = 99')
    expect((await attempt(app, 'second@longpull.test', 'wrong')).status).toBe(401)
    expect((await attempt(app, 'third@longpull.test', 'wrong')).status).toBe(429)
    await forgetAttempts()
  })

  it('keeps no address of anybody', async () => {
    await attempt(app, 'somebody.particular@longpull.test', 'wrong')
    const rows = await queryAsAdmin<{ row: string }>(
      database,
      'select t::text as row from sign_in_attempts t',
    )
    expect(rows.length).toBeGreaterThan(0)
    expect(rows.filter(({ row }) => /particular|127\.0\.0/.test(row))).toEqual([])
    await forgetAttempts()
  })
})

describe('S9: hashing does not stop the shop', () => {
  it('20 at once: 2 hash, 8 wait, the others are turned away at once, and the probe answers throughout', async () => {
    const probes: number[] = []
    let polling = true
    const poll = (async () => {
      while (polling) {
        const started = performance.now()
        expect((await fetch(`${app.baseUrl}/livez`)).status).toBe(200)
        probes.push(performance.now() - started)
        await new Promise((resolve) => setTimeout(resolve, 100))
      }
    })()
    const started = performance.now()
    const answers = await Promise.all(
      Array.from({ length: 20 }, (_one, index) => attempt(app, `flood${index}@longpull.test`, 'wrong')),
    )
    const tookMs = performance.now() - started
    polling = false
    await poll
    const turnedAway = answers.filter(({ status }) => status === 429)
    expect(answers.filter(({ status }) => status === 401).length).toBeGreaterThanOrEqual(10)
    expect(turnedAway.length).toBeGreaterThan(0)
    expect(answers.filter(({ status }) => status !== 401 && status !== 429)).toEqual([])
    for (const { headers } of turnedAway) expect(Number(headers.get('retry-after'))).toBeGreaterThan(0)
    console.log(
      `S9: 20 sign-ins at once took ${Math.round(tookMs)} ms, ${turnedAway.length} turned away; ` +
        `slowest of ${probes.length} probes ${Math.round(Math.max(...probes))} ms`,
    )
    expect(Math.max(...probes)).toBeLessThan(2000)
    await forgetAttempts()
  })
})
