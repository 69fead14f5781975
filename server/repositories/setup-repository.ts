import type { Knex } from 'knex'
import type { Setup, SetupChange, SetupKind } from '#shared/schemas/setup'
import { definedOnly, toJsonb } from './rows'

interface SetupRow {
  id: string
  build_id: string
  name: string
  kind: SetupKind
  change: SetupChange
  version: number
  physics_version: number
}

export interface StoredSetup {
  setup: Setup
  physicsVersion: number
}

const COLUMNS = ['id', 'build_id', 'name', 'kind', 'change', 'version', 'physics_version'] as const

function toSetup(row: SetupRow): Setup {
  return {
    id: row.id,
    buildId: row.build_id,
    name: row.name,
    kind: row.kind,
    change: row.change,
    version: row.version,
  }
}

/** "As it is" first, then "drive it differently", then those of the shop's own in the order they were made. */
export async function listSetups(trx: Knex.Transaction, shopId: string, buildId: string): Promise<Setup[]> {
  const rows = await trx('setups')
    .where({ shop_id: shopId, build_id: buildId })
    .orderByRaw(`case kind when 'as-it-is' then 1 when 'drive-differently' then 2 else 3 end, created_at, id`)
    .select<SetupRow[]>(...COLUMNS)
  return rows.map(toSetup)
}

export async function findSetup(
  trx: Knex.Transaction,
  shopId: string,
  at: { buildId: string; id: string },
): Promise<StoredSetup | undefined> {
  const row = await trx('setups')
    .where({ shop_id: shopId, build_id: at.buildId, id: at.id })
    .first<SetupRow | undefined>(...COLUMNS)
  return row === undefined ? undefined : { setup: toSetup(row), physicsVersion: row.physics_version }
}

export async function insertSetup(
  trx: Knex.Transaction,
  shopId: string,
  setup: {
    id: string
    buildId: string
    name: string
    kind: SetupKind
    change: SetupChange
    createdBy: string
  },
): Promise<void> {
  await trx('setups').insert({
    shop_id: shopId,
    id: setup.id,
    build_id: setup.buildId,
    name: setup.name,
    kind: setup.kind,
    change: toJsonb(setup.change),
    created_by: setup.createdBy,
  })
}

/** Changes a set-up if it still is at `version`. @returns whether it was */
export async function updateSetup(
  trx: Knex.Transaction,
  shopId: string,
  at: { buildId: string; id: string; version: number },
  fields: { name?: string; change?: SetupChange },
): Promise<boolean> {
  const changed = await trx('setups')
    .where({ shop_id: shopId, build_id: at.buildId, id: at.id, version: at.version })
    .update({
      ...definedOnly({ name: fields.name, change: fields.change && toJsonb(fields.change) }),
      version: trx.raw('version + 1'),
      physics_version: trx.raw('physics_version + ?', [fields.change === undefined ? 0 : 1]),
      updated_at: trx.fn.now(),
    })
  return changed === 1
}

/** Deletes a set-up with its results, if it still is at `version`. */
export async function deleteSetup(
  trx: Knex.Transaction,
  shopId: string,
  at: { buildId: string; id: string; version: number },
): Promise<boolean> {
  const deleted = await trx('setups')
    .where({ shop_id: shopId, build_id: at.buildId, id: at.id, version: at.version })
    .delete()
  return deleted === 1
}
