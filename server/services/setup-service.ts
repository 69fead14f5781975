import { AppError } from '#shared/errors'
import type { Setup, SetupChange, SetupCreate, SetupUpdate } from '#shared/schemas/setup'
import { touchBuild } from '../repositories/build-repository'
import {
  deleteSetup,
  findSetup,
  insertSetup,
  updateSetup,
  type StoredSetup,
} from '../repositories/setup-repository'
import { recordAct } from './audit'
import { requireBuild } from './build-service'
import { explainMissedChange } from './changes'
import type { ShopContext } from './context'
import { checkSetupChange } from './model-input'

export interface SetupPlace {
  buildId: string
  id: string
}

/** @throws not_found also for another shop's set-up, or another build's */
export async function requireSetup({ trx, session }: ShopContext, at: SetupPlace): Promise<StoredSetup> {
  const found = await findSetup(trx, session.shopId, at)
  if (found === undefined) throw new AppError('not_found')
  return found
}

async function getSetup(shop: ShopContext, at: SetupPlace): Promise<Setup> {
  return (await requireSetup(shop, at)).setup
}

async function checkChange(shop: ShopContext, buildId: string, change: SetupChange): Promise<void> {
  const { build } = await requireBuild(shop, buildId)
  checkSetupChange(build.sheet, change)
}

export async function createSetup(shop: ShopContext, buildId: string, request: SetupCreate): Promise<Setup> {
  const { trx, session } = shop
  await checkChange(shop, buildId, request.change)
  await insertSetup(trx, session.shopId, {
    ...request,
    kind: 'custom',
    buildId,
    createdBy: session.userId,
  })
  await touchBuild(trx, session.shopId, buildId, session.userId)
  await recordAct(shop, 'setup.create', { kind: 'setup', id: request.id }, { name: request.name })
  return getSetup(shop, { buildId, id: request.id })
}

/**
 * Changes a set-up that still is at `version`. "As it is" changes nothing, always: what else would it be compared with?
 * @throws stale_version with the version it is at; conflict for "as it is"
 */
export async function changeSetup(
  shop: ShopContext,
  at: SetupPlace & { version: number },
  request: SetupUpdate,
): Promise<Setup> {
  const { trx, session } = shop
  const { setup } = await requireSetup(shop, at)
  if (setup.kind === 'as-it-is')
    throw new AppError('conflict', {
      message: '“As it is” stays as it is. Change the build sheet, or add a set-up of your own.',
    })
  if (request.change !== undefined) await checkChange(shop, at.buildId, request.change)
  if (!(await updateSetup(trx, session.shopId, at, request)))
    throw explainMissedChange((await findSetup(trx, session.shopId, at))?.setup)
  await touchBuild(trx, session.shopId, at.buildId, session.userId)
  await recordAct(shop, 'setup.update', { kind: 'setup', id: at.id }, { fields: Object.keys(request) })
  return getSetup(shop, at)
}

/** Removes a set-up of the shop's own with its results. @throws conflict for the two that every build has */
export async function removeSetup(shop: ShopContext, at: SetupPlace & { version: number }): Promise<void> {
  const { trx, session } = shop
  const { setup } = await requireSetup(shop, at)
  if (setup.kind !== 'custom')
    throw new AppError('conflict', {
      message: 'Every build has this set-up. It can be left out of a comparison.',
    })
  if (!(await deleteSetup(trx, session.shopId, at)))
    throw explainMissedChange((await findSetup(trx, session.shopId, at))?.setup)
  await touchBuild(trx, session.shopId, at.buildId, session.userId)
  await recordAct(shop, 'setup.delete', { kind: 'setup', id: at.id }, { name: setup.name })
}
