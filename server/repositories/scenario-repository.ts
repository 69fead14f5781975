import type { Knex } from 'knex'
import type { Duty, Load } from '#shared/schemas/heat-input'
import type { Scenario } from '#shared/schemas/scenario'
import { definedOnly, toJsonb } from './rows'

interface ScenarioRow {
  id: string
  build_id: string
  name: string
  load: Load
  duty: Duty
  version: number
  physics_version: number
}

export interface StoredScenario {
  scenario: Scenario
  physicsVersion: number
}

const COLUMNS = ['id', 'build_id', 'name', 'load', 'duty', 'version', 'physics_version'] as const

function toScenario(row: ScenarioRow): Scenario {
  return {
    id: row.id,
    buildId: row.build_id,
    name: row.name,
    load: row.load,
    duty: row.duty,
    version: row.version,
  }
}

export async function listScenarios(
  trx: Knex.Transaction,
  shopId: string,
  buildId: string,
): Promise<Scenario[]> {
  const rows = await trx('scenarios')
    .where({ shop_id: shopId, build_id: buildId })
    .orderBy(['created_at', 'id'])
    .select<ScenarioRow[]>(...COLUMNS)
  return rows.map(toScenario)
}

export async function findScenario(
  trx: Knex.Transaction,
  shopId: string,
  at: { buildId: string; id: string },
): Promise<StoredScenario | undefined> {
  const row = await trx('scenarios')
    .where({ shop_id: shopId, build_id: at.buildId, id: at.id })
    .first<ScenarioRow | undefined>(...COLUMNS)
  return row === undefined ? undefined : { scenario: toScenario(row), physicsVersion: row.physics_version }
}

export async function insertScenario(
  trx: Knex.Transaction,
  shopId: string,
  scenario: { id: string; buildId: string; name: string; load: Load; duty: Duty; createdBy: string },
): Promise<void> {
  await trx('scenarios').insert({
    shop_id: shopId,
    id: scenario.id,
    build_id: scenario.buildId,
    name: scenario.name,
    load: toJsonb(scenario.load),
    duty: toJsonb(scenario.duty),
    created_by: scenario.createdBy,
  })
}

/** Changes a scenario if it still is at `version`. @returns whether it was */
export async function updateScenario(
  trx: Knex.Transaction,
  shopId: string,
  at: { buildId: string; id: string; version: number },
  fields: { name?: string; load?: Load; duty?: Duty },
): Promise<boolean> {
  const entersModel = fields.load !== undefined || fields.duty !== undefined
  const changed = await trx('scenarios')
    .where({ shop_id: shopId, build_id: at.buildId, id: at.id, version: at.version })
    .update({
      ...definedOnly({
        name: fields.name,
        load: fields.load && toJsonb(fields.load),
        duty: fields.duty && toJsonb(fields.duty),
      }),
      version: trx.raw('version + 1'),
      physics_version: trx.raw('physics_version + ?', [entersModel ? 1 : 0]),
      updated_at: trx.fn.now(),
    })
  return changed === 1
}

/** Deletes a scenario with its results, if it still is at `version`. */
export async function deleteScenario(
  trx: Knex.Transaction,
  shopId: string,
  at: { buildId: string; id: string; version: number },
): Promise<boolean> {
  const deleted = await trx('scenarios')
    .where({ shop_id: shopId, build_id: at.buildId, id: at.id, version: at.version })
    .delete()
  return deleted === 1
}
