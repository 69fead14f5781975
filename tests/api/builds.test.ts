import { v7 as createId } from 'uuid'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { deriveInput, deriveInputs, judgeAnswer } from '../../shared/build-sheet'
import { estimate } from '../../shared/heat'
import {
  BuildAnswerSchema,
  BuildListSchema,
  type BuildAnswer,
  type BuildList,
} from '../../shared/schemas/build'
import { CatalogueCoolerListSchema } from '../../shared/schemas/catalogue-cooler'
import {
  ResultAnswerSchema,
  ResultListSchema,
  type ResultAnswer,
  type ResultList,
} from '../../shared/schemas/result'
import { ScenarioAnswerSchema } from '../../shared/schemas/scenario'
import { SetupAnswerSchema } from '../../shared/schemas/setup'
import { startApp, type TestApp } from '../support/app'
import { createTestDatabase, queryAsAdmin, type TestDatabase } from '../support/database'
import { draftBuild, draftScenario, draftSetup } from '../support/drafts'
import { signIn, type Answer, type SignedIn } from '../support/sign-in'

let database: TestDatabase
let app: TestApp
let person: SignedIn

beforeAll(async () => {
  database = await createTestDatabase()
  app = await startApp({ database })
  person = await signIn(app, 'estimator')
})
afterAll(async () => {
  await app.stop()
  await database.drop()
})

async function make(draft = draftBuild()): Promise<BuildAnswer> {
  const answer = await person.call('POST', '/api/builds', { body: draft })
  expect(answer.status, answer.text).toBe(201)
  return answer.body as BuildAnswer
}
const version = (number: number) => ({ 'if-match': `"${number}"` })
const list = async (query: string): Promise<BuildList> =>
  (await person.call('GET', `/api/builds${query}`)).body as BuildList
const countOf = async (table: string, id: string): Promise<number> =>
  (await queryAsAdmin(database, `select from ${table} where id = $1`, [id])).length

describe('a build', () => {
  it('comes back as it was sent, with its two standing set-ups and its scenario', async () => {
    const draft = draftBuild('First call')
    const answer = await person.call('POST', '/api/builds', { body: draft })
    expect(answer.status).toBe(201)
    expect(answer.headers.get('etag')).toBe('"1"')
    const made = BuildAnswerSchema.parse(answer.body)
    expect(made.build).toMatchObject({
      id: draft.id,
      name: 'First call',
      stage: 'call',
      customerId: draft.customer?.id,
      customerName: 'Test Customer',
      version: 1,
      sheet: draft.sheet,
      control: draft.control,
      limits: draft.limits,
    })
    expect(made.setups.map(({ kind }) => kind)).toEqual(['as-it-is', 'drive-differently'])
    expect(made.setups[0]?.change).toEqual({})
    expect(made.scenarios).toMatchObject([{ ...draft.scenario, buildId: draft.id, version: 1 }])
    const again = await person.call('GET', `/api/builds/${draft.id}`)
    expect(again.body).toEqual(answer.body)
    expect(again.headers.get('etag')).toBe('"1"')
  })

  it('keeps what was typed, in which unit and where from', async () => {
    const draft = draftBuild()
    const mass = draft.sheet.values.find(({ path }) => path === 'vehicle.massKg')
    if (mass === undefined) throw new Error('the sheet has no mass')
    Object.assign(mass, {
      value: 2313.3,
      typed: '5,100',
      unit: 'lb',
      origin: 'measured',
      relativeSpread: 0.005,
    })
    const { build } = await make(draft)
    expect(build.sheet.values.find(({ path }) => path === 'vehicle.massKg')).toEqual(mass)
  })

  it('links to a customer the shop has, and refuses another person under the same id', async () => {
    const first = draftBuild()
    await make(first)
    const second = { ...draftBuild(), customer: first.customer }
    expect((await make(second)).build.customerId).toBe(first.customer?.id)
    const third = { ...draftBuild(), customer: { ...first.customer, name: 'Somebody else' } }
    expect((await person.call('POST', '/api/builds', { body: third })).status).toBe(409)
    expect(await countOf('builds', third.id)).toBe(0)
  })

  it('changes field by field, each change counted and written down', async () => {
    const { build } = await make()
    const renamed = await person.call('PATCH', `/api/builds/${build.id}`, {
      body: { name: 'Renamed', stage: 'quoted' },
      headers: version(1),
    })
    expect(renamed.status).toBe(200)
    expect(renamed.headers.get('etag')).toBe('"2"')
    expect((renamed.body as BuildAnswer).build).toMatchObject({
      ...build,
      name: 'Renamed',
      stage: 'quoted',
      version: 2,
      updatedAt: expect.any(String) as string,
    })
    expect((await person.call('DELETE', `/api/builds/${build.id}`, { headers: version(2) })).status).toBe(204)
    expect((await person.call('GET', `/api/builds/${build.id}`)).status).toBe(404)
    const acts = await queryAsAdmin<{ action: string }>(
      database,
      'select action from audit_events where subject_id = $1 order by at',
      [build.id],
    )
    expect(acts.map(({ action }) => action)).toEqual(['build.create', 'build.update', 'build.delete'])
  })

  it('goes with all that hangs on it', async () => {
    const { build, scenarios, setups } = await make()
    const path = `/api/builds/${build.id}/scenarios/${scenarios[0]?.id}/results`
    const result = { id: createId(), setupId: setups[0]?.id }
    expect((await person.call('POST', path, { body: result })).status).toBe(201)
    await person.call('DELETE', `/api/builds/${build.id}`, { headers: version(1) })
    for (const table of ['scenarios', 'setups', 'results'])
      expect(await queryAsAdmin(database, `select from ${table} where build_id = $1`, [build.id])).toEqual([])
  })
})

