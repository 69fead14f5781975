import { v7 as createId } from 'uuid'
import { createStandingSetups, deriveBuild, deriveInputs, judgeAnswer } from '#shared/build-sheet'
import { AppError } from '#shared/errors'
import type { BuildAnswer, BuildCreate, BuildList, BuildListQuery, BuildUpdate } from '#shared/schemas/build'
import type { CustomerCreate } from '#shared/schemas/customer'
import {
  countBuilds,
  deleteBuild,
  findBuild,
  insertBuild,
  listBuilds,
  updateBuild,
  type StoredBuild,
} from '../repositories/build-repository'
import { findCustomer, insertCustomer } from '../repositories/customer-repository'
import { insertScenario, listScenarios } from '../repositories/scenario-repository'
import { insertSetup, listSetups } from '../repositories/setup-repository'
import { recordAct } from './audit'
import { explainMissedChange, locatingIssues } from './changes'
import type { ShopContext } from './context'

const PAGE_SIZE = 25

/** @throws not_found also for another shop's build */
export async function requireBuild({ trx, session }: ShopContext, id: string): Promise<StoredBuild> {
  const found = await findBuild(trx, session.shopId, id)
  if (found === undefined) throw new AppError('not_found')
  return found
}

export async function getBuild(shop: ShopContext, id: string): Promise<BuildAnswer> {
  const { build } = await requireBuild(shop, id)
  const setups = await listSetups(shop.trx, shop.session.shopId, id)
  const scenarios = await listScenarios(shop.trx, shop.session.shopId, id)
  return { build, setups, scenarios }
}

/** One page of the shop's builds, each with the answer of its first scenario, judged by the build's limits of today. */
export async function listBuildPage(
  { trx, session }: ShopContext,
  query: BuildListQuery,
): Promise<BuildList> {
  const total = await countBuilds(trx, session.shopId, query)
  const lines = await listBuilds(trx, session.shopId, query, {
    offset: (query.page - 1) * PAGE_SIZE,
    limit: PAGE_SIZE,
  })
  const builds = lines.map(({ limits, ...line }) => {
    const { peakSumpC, peakCoolerInletC } = line
    const judgement =
      peakSumpC === null || peakCoolerInletC === null
        ? null
        : judgeAnswer({ peakSumpC, peakCoolerInletC }, limits).judgement
    return { ...line, judgement }
  })
  return { builds, total, page: query.page, pageSize: PAGE_SIZE }
}

/** A customer new to the shop is added with the build; one it has already must be the same person. */
async function linkCustomer({ trx, session }: ShopContext, customer: CustomerCreate): Promise<void> {
  await insertCustomer(trx, session.shopId, customer, session.userId)
  const known = await findCustomer(trx, session.shopId, customer.id)
  if (known === undefined || known.name !== customer.name)
    throw new AppError('conflict', {
      message: 'The shop knows another customer under this id. Load the customers again and choose.',
    })
}

/**
 * Adds a build with its first scenario and its two standing set-ups: as it is, and driven differently.
 * @throws bad_input where sheet and drive cycle do not make a truck the model takes, by the fields of the request
 */
export async function createBuild(shop: ShopContext, request: BuildCreate): Promise<BuildAnswer> {
  const { trx, session } = shop
  const { sheet, control, limits, scenario } = request
  const model = locatingIssues(
    (path) => `sheet.${path}`,
    () => deriveBuild(sheet),
  )
  locatingIssues(
    (path) => `scenario.${path}`,
    () => deriveInputs({ sheet, control, scenario }),
  )
  if (request.customer !== undefined) await linkCustomer(shop, request.customer)
  await insertBuild(trx, session.shopId, {
    id: request.id,
    customerId: request.customer?.id,
    name: request.name,
    stage: 'call',
    sheet,
    control,
    limits,
    createdBy: session.userId,
  })
  await insertScenario(trx, session.shopId, { ...scenario, buildId: request.id, createdBy: session.userId })
  for (const setup of createStandingSetups({ build: model, scenario }))
    await insertSetup(trx, session.shopId, {
      ...setup,
      id: createId(),
      buildId: request.id,
      createdBy: session.userId,
    })
  await recordAct(shop, 'build.create', { kind: 'build', id: request.id }, { name: request.name })
  return getBuild(shop, request.id)
}

/**
 * Changes a build that still is at `version`.
 * @throws stale_version with the version it is at, when somebody was faster
 */
export async function changeBuild(
  shop: ShopContext,
  at: { id: string; version: number },
  change: BuildUpdate,
): Promise<BuildAnswer> {
  const { trx, session } = shop
  const { sheet } = change
  if (sheet !== undefined)
    locatingIssues(
      (path) => `sheet.${path}`,
      () => deriveBuild(sheet),
    )
  if (!(await updateBuild(trx, session.shopId, { ...at, updatedBy: session.userId }, change)))
    throw explainMissedChange((await findBuild(trx, session.shopId, at.id))?.build)
  await recordAct(shop, 'build.update', { kind: 'build', id: at.id }, { fields: Object.keys(change) })
  return getBuild(shop, at.id)
}

/** Removes a build with its scenarios, set-ups and results, if it still is at `version`. */
export async function removeBuild(shop: ShopContext, at: { id: string; version: number }): Promise<void> {
  const { trx, session } = shop
  const { build } = await requireBuild(shop, at.id)
  if (!(await deleteBuild(trx, session.shopId, at)))
    throw explainMissedChange((await findBuild(trx, session.shopId, at.id))?.build)
  await recordAct(shop, 'build.delete', { kind: 'build', id: at.id }, { name: build.name })
}
