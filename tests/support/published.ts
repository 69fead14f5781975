import { readFileSync, readdirSync } from 'node:fs'
import { join } from 'node:path'
import { expect } from 'vitest'

/** One check value from outside: what went in, what came out, who says so and how far that was verified. */
export interface PublishedEntry {
  id: string
  topic: string
  inputs: Record<string, unknown>
  expected: Record<string, unknown>
  /** Relative unless the check says otherwise. */
  tolerance: number
  source: string
  /** `source read`: seen where it is printed. `computed`: by a tool or a closed form. `from memory`: neither. */
  evidence: 'source read' | 'computed' | 'from memory'
  evidenceDetail?: string
  note?: string
}

/** Checks by id, and ids that no function of ours can be checked against, each with the reason. */
export interface TopicChecks {
  checks: Record<string, (entry: PublishedEntry) => void>
  notApplicable: Record<string, string>
}

const FOLDER = join(import.meta.dirname, '../model/published')

/** Every entry of every JSON file beside the published checks. */
export function loadPublished(): { file: string; entry: PublishedEntry }[] {
  return readdirSync(FOLDER)
    .filter((file) => file.endsWith('.json'))
    .flatMap((file) =>
      (JSON.parse(readFileSync(join(FOLDER, file), 'utf8')) as PublishedEntry[]).map((entry) => ({
        file,
        entry,
      })),
    )
}

/** One entry by id, for checks that look another one up. */
export function getPublished(id: string): PublishedEntry {
  const found = loadPublished().find(({ entry }) => entry.id === id)
  if (found === undefined) throw new Error(`no published entry ${id}`)
  return found.entry
}

type Side = 'inputs' | 'expected'

/** A number of an entry; a missing or mistyped one is a failing test, not NaN. */
export function numberOf(entry: PublishedEntry, side: Side, field: string): number {
  const value = entry[side][field]
  if (typeof value !== 'number') throw new Error(`${entry.id}: ${side}.${field} is no number`)
  return value
}

/** A list of numbers of an entry. */
export function numbersOf(entry: PublishedEntry, side: Side, field: string): number[] {
  const value = entry[side][field]
  if (!Array.isArray(value) || value.some((item) => typeof item !== 'number'))
    throw new Error(`${entry.id}: ${side}.${field} is no list of numbers`)
  return value as number[]
}

export const input = (entry: PublishedEntry, field: string) => numberOf(entry, 'inputs', field)
export const expected = (entry: PublishedEntry, field: string) => numberOf(entry, 'expected', field)
export const inputs = (entry: PublishedEntry, field: string) => numbersOf(entry, 'inputs', field)
export const expecteds = (entry: PublishedEntry, field: string) => numbersOf(entry, 'expected', field)

/** Within a relative tolerance of the expected value (absolute where that is 0). */
export function expectRelative(actual: number, wanted: number, tolerance: number, what = 'value') {
  const scale = wanted === 0 ? 1 : Math.abs(wanted)
  expect(
    Math.abs(actual - wanted) / scale,
    `${what}: got ${actual}, published ${wanted}, relative tolerance ${tolerance}`,
  ).toBeLessThanOrEqual(tolerance)
}

/** Within an absolute tolerance. */
export function expectAbsolute(actual: number, wanted: number, tolerance: number, what = 'value') {
  expect(
    Math.abs(actual - wanted),
    `${what}: got ${actual}, published ${wanted}, tolerance ${tolerance}`,
  ).toBeLessThanOrEqual(tolerance)
}

/**
 * Where our constant differs from a published value on purpose: the deviation itself is the check, so that neither ours
 * nor the published one can move unseen. `measured` is ours over published, less 1.
 */
export function expectDeviation(actual: number, published: number, measured: number, what = 'deviation') {
  const deviation = actual / published - 1
  expect(
    Math.abs(deviation - measured),
    `${what}: ours ${actual}, published ${published}: deviation ${deviation}, expected ${measured}`,
  ).toBeLessThanOrEqual(0.0006)
}