describe('R4: creating is safe to repeat', () => {
  async function twentyTimes(
    path: string,
    body: unknown,
    headers: Record<string, string> = {},
  ): Promise<Answer[]> {
    return Promise.all(Array.from({ length: 20 }, () => person.call('POST', path, { body, headers })))
  }

  it('the same build 20 times at once: one row, 20 equal answers', async () => {
    const draft = draftBuild()
    const answers = await twentyTimes('/api/builds', draft)
    expect(new Set(answers.map(({ status, text }) => `${status} ${text}`)).size).toBe(1)
    expect(answers[0]?.status).toBe(201)
    expect(await countOf('builds', draft.id)).toBe(1)
    expect(await queryAsAdmin(database, 'select from setups where build_id = $1', [draft.id])).toHaveLength(2)
    expect(
      await queryAsAdmin(database, 'select from audit_events where subject_id = $1', [draft.id]),
    ).toHaveLength(1)
  })

  it('scenarios, set-ups and results too', async () => {
    const { build, scenarios, setups } = await make()
    for (const [path, body, table] of [
      ['scenarios', draftScenario(), 'scenarios'],
      ['setups', draftSetup(), 'setups'],
      [`scenarios/${scenarios[0]?.id}/results`, { id: createId(), setupId: setups[0]?.id }, 'results'],
    ] as const) {
      const answers = await twentyTimes(`/api/builds/${build.id}/${path}`, body)
      expect(new Set(answers.map(({ status, text }) => `${status} ${text}`)).size, path).toBe(1)
      expect(answers[0]?.status, answers[0]?.text).toBe(201)
      expect(await countOf(table, body.id)).toBe(1)
    }
  })

  it('the first answer is given again after the row was changed since', async () => {
    const draft = draftBuild()
    const headers = { 'idempotency-key': createId() }
    const first = await person.call('POST', '/api/builds', { body: draft, headers })
    await person.call('PATCH', `/api/builds/${draft.id}`, { body: { name: 'Since' }, headers: version(1) })
    const second = await person.call('POST', '/api/builds', { body: draft, headers })
    expect([second.status, second.text]).toEqual([201, first.text])
  })

  it('a key with another body is 422; in another shop the same key is another', async () => {
    const headers = { 'idempotency-key': createId() }
    expect((await person.call('POST', '/api/builds', { body: draftBuild(), headers })).status).toBe(201)
    const other = await person.call('POST', '/api/builds', { body: draftBuild(), headers })
    expect(other.status).toBe(422)
    expect(other.body).toMatchObject({ error: { code: 'idempotency_key_reused' } })
    const elsewhere = await signIn(app, 'otherOwner')
    expect((await elsewhere.call('POST', '/api/builds', { body: draftBuild(), headers })).status).toBe(201)
  })

  it('a refused request takes no key: mended, it goes through', async () => {
    const headers = { 'idempotency-key': createId() }
    const draft = draftBuild()
    const without = { ...draft, sheet: { ...draft.sheet, values: draft.sheet.values.slice(1) } }
    expect((await person.call('POST', '/api/builds', { body: without, headers })).status).toBe(400)
    expect((await person.call('POST', '/api/builds', { body: draft, headers })).status).toBe(201)
  })

  it('a key is kept for 24 hours', async () => {
    const headers = { 'idempotency-key': createId() }
    expect((await person.call('POST', '/api/builds', { body: draftBuild(), headers })).status).toBe(201)
    await queryAsAdmin(
      database,
      `update idempotency_keys set created_at = now() - interval '25 hours' where key = $1`,
      [`key:${headers['idempotency-key']}`],
    )
    expect((await person.call('POST', '/api/builds', { body: draftBuild(), headers })).status).toBe(201)
  })
})

