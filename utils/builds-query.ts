import { BUILD_SORTS, STAGES } from '#shared/schemas/build'
import type { BuildSort, Stage } from '#shared/schemas/build'

/** What the list of builds shows, as its address says it. */
export interface BuildsQuery {
  search: string
  stage: Stage | ''
  sort: BuildSort
  direction: 'asc' | 'desc'
  page: number
}

/** Words for the stages of a job. */
export const STAGE_WORDS: Record<Stage, string> = {
  call: 'first call',
  sized: 'sized',
  quoted: 'quoted',
  'in-work': 'in work',
  'road-test': 'road test',
  done: 'done',
}

/** Newest first for the date of change, from A on for everything else. */
export const usualDirection = (sort: BuildSort): 'asc' | 'desc' => (sort === 'updated' ? 'desc' : 'asc')

const one = (value: unknown): string => {
  const first: unknown = Array.isArray(value) ? value[0] : value
  return typeof first === 'string' ? first : ''
}

const oneOf = <Choice extends string>(choices: readonly Choice[], value: string): Choice | undefined =>
  choices.find((choice) => choice === value)

/**
 * Reads the address of the list. An address somebody mistyped shows the list as it usually is, in that part.
 * @param query - `route.query`
 */
export function readBuildsQuery(query: Record<string, unknown>): BuildsQuery {
  const sort = oneOf(BUILD_SORTS, one(query.sort)) ?? 'updated'
  const page = /^[1-9]\d{0,5}$/.test(one(query.page)) ? Number(one(query.page)) : 1
  return {
    search: one(query.search).slice(0, 120),
    stage: oneOf(STAGES, one(query.stage)) ?? '',
    sort,
    direction: oneOf(['asc', 'desc'] as const, one(query.direction)) ?? usualDirection(sort),
    page,
  }
}

/** The shortest address and request that say the same: whatever is as usual is left out. */
export function writeBuildsQuery(query: BuildsQuery): Record<string, string> {
  return {
    ...(query.search.trim() === '' ? {} : { search: query.search.trim() }),
    ...(query.stage === '' ? {} : { stage: query.stage }),
    ...(query.sort === 'updated' ? {} : { sort: query.sort }),
    ...(query.direction === usualDirection(query.sort) ? {} : { direction: query.direction }),
    ...(query.page === 1 ? {} : { page: String(query.page) }),
  }
}
