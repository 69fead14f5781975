import { describe, expect, it } from 'vitest'
import { loadPublished, type TopicChecks } from '../../support/published'
import { air } from './air.checks'
import { converter } from './converter.checks'
import { cooling } from './cooling.checks'
import { fluidLife } from './fluid-life.checks'
import { fluids } from './fluids.checks'
import { heatExchangers } from './heat-exchangers.checks'
import { interpolation } from './interpolation.checks'
import { lines } from './lines.checks'
import { roadLoad } from './road-load.checks'
import { units } from './units.checks'

/**
 * Every check value from outside is either compared with our functions or listed as not applicable, with the reason. An
 * entry in neither table, in both, or a table row without an entry fails.
 */

const TOPICS: TopicChecks[] = [
  air,
  converter,
  cooling,
  fluidLife,
  fluids,
  heatExchangers,
  interpolation,
  lines,
  roadLoad,
  units,
]
const entries = loadPublished()
const checks = new Map(TOPICS.flatMap((topic) => Object.entries(topic.checks)))
const notApplicable = new Map(TOPICS.flatMap((topic) => Object.entries(topic.notApplicable)))

describe('published values', () => {
  const checked = entries.filter(({ entry }) => checks.has(entry.id))
  it.each(checked.map(({ entry, file }) => [entry.id, file, entry] as const))(
    '%s (%s)',
    (id, _file, entry) => {
      expect.hasAssertions()
      checks.get(id)?.(entry)
    },
  )
})

describe('the collection of published values', () => {
  const ids = entries.map(({ entry }) => entry.id)

  it('has every entry in exactly one of the two tables', () => {
    expect(ids.filter((id) => !checks.has(id) && !notApplicable.has(id))).toEqual([])
    expect(ids.filter((id) => checks.has(id) && notApplicable.has(id))).toEqual([])
  })

  it('has an entry for every row of the tables, and no id twice', () => {
    expect([...checks.keys(), ...notApplicable.keys()].filter((id) => !ids.includes(id))).toEqual([])
    expect(ids.filter((id, index) => ids.indexOf(id) !== index)).toEqual([])
    const rows = TOPICS.flatMap((topic) => [
      ...Object.keys(topic.checks),
      ...Object.keys(topic.notApplicable),
    ])
    expect(rows.filter((id, index) => rows.indexOf(id) !== index)).toEqual([])
  })

  it('names a source and what was verified for every entry', () => {
    for (const { entry } of entries) {
      expect(entry.source.length, entry.id).toBeGreaterThan(15)
      expect(['source read', 'computed', 'from memory'], entry.id).toContain(entry.evidence)
      expect(entry.tolerance, entry.id).toBeGreaterThanOrEqual(0)
    }
    for (const [id, reason] of notApplicable) expect(reason.length, id).toBeGreaterThan(30)
  })
})
