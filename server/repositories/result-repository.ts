import type { Knex } from 'knex'
import type { Estimate } from '#shared/heat/types'
import type { HeatInput } from '#shared/schemas/heat-input'
import type { Judgement } from '#shared/schemas/limits'
import type { Result } from '#shared/schemas/result'
import { toJsonb } from './rows'

interface ResultRow {
  id: string
  build_id: string
  scenario_id: string
  setup_id: string
  model_version: string
  input: HeatInput
  answer: Estimate
  locked_answer: Estimate | null
  judgement: Judgement
  build_version: number
  scenario_version: number
  setup_version: number
  current: boolean
  created_at: Date
  created_by: string
}

/** The counts of changes a result was computed from. */
export interface ResultSource {
  version: number
  physicsVersion: number
}

export interface NewResult {
  id: string
  buildId: string
  scenarioId: string
  setupId: string
  input: HeatInput
  answer: Estimate
  lockedAnswer: Estimate | null
  judgement: Judgement
  build: ResultSource
  scenario: ResultSource
  setup: ResultSource
  createdBy: string
}

function toResult(row: ResultRow): Result {
  return {
    id: row.id,
    buildId: row.build_id,
    scenarioId: row.scenario_id,
    setupId: row.setup_id,
    modelVersion: row.model_version,
    input: row.input,
    answer: row.answer,
    lockedAnswer: row.locked_answer,
    judgement: row.judgement,
    buildVersion: row.build_version,
    scenarioVersion: row.scenario_version,
    setupVersion: row.setup_version,
    current: row.current,
    createdAt: row.created_at.toISOString(),
    createdBy: row.created_by,
  }
}

export async function insertResult(trx: Knex.Transaction, shopId: string, result: NewResult): Promise<void> {
  await trx('results').insert({
    shop_id: shopId,
    id: result.id,
    build_id: result.buildId,
    scenario_id: result.scenarioId,
    setup_id: result.setupId,
    model_version: result.answer.modelVersion,
    input: toJsonb(result.input),
    answer: toJsonb(result.answer),
    locked_answer: result.lockedAnswer && toJsonb(result.lockedAnswer),
    peak_sump_c: result.answer.peakSumpC,
    peak_cooler_inlet_c: result.answer.peakCoolerInletC,
    judgement: result.judgement,
    build_version: result.build.version,
    build_physics_version: result.build.physicsVersion,
    scenario_version: result.scenario.version,
    scenario_physics_version: result.scenario.physicsVersion,
    setup_version: result.setup.version,
    setup_physics_version: result.setup.physicsVersion,
    created_by: result.createdBy,
  })
}

const withCurrency = (trx: Knex.Transaction): Knex.QueryBuilder =>
  trx('results as r')
    .join('builds as b', (join) => join.on('b.shop_id', 'r.shop_id').andOn('b.id', 'r.build_id'))
    .join('scenarios as s', (join) => join.on('s.shop_id', 'r.shop_id').andOn('s.id', 'r.scenario_id'))
    .join('setups as t', (join) => join.on('t.shop_id', 'r.shop_id').andOn('t.id', 'r.setup_id'))
    .select('r.*')
    .select(
      trx.raw(`(r.build_physics_version = b.physics_version and r.scenario_physics_version = s.physics_version
        and r.setup_physics_version = t.physics_version) as current`),
    )

export async function findResult(
  trx: Knex.Transaction,
  shopId: string,
  id: string,
): Promise<Result | undefined> {
  const row = await withCurrency(trx)
    .where({ 'r.shop_id': shopId, 'r.id': id })
    .first<ResultRow | undefined>()
  return row === undefined ? undefined : toResult(row)
}

/** The newest result of each set-up, newest first. */
export async function listNewestResults(
  trx: Knex.Transaction,
  shopId: string,
  at: { buildId: string; scenarioId: string },
): Promise<Result[]> {
  const newest = trx('results')
    .distinctOn('setup_id')
    .where({ shop_id: shopId, build_id: at.buildId, scenario_id: at.scenarioId })
    .orderBy([
      { column: 'setup_id' },
      { column: 'created_at', order: 'desc' },
      { column: 'id', order: 'desc' },
    ])
    .select('id')
  const rows = (await withCurrency(trx)
    .where('r.shop_id', shopId)
    .whereIn('r.id', trx.select('id').from(newest.as('newest')))
    .orderBy([
      { column: 'r.created_at', order: 'desc' },
      { column: 'r.id', order: 'desc' },
    ])) as ResultRow[]
  return rows.map(toResult)
}