describe('R5: nobody overwrites silently', () => {
  it('50 changes of one version at once: exactly one goes through, 49 are told the version there is', async () => {
    const { build } = await make()
    const answers = await Promise.all(
      Array.from({ length: 50 }, (_one, index) =>
        person.call('PATCH', `/api/builds/${build.id}`, {
          body: { name: `Writer ${index}` },
          headers: version(1),
        }),
      ),
    )
    const saved = answers.filter(({ status }) => status === 200)
    expect(saved).toHaveLength(1)
    const late = answers.filter(({ status }) => status === 412)
    expect(late).toHaveLength(49)
    for (const { body } of late)
      expect(body).toMatchObject({ error: { code: 'stale_version', currentVersion: 2 } })
    const now = (await person.call('GET', `/api/builds/${build.id}`)).body as BuildAnswer
    expect(now.build).toMatchObject({ version: 2, name: (saved[0]?.body as BuildAnswer).build.name })
  })

  it('scenarios and set-ups have versions of their own', async () => {
    const { build, scenarios, setups } = await make()
    for (const [path, body] of [
      [`scenarios/${scenarios[0]?.id}`, { name: 'Later' }],
      [`setups/${setups[1]?.id}`, { name: 'Slower still' }],
    ] as const) {
      const answers = await Promise.all(
        Array.from({ length: 10 }, () =>
          person.call('PATCH', `/api/builds/${build.id}/${path}`, { body, headers: version(1) }),
        ),
      )
      expect(answers.map(({ status }) => status).sort()).toEqual([200, ...Array<number>(9).fill(412)])
    }
    expect(((await person.call('GET', `/api/builds/${build.id}`)).body as BuildAnswer).build.version).toBe(1)
  })
})

describe('scenarios and set-ups', () => {
  it('come, change and go', async () => {
    const { build } = await make()
    const scenario = draftScenario('Winter')
    const made = await person.call('POST', `/api/builds/${build.id}/scenarios`, { body: scenario })
    expect(ScenarioAnswerSchema.parse(made.body).scenario).toEqual({
      ...scenario,
      buildId: build.id,
      version: 1,
    })
    const path = `/api/builds/${build.id}/scenarios/${scenario.id}`
    expect((await person.call('GET', path)).body).toEqual(made.body)
    const changed = await person.call('PATCH', path, {
      body: { load: { trailerMassKg: 900 } },
      headers: version(1),
    })
    expect(ScenarioAnswerSchema.parse(changed.body).scenario).toMatchObject({
      version: 2,
      load: { trailerMassKg: 900 },
    })
    expect((await person.call('DELETE', path, { headers: version(2) })).status).toBe(204)
    expect((await person.call('GET', path)).status).toBe(404)

    const setup = draftSetup()
    const added = await person.call('POST', `/api/builds/${build.id}/setups`, { body: setup })
    expect(SetupAnswerSchema.parse(added.body).setup).toEqual({
      ...setup,
      buildId: build.id,
      kind: 'custom',
      version: 1,
    })
  })
})

