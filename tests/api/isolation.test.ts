import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { BuildList } from '../../shared/schemas/build'
import type { Me } from '../../shared/schemas/auth'
import { startApp, type TestApp } from '../support/app'
import { createTestDatabase, queryAsAdmin, type TestDatabase } from '../support/database'
import { asAdmin } from '../support/shops'
import { signIn, type SignedIn } from '../support/sign-in'

let database: TestDatabase
let app: TestApp

beforeAll(async () => {
  database = await createTestDatabase()
  app = await startApp({ database, env: { DATABASE_POOL_MAX: '4' } })
})
afterAll(async () => {
  await app.stop()
  await database.drop()
})

describe('S3: over HTTP, no answer is another shop’s', () => {
  it('2,000 requests, 20 at a time over 4 connections, two shops in turn, one in ten given up midway, one in ten refused', async () => {
    const people = [await signIn(app, 'estimator'), await signIn(app, 'otherOwner')] as const
    const own = await Promise.all(
      people.map(
        async (person) =>
          new Set(((await person.call('GET', '/api/builds')).body as BuildList).builds.map(({ id }) => id)),
      ),
    )
    const total = 2000
    let next = 0
    const seen = { right: 0, wrong: 0, refused: 0, givenUp: 0 }

    const giveUp = async (person: SignedIn): Promise<void> => {
      const controller = new AbortController()
      const asked = fetch(`${app.baseUrl}/api/builds`, {
        headers: { cookie: person.cookie },
        signal: controller.signal,
      })
      setTimeout(() => controller.abort(), Math.random() * 6)
      await asked.then((response) => response.text()).catch(() => undefined)
      seen.givenUp += 1
    }
    const one = async (index: number): Promise<void> => {
      const side = index % 2
      const person = people[side === 0 ? 0 : 1]
      if (index % 10 === 4 || index % 10 === 9) {
        if (index % 20 < 10) return giveUp(person)
        const { status } = await person.call('GET', '/api/builds?page=none')
        if (status === 400) seen.refused += 1
        return
      }
      if (index % 3 === 0) {
        const { body } = await person.call('GET', '/api/auth/me')
        seen[(body as Me).shop?.id === person.me.shop.id ? 'right' : 'wrong'] += 1
        return
      }
      const { body } = await person.call('GET', '/api/builds')
      const builds = (body as BuildList).builds ?? []
      const isOwn = builds.length === own[side]?.size && builds.every(({ id }) => own[side]?.has(id))
      seen[isOwn ? 'right' : 'wrong'] += 1
    }
    await Promise.all(
      Array.from({ length: 20 }, async () => {
        while (next < total) {
          next += 1
          await one(next - 1)
        }
      }),
    )
    expect(seen).toEqual({ right: 1600, wrong: 0, refused: 200, givenUp: 200 })
    expect(app.logs().filter((line) => /uncaught|unhandled/i.test(line))).toEqual([])
  })
})

describe('R9: ending', () => {
  it('answers what it began, then ends by itself', async () => {
    const ending = await startApp({ database })
    const person = await signIn(ending, 'owner')
    const begun = await asAdmin(database, async (admin) => {
      await admin.query('begin')
      await admin.query('lock table builds')
      const asked = Array.from({ length: 4 }, () => person.call('GET', '/api/builds'))
      const waiting = `select from pg_stat_activity where datname = current_database()
        and application_name = 'longpull' and wait_event_type = 'Lock'`
      await expect.poll(async () => (await queryAsAdmin(database, waiting)).length).toBe(4)
      process.kill(ending.pid, 'SIGTERM')
      await new Promise((resolve) => setTimeout(resolve, 200))
      await expect(fetch(`${ending.baseUrl}/livez`)).rejects.toThrow()
      await admin.query('rollback')
      return asked
    })
    for (const { status } of await Promise.all(begun)) expect(status).toBe(200)
    const started = performance.now()
    await ending.ended
    expect(performance.now() - started).toBeLessThan(8000)
    expect(ending.logs().some((line) => line.includes('"event":"closed"'))).toBe(true)
  })
})
