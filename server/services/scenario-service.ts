import { deriveInputs } from '#shared/build-sheet'
import { AppError } from '#shared/errors'
import type { Scenario, ScenarioCreate, ScenarioUpdate } from '#shared/schemas/scenario'
import { touchBuild } from '../repositories/build-repository'
import {
  deleteScenario,
  findScenario,
  insertScenario,
  listScenarios,
  updateScenario,
  type StoredScenario,
} from '../repositories/scenario-repository'
import { recordAct } from './audit'
import { requireBuild } from './build-service'
import { explainMissedChange } from './changes'
import type { ShopContext } from './context'

export interface ScenarioPlace {
  buildId: string
  id: string
}

/** @throws not_found also for another shop's scenario, or another build's */
export async function requireScenario(
  { trx, session }: ShopContext,
  at: ScenarioPlace,
): Promise<StoredScenario> {
  const found = await findScenario(trx, session.shopId, at)
  if (found === undefined) throw new AppError('not_found')
  return found
}

export async function getScenario(shop: ShopContext, at: ScenarioPlace): Promise<Scenario> {
  return (await requireScenario(shop, at)).scenario
}

export async function createScenario(
  shop: ShopContext,
  buildId: string,
  request: ScenarioCreate,
): Promise<Scenario> {
  const { trx, session } = shop
  const { build } = await requireBuild(shop, buildId)
  deriveInputs({ sheet: build.sheet, control: build.control, scenario: request })
  await insertScenario(trx, session.shopId, { ...request, buildId, createdBy: session.userId })
  await touchBuild(trx, session.shopId, buildId, session.userId)
  await recordAct(shop, 'scenario.create', { kind: 'scenario', id: request.id }, { name: request.name })
  return getScenario(shop, { buildId, id: request.id })
}

/** Changes a scenario that still is at `version`. @throws stale_version with the version it is at */
export async function changeScenario(
  shop: ShopContext,
  at: ScenarioPlace & { version: number },
  change: ScenarioUpdate,
): Promise<Scenario> {
  const { trx, session } = shop
  const { build } = await requireBuild(shop, at.buildId)
  const { scenario } = await requireScenario(shop, at)
  deriveInputs({
    sheet: build.sheet,
    control: build.control,
    scenario: { load: change.load ?? scenario.load, duty: change.duty ?? scenario.duty },
  })
  if (!(await updateScenario(trx, session.shopId, at, change)))
    throw explainMissedChange((await findScenario(trx, session.shopId, at))?.scenario)
  await touchBuild(trx, session.shopId, at.buildId, session.userId)
  await recordAct(shop, 'scenario.update', { kind: 'scenario', id: at.id }, { fields: Object.keys(change) })
  return getScenario(shop, at)
}

/** Removes a scenario with its results. A build keeps at least one: without it there is nothing to answer. */
export async function removeScenario(
  shop: ShopContext,
  at: ScenarioPlace & { version: number },
): Promise<void> {
  const { trx, session } = shop
  const { scenario } = await requireScenario(shop, at)
  if ((await listScenarios(trx, session.shopId, at.buildId)).length === 1)
    throw new AppError('conflict', {
      message: 'A build keeps at least one scenario. Add another before you remove this one.',
    })
  if (!(await deleteScenario(trx, session.shopId, at)))
    throw explainMissedChange((await findScenario(trx, session.shopId, at))?.scenario)
  await touchBuild(trx, session.shopId, at.buildId, session.userId)
  await recordAct(shop, 'scenario.delete', { kind: 'scenario', id: at.id }, { name: scenario.name })
}
