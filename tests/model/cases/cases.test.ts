import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { AppError } from '../../../shared/errors'
import { estimate, replay, sizing, sweep } from '../../../shared/heat'
import {
  EstimateRequestSchema,
  ReplayRequestSchema,
  SizingRequestSchema,
  SweepRequestSchema,
} from '../../../shared/schemas/estimate'

/** Every number of the reference solutions beside this file; see README.md there. */

type Json = string | number | boolean | null | Json[] | { [key: string]: Json }
type JsonObject = { [key: string]: Json }

const load = (name: string) =>
  JSON.parse(readFileSync(new URL(`./${name}.json`, import.meta.url), 'utf8')) as Json

/** How far a number may lie from its expected value. */
function toleranceOf(path: string, expected: number): number {
  const field = path.split('.').findLast((part) => !/^\d+$/.test(part)) ?? ''
  const size = Math.abs(expected)
  if (/C$/.test(field)) return 0.1
  if (/W$/.test(field)) return Math.max(5, 0.005 * size)
  if (/amage|FluidChange|^at(Mean|Peak)M$/.test(field)) return 0.01 * size
  return Math.max(1e-3 * size, 5e-8)
}

/** Walks everything expected and lists what differs; counts the numbers it looked at. */
function compare(
  expected: Json,
  actual: unknown,
  path: string,
  found: { misses: string[]; numbers: number },
) {
  if (typeof expected === 'number') {
    found.numbers++
    const close = typeof actual === 'number' && Math.abs(actual - expected) <= toleranceOf(path, expected)
    if (!close) found.misses.push(`${path}: ${String(actual)} instead of ${expected}`)
  } else if (expected !== null && typeof expected === 'object') {
    if (Array.isArray(expected) && (!Array.isArray(actual) || actual.length !== expected.length))
      found.misses.push(`${path}: another length`)
    for (const [key, value] of Object.entries(expected))
      compare(value, (actual as Record<string, unknown> | undefined)?.[key], `${path}.${key}`, found)
  } else if (expected !== actual) found.misses.push(`${path}: ${String(actual)} instead of ${expected}`)
}

function expectSame(expected: Json, actual: unknown, atLeast: number) {
  const found = { misses: [] as string[], numbers: 0 }
  compare(expected, actual, '', found)
  expect(found.misses).toEqual([])
  expect(found.numbers).toBeGreaterThanOrEqual(atLeast)
}

describe.each(['highway-tow', 'hot-town', 'low-range-trail'])('%s', (name) => {
  const truck = load(name) as JsonObject
  const input = truck.input as JsonObject
  const part = (key: string) => truck[key] as JsonObject

  it('estimate', () => {
    expectSame(part('estimate'), estimate(EstimateRequestSchema.parse(input)), 150)
  })

  it.each(['sweep', 'climb'])('%s over grade', (key) => {
    const request = SweepRequestSchema.parse({ input, ...(part(key).request as JsonObject) })
    expectSame(part(key).points as Json, sweep(request).points, 40)
  })

  it('sizing', () => {
    const request = SizingRequestSchema.parse({ input, ...(part('sizing').request as JsonObject) })
    expectSame(part('sizing').answer as Json, sizing(request), 3)
  })

  it('replay', () => {
    const request = ReplayRequestSchema.parse({ input, trace: part('replay').trace })
    expectSame(part('replay').answer as Json, replay(request), 1200)
  })
})

describe('corners', () => {
  const corners = load('corners') as JsonObject[]

  it('are 28', () => expect(corners).toHaveLength(28))

  it.each(corners.map((corner) => [corner.name as string, corner] as const))('%s', (_name, corner) => {
    const input = EstimateRequestSchema.parse(corner.input)
    if (corner.error === undefined) return expectSame(corner.estimate as Json, estimate(input), 40)
    let refusal: unknown
    try {
      estimate(input)
    } catch (error) {
      refusal = error
    }
    expect(refusal).toBeInstanceOf(AppError)
    expect((refusal as AppError).message).toBe(corner.error)
    expect((refusal as AppError).status).toBe(422)
    expect((refusal as AppError).details.issues?.[0]?.path).toMatch(
      /^(duty\.segments\.0|build\.cooling\.coolers\.1\.rating)$/,
    )
  })
})