describe('results', () => {
  const resultsPath = ({ build, scenarios }: BuildAnswer) =>
    `/api/builds/${build.id}/scenarios/${scenarios[0]?.id}/results`

  it('are computed here from what is stored, and judged by the unlocked truck unless lock-up is proven', async () => {
    for (const lockupSeen of ['unknown', 'yes'] as const) {
      const draft = draftBuild()
      draft.control = { ...draft.control, lockupSeen }
      const made = await make(draft)
      const answer = await person.call('POST', resultsPath(made), {
        body: { id: createId(), setupId: made.setups[0]?.id },
      })
      const { result } = ResultAnswerSchema.parse(answer.body)
      const inputs = deriveInputs({ sheet: draft.sheet, control: draft.control, scenario: draft.scenario })
      expect(inputs.judgedBy).toBe(lockupSeen === 'yes' ? 'locked' : 'unlocked')
      expect(result.input).toEqual(inputs.judged)
      expect(result.answer).toEqual(JSON.parse(JSON.stringify(estimate(inputs.judged))))
      expect(result.lockedAnswer?.peakSumpC ?? null).toBe(
        lockupSeen === 'yes' || inputs.locked === null ? null : estimate(inputs.locked).peakSumpC,
      )
      expect(result.judgement).toBe(judgeAnswer(estimate(inputs.judged), draft.limits).judgement)
      expect(result).toMatchObject({ current: true, buildVersion: 1, createdBy: person.me.user.id })
    }
  })

  it('the stored input sent to the estimate call gives the stored answer', async () => {
    const made = await make()
    const { result } = (
      await person.call('POST', resultsPath(made), { body: { id: createId(), setupId: made.setups[1]?.id } })
    ).body as ResultAnswer
    const again = await person.call('POST', '/api/estimate', { body: result.input })
    expect(again.body).toEqual(result.answer)
  })

  it('the newest of each set-up comes first, and says whether it still is current', async () => {
    const made = await make()
    const ids: string[] = []
    for (const index of [0, 1, 0]) {
      const id = createId()
      ids.push(id)
      await person.call('POST', resultsPath(made), { body: { id, setupId: made.setups[index]?.id } })
    }
    const newest = (await person.call('GET', resultsPath(made))).body as ResultList
    expect(ResultListSchema.safeParse(newest).success).toBe(true)
    expect(newest.results.map(({ id }) => id)).toEqual([ids[2], ids[1]])
    expect(newest.results.map(({ current }) => current)).toEqual([true, true])
    await person.call('PATCH', `/api/builds/${made.build.id}`, {
      body: { name: 'Only renamed' },
      headers: version(1),
    })
    const renamed = (await person.call('GET', resultsPath(made))).body as ResultList
    expect(renamed.results.map(({ current }) => current)).toEqual([true, true])
    const { sheet } = made.build
    const heavier = {
      ...sheet,
      values: sheet.values.map((value) =>
        value.path === 'vehicle.massKg' ? { ...value, value: 2900 } : value,
      ),
    }
    await person.call('PATCH', `/api/builds/${made.build.id}`, {
      body: { sheet: heavier },
      headers: version(2),
    })
    const outdated = (await person.call('GET', resultsPath(made))).body as ResultList
    expect(outdated.results.map(({ current }) => current)).toEqual([false, false])
    expect(outdated.results.map(({ answer }) => answer)).toEqual(newest.results.map(({ answer }) => answer))
  })
})

