import type { Knex } from 'knex'
import type { Build, BuildListQuery, BuildSort, Stage } from '#shared/schemas/build'
import type { Control } from '#shared/schemas/control'
import type { Limits } from '#shared/schemas/limits'
import type { BuildSheet } from '#shared/schemas/sheet'
import { definedOnly, toJsonb } from './rows'

interface BuildRow {
  id: string
  customer_id: string | null
  customer_name: string | null
  name: string
  stage: Stage
  sheet: BuildSheet
  control: Control
  limits: Limits
  version: number
  physics_version: number
  created_at: Date
  updated_at: Date
}

/** A build with the count of changes that enter the model, which screens have no use for. */
export interface StoredBuild {
  build: Build
  physicsVersion: number
}

export interface BuildFields {
  name?: string
  stage?: Stage
  sheet?: BuildSheet
  control?: Control
  limits?: Limits
}

export interface BuildLine {
  id: string
  name: string
  customerName: string | null
  stage: Stage
  updatedAt: string
  limits: Limits
  scenarioId: string | null
  peakSumpC: number | null
  peakCoolerInletC: number | null
}

function toBuild(row: BuildRow): Build {
  return {
    id: row.id,
    ...(row.customer_id === null ? {} : { customerId: row.customer_id }),
    ...(row.customer_name === null ? {} : { customerName: row.customer_name }),
    name: row.name,
    stage: row.stage,
    sheet: row.sheet,
    control: row.control,
    limits: row.limits,
    version: row.version,
    createdAt: row.created_at.toISOString(),
    updatedAt: row.updated_at.toISOString(),
  }
}

export async function findBuild(
  trx: Knex.Transaction,
  shopId: string,
  id: string,
): Promise<StoredBuild | undefined> {
  const row = await trx('builds as b')
    .leftJoin('customers as c', (join) => join.on('c.shop_id', 'b.shop_id').andOn('c.id', 'b.customer_id'))
    .where({ 'b.shop_id': shopId, 'b.id': id })
    .first<BuildRow | undefined>('b.*', 'c.name as customer_name')
  return row === undefined ? undefined : { build: toBuild(row), physicsVersion: row.physics_version }
}

export async function insertBuild(
  trx: Knex.Transaction,
  shopId: string,
  build: Required<BuildFields> & { id: string; customerId: string | undefined; createdBy: string },
): Promise<void> {
  await trx('builds').insert({
    shop_id: shopId,
    id: build.id,
    customer_id: build.customerId ?? null,
    name: build.name,
    stage: build.stage,
    sheet: toJsonb(build.sheet),
    control: toJsonb(build.control),
    limits: toJsonb(build.limits),
    created_by: build.createdBy,
    updated_by: build.createdBy,
  })
}

/**
 * Changes a build if it still is at `version`.
 * @returns whether it was
 */
export async function updateBuild(
  trx: Knex.Transaction,
  shopId: string,
  at: { id: string; version: number; updatedBy: string },
  fields: BuildFields,
): Promise<boolean> {
  const entersModel = fields.sheet !== undefined || fields.control !== undefined
  const changed = await trx('builds')
    .where({ shop_id: shopId, id: at.id, version: at.version })
    .update({
      ...definedOnly({
        name: fields.name,
        stage: fields.stage,
        sheet: fields.sheet && toJsonb(fields.sheet),
        control: fields.control && toJsonb(fields.control),
        limits: fields.limits && toJsonb(fields.limits),
      }),
      version: trx.raw('version + 1'),
      physics_version: trx.raw('physics_version + ?', [entersModel ? 1 : 0]),
      updated_at: trx.fn.now(),
      updated_by: at.updatedBy,
    })
  return changed === 1
}

/** Deletes a build with all that hangs on it, if it still is at `version`. */
export async function deleteBuild(
  trx: Knex.Transaction,
  shopId: string,
  at: { id: string; version: number },
): Promise<boolean> {
  return (await trx('builds').where({ shop_id: shopId, id: at.id, version: at.version }).delete()) === 1
}

/** A change below a build shows in the list as a change of the build; its version stays, since its own fields do. */
export async function touchBuild(
  trx: Knex.Transaction,
  shopId: string,
  id: string,
  updatedBy: string,
): Promise<void> {
  await trx('builds')
    .where({ shop_id: shopId, id })
    .update({ updated_at: trx.fn.now(), updated_by: updatedBy })
}

const ORDER: Record<BuildSort, string> = {
  name: 'lower(b.name)',
  customer: 'lower(c.name)',
  stage: 'b.stage_rank',
  updated: 'b.updated_at',
}

function wanted(trx: Knex.Transaction, shopId: string, { search, stage }: BuildListQuery): Knex.QueryBuilder {
  const query = trx('builds as b')
    .leftJoin('customers as c', (join) => join.on('c.shop_id', 'b.shop_id').andOn('c.id', 'b.customer_id'))
    .where('b.shop_id', shopId)
  if (stage !== undefined) query.andWhere('b.stage', stage)
  if (search !== undefined && search !== '')
    query.whereIn('b.id', trx.select('id').from(trx.raw('app.search_builds(?) as found(id)', [search])))
  return query
}

export async function countBuilds(
  trx: Knex.Transaction,
  shopId: string,
  query: BuildListQuery,
): Promise<number> {
  const row = await wanted(trx, shopId, query).count<{ count: number }[]>('b.id as count')
  return row[0]?.count ?? 0
}

/**
 * One page of the list. Beside each build its first scenario and the newest answer for it as it is, as long as nothing
 * that enters the model changed since; an answer that no longer belongs to the build is not shown.
 */
export async function listBuilds(
  trx: Knex.Transaction,
  shopId: string,
  query: BuildListQuery,
  page: { offset: number; limit: number },
): Promise<BuildLine[]> {
  const downward = query.direction ?? (query.sort === 'updated' ? 'desc' : 'asc')
  const rows = await wanted(trx, shopId, query)
    .joinRaw(
      `left join lateral (
        select id, physics_version from scenarios
        where shop_id = b.shop_id and build_id = b.id order by created_at, id limit 1
      ) s on true
      left join lateral (
        select r.peak_sump_c, r.peak_cooler_inlet_c from results r
        join setups t on t.shop_id = r.shop_id and t.id = r.setup_id and t.kind = 'as-it-is'
        where r.shop_id = b.shop_id and r.scenario_id = s.id and r.build_physics_version = b.physics_version
          and r.scenario_physics_version = s.physics_version and r.setup_physics_version = t.physics_version
        order by r.created_at desc, r.id desc limit 1
      ) a on true`,
    )
    .orderByRaw(`${ORDER[query.sort]} ${downward === 'desc' ? 'desc' : 'asc'} nulls last, b.id`)
    .offset(page.offset)
    .limit(page.limit)
    .select<
      {
        id: string
        name: string
        customer_name: string | null
        stage: Stage
        updated_at: Date
        limits: Limits
        scenario_id: string | null
        peak_sump_c: number | null
        peak_cooler_inlet_c: number | null
      }[]
    >(
      'b.id',
      'b.name',
      'c.name as customer_name',
      'b.stage',
      'b.updated_at',
      'b.limits',
      's.id as scenario_id',
      'a.peak_sump_c',
      'a.peak_cooler_inlet_c',
    )
  return rows.map((row) => ({
    id: row.id,
    name: row.name,
    customerName: row.customer_name,
    stage: row.stage,
    updatedAt: row.updated_at.toISOString(),
    limits: row.limits,
    scenarioId: row.scenario_id,
    peakSumpC: row.peak_sump_c,
    peakCoolerInletC: row.peak_cooler_inlet_c,
  }))
}
