import { judgeAnswer } from '#shared/build-sheet'
import { AppError } from '#shared/errors'
import { estimate } from '#shared/heat'
import type { Result, ResultCreate } from '#shared/schemas/result'
import { findResult, insertResult, listNewestResults } from '../repositories/result-repository'
import { recordAct } from './audit'
import { requireBuild } from './build-service'
import type { ShopContext } from './context'
import { deriveCheckedInputs } from './model-input'
import { requireScenario, type ScenarioPlace } from './scenario-service'
import { requireSetup } from './setup-service'

/** The newest stored answer of each set-up for a scenario. */
export async function listResults(shop: ShopContext, at: ScenarioPlace): Promise<Result[]> {
  await requireScenario(shop, at)
  return listNewestResults(shop.trx, shop.session.shopId, { buildId: at.buildId, scenarioId: at.id })
}

/**
 * Computes set-up × scenario and stores the answer with its whole input. Unless lock-up is proven, the truck is judged
 * unlocked and the locked answer stands beside it.
 *
 * @throws what the model refuses with, and then nothing is stored
 */
export async function createResult(
  shop: ShopContext,
  at: ScenarioPlace,
  request: ResultCreate,
): Promise<Result> {
  const { trx, session } = shop
  const { build, physicsVersion } = await requireBuild(shop, at.buildId)
  const { scenario, physicsVersion: ofScenario } = await requireScenario(shop, at)
  const { setup, physicsVersion: ofSetup } = await requireSetup(shop, {
    buildId: at.buildId,
    id: request.setupId,
  })
  const { judged, judgedBy, locked } = deriveCheckedInputs(build, setup, scenario)
  const answer = estimate(judged)
  await insertResult(trx, session.shopId, {
    id: request.id,
    buildId: build.id,
    scenarioId: scenario.id,
    setupId: setup.id,
    input: judged,
    answer,
    lockedAnswer: judgedBy === 'unlocked' && locked !== null ? estimate(locked) : null,
    judgement: judgeAnswer(answer, build.limits).judgement,
    build: { version: build.version, physicsVersion },
    scenario: { version: scenario.version, physicsVersion: ofScenario },
    setup: { version: setup.version, physicsVersion: ofSetup },
    createdBy: session.userId,
  })
  await recordAct(shop, 'result.create', { kind: 'result', id: request.id }, { buildId: build.id })
  const stored = await findResult(trx, session.shopId, request.id)
  if (stored === undefined) throw new AppError('internal')
  return stored
}
