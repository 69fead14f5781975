import type { Knex } from 'knex'
import { v7 as createId } from 'uuid'
import { asOwner } from '../server/db/owner-work'
import {
  ageBuild,
  enterShop,
  hasUser,
  insertShop,
  type SeedPerson,
  type SeedShop,
} from '../server/db/seeds/demo-shops'
import { insertBuild } from '../server/repositories/build-repository'
import { insertCustomer } from '../server/repositories/customer-repository'
import { insertResult } from '../server/repositories/result-repository'
import { insertScenario } from '../server/repositories/scenario-repository'
import { insertSetup } from '../server/repositories/setup-repository'
import { hashPassword } from '../server/services/passwords'
import { createDemoBuilds, DEMO_CATALOGUE, deriveInputs, judgeAnswer } from '../shared/build-sheet'
import { AppError } from '../shared/errors'
import { estimate } from '../shared/heat'

/**
 * Fills a new installation with two invented shops, so that everything is alive after the first start. Runs once: when
 * the demo people are there, nothing is touched.
 */

const PASSWORD = 'longpull-demo'
const FIRST_COUNT = { version: 1, physicsVersion: 1 }

const person = (name: string, email: string, role: SeedPerson['role']): SeedPerson => ({
  id: createId(),
  name,
  email,
  role,
})

/** Two shops, to show that they are apart. All people and places are invented. */
function createShops(): [SeedShop, SeedShop] {
  return [
    {
      id: createId(),
      name: 'Pinyon Flat Gearworks',
      unitSystem: 'us',
      people: [
        person('Marta Ellwood', 'owner@longpull.test', 'owner'),
        person('Jonah Prewitt', 'estimator@longpull.test', 'estimator'),
        person('Dee Marlowe', 'technician@longpull.test', 'technician'),
        person('Sam Lindgren', 'customer@longpull.test', 'customer'),
      ],
      coolers: DEMO_CATALOGUE,
    },
    {
      id: createId(),
      name: 'Alder Fork Driveline',
      unitSystem: 'metric',
      people: [person('Rhea Castell', 'owner@othershop.test', 'owner')],
      coolers: DEMO_CATALOGUE,
    },
  ]
}

type DemoBuild = ReturnType<typeof createDemoBuilds>[number]

async function insertDemoBuild(
  trx: Knex.Transaction,
  shopId: string,
  createdBy: string,
  demo: DemoBuild,
): Promise<string> {
  const id = createId()
  const customer = { id: createId(), ...demo.customer }
  await insertCustomer(trx, shopId, customer, createdBy)
  await insertBuild(trx, shopId, { ...demo, id, customerId: customer.id, createdBy })
  const scenarios = demo.scenarios.map((scenario) => ({ ...scenario, id: createId() }))
  const setups = demo.setups.map((setup) => ({ ...setup, id: createId() }))
  for (const scenario of scenarios) await insertScenario(trx, shopId, { ...scenario, buildId: id, createdBy })
  for (const setup of setups) await insertSetup(trx, shopId, { ...setup, buildId: id, createdBy })
  for (const scenario of scenarios)
    for (const setup of setups) {
      const answers = computeAnswers(demo, scenario, setup)
      if (answers === undefined) continue
      await insertResult(trx, shopId, {
        ...answers,
        id: createId(),
        buildId: id,
        scenarioId: scenario.id,
        setupId: setup.id,
        build: FIRST_COUNT,
        scenario: FIRST_COUNT,
        setup: FIRST_COUNT,
        createdBy,
      })
    }
  return id
}

/** undefined where the model refuses, such as a set-up that cannot climb the hill: then no answer is stored, as in use. */
function computeAnswers(
  demo: DemoBuild,
  scenario: DemoBuild['scenarios'][number],
  setup: DemoBuild['setups'][number],
) {
  try {
    const { judged, judgedBy, locked } = deriveInputs({
      sheet: demo.sheet,
      control: demo.control,
      setup,
      scenario,
    })
    const answer = estimate(judged)
    return {
      input: judged,
      answer,
      lockedAnswer: judgedBy === 'unlocked' && locked !== null ? estimate(locked) : null,
      judgement: judgeAnswer(answer, demo.limits).judgement,
    }
  } catch (error) {
    if (error instanceof AppError) return undefined
    throw error
  }
}

async function seed(trx: Knex.Transaction): Promise<string> {
  if (await hasUser(trx, 'owner@longpull.test')) return 'the demo data is there already'
  const passwordHash = await hashPassword(PASSWORD)
  const shops = createShops()
  for (const [index, shop] of shops.entries()) {
    await insertShop(trx, shop, passwordHash)
    await enterShop(trx, shop.id)
    const author = shop.people.find(({ role }) => role === 'estimator') ?? shop.people[0]
    if (author === undefined) throw new RangeError(`${shop.name} has nobody in it`)
    const builds = createDemoBuilds(index === 0 ? 'one' : 'two')
    for (const [age, demo] of builds.entries()) {
      const id = await insertDemoBuild(trx, shop.id, author.id, demo)
      await ageBuild(trx, { shopId: shop.id, id }, age * 4)
    }
  }
  return `${shops.length} shops with their people, builds and coolers`
}

if (process.env.LONGPULL_DEMO !== '1') {
  console.log('seed-demo: LONGPULL_DEMO is not 1, so nothing is made up')
} else {
  try {
    console.log(`seed-demo: ${await asOwner(seed)}`)
  } catch (error) {
    console.error(`seed-demo: ${error instanceof Error ? (error.stack ?? error.message) : String(error)}`)
    process.exitCode = 1
  }
}