describe('the list', () => {
  it('shows the answer of the first scenario as it is, until what it was computed from changes', async () => {
    const draft = draftBuild('Listed truck')
    const made = await make(draft)
    const line = async () => (await list('?search=listed%20truck')).builds[0]
    expect(await line()).toMatchObject({
      id: draft.id,
      customerName: 'Test Customer',
      scenarioId: draft.scenario.id,
      peakSumpC: null,
      judgement: null,
    })
    await person.call('POST', `/api/builds/${draft.id}/scenarios/${draft.scenario.id}/results`, {
      body: { id: createId(), setupId: made.setups[0]?.id },
    })
    const judged = deriveInputs({
      sheet: draft.sheet,
      control: draft.control,
      scenario: draft.scenario,
    }).judged
    const answer = estimate(judged)
    expect(await line()).toMatchObject({
      peakSumpC: answer.peakSumpC,
      peakCoolerInletC: answer.peakCoolerInletC,
      judgement: judgeAnswer(answer, draft.limits).judgement,
    })
    const limits = {
      ...draft.limits,
      ladder: { watchC: 20, easeOffC: 30, stopC: 40 },
    }
    await person.call('PATCH', `/api/builds/${draft.id}`, { body: { limits }, headers: version(1) })
    expect(await line()).toMatchObject({ peakSumpC: answer.peakSumpC, judgement: 'stop' })
    await person.call('PATCH', `/api/builds/${draft.id}/scenarios/${draft.scenario.id}`, {
      body: { load: { trailerMassKg: 10 } },
      headers: version(1),
    })
    expect(await line()).toMatchObject({ peakSumpC: null, judgement: null })
  })

  it('sorts by each column both ways, and filters by stage', async () => {
    const all = BuildListSchema.parse(await list(''))
    expect(all.total).toBeGreaterThan(6)
    const stages = ['call', 'sized', 'quoted', 'in-work', 'road-test', 'done']
    const keys: Record<string, (line: BuildList['builds'][number]) => string> = {
      name: ({ name }) => name.toLowerCase(),
      customer: ({ customerName }) => (customerName ?? '\uffff').toLowerCase(),
      stage: ({ stage }) => String(stages.indexOf(stage)),
      updated: ({ updatedAt }) => updatedAt,
    }
    for (const [sort, key] of Object.entries(keys))
      for (const direction of ['asc', 'desc']) {
        const values = (await list(`?sort=${sort}&direction=${direction}`)).builds.map(key)
        const sorted = [...values].sort()
        expect(values, `${sort} ${direction}`).toEqual(direction === 'asc' ? sorted : sorted.reverse())
      }
    const done = (await list('?stage=done')).builds
    expect(done.length).toBeGreaterThan(0)
    expect(done.filter(({ stage }) => stage !== 'done')).toEqual([])
  })

  it('comes in pages of 25', async () => {
    for (let index = 0; index < 27; index += 1)
      await make({ ...draftBuild(`Paged ${index}`), customer: undefined })
    const first = await list('?search=paged&sort=name')
    const second = await list('?search=paged&sort=name&page=2')
    expect([first.total, first.pageSize, first.builds.length, second.builds.length]).toEqual([27, 25, 25, 2])
    const names = [...first.builds, ...second.builds].map(({ name }) => name)
    expect(new Set(names).size).toBe(27)
    expect((await list('?search=paged&page=3')).builds).toEqual([])
  })
})

describe('coolers', () => {
  it('are the shop’s catalogue with every rating', async () => {
    const { coolers } = CatalogueCoolerListSchema.parse((await person.call('GET', '/api/coolers')).body)
    expect(coolers).toHaveLength(24)
    expect(new Set(coolers.map(({ construction }) => construction)).size).toBe(4)
    expect(coolers.filter(({ ratings }) => ratings.length > 1).length).toBeGreaterThan(0)
  })
})

describe('the estimate calls', () => {
  it('answer as the model does', async () => {
    const { sheet, scenario } = draftBuild()
    const input = deriveInput({ sheet, scenario })
    const every10 = await person.call('POST', '/api/estimate', { body: input })
    expect(every10.body).toEqual(JSON.parse(JSON.stringify(estimate(input))))
    const every1 = await person.call('POST', '/api/estimate?step=1', { body: input })
    expect(every1.body).toEqual(JSON.parse(JSON.stringify(estimate(input, { stepS: 1 }))))
  })
})
