import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { adviseInFull, countRuns, explain, EXPLAIN_IDS, say } from '../../../shared/advice'
import type { AdviceRequest } from '../../../shared/advice/types'
import { createDefaultLimits } from '../../../shared/build-sheet/limits'
import { flattenBuild } from '../../../shared/build-sheet/sheet'
import type { HeatInput } from '../../../shared/schemas/heat-input'
import { formatQuantity } from '../../../shared/units/display'
import { computeAnswer } from '../../../shared/workbench/answer'
import { arbitraryExtreme } from '../../support/arbitrary-extreme'
import { arbitraryInput } from '../../support/arbitrary-truck'

/** A drawn truck as the workbench would hold it. */
function requestOf(input: HeatInput, lockupSeen: 'yes' | 'unknown'): AdviceRequest {
  const base = {
    sheet: { archetype: 'drawn', values: flattenBuild(input.build, 'typical') },
    control: {
      generationsMatch: 'unknown',
      lockupCommand: 'unknown',
      loadSignal: 'unknown',
      brakeSwitchWired: 'unknown',
      lockupSeen,
    },
    limits: createDefaultLimits(),
    scenario: { load: input.load ?? {}, duty: input.duty },
  } as const
  return {
    ...base,
    answers: computeAnswer({ ...base, setup: { id: 'a', name: 'A', change: {} }, others: [] }),
  }
}

/** Every number in a value, however deep. */
function numbersIn(value: unknown): number[] {
  if (typeof value === 'number') return [value]
  if (value === null || typeof value !== 'object') return []
  return Object.values(value).flatMap(numbersIn)
}

const lockup = fc.constantFrom('yes', 'unknown')

describe('advice on any truck', () => {
  it.each([
    ['usual', arbitraryInput()],
    ['extreme', arbitraryExtreme()],
  ])('holds no number that is none and stays within its budget: %s', (_, drawn) => {
    fc.assert(
      fc.property(drawn, lockup, (input, lockupSeen) => {
        const request = requestOf(input, lockupSeen)
        const all = adviseInFull(request)
        expect(countRuns(request)).toBeLessThanOrEqual(15)
        for (const number of numbersIn(all)) expect(Number.isFinite(number)).toBe(true)
        for (const { title, text } of all)
          for (const sentence of [title, text])
            expect(say(sentence, (si, quantity) => formatQuantity(si, quantity, 'us'))).not.toMatch(
              /undefined|NaN|–/,
            )
      }),
      { numRuns: 12 },
    )
  })

  it('explains every number of it', () => {
    fc.assert(
      fc.property(arbitraryInput(), (input) => {
        const request = requestOf(input, 'yes')
        if (request.answers.kind === 'refusal') return
        for (const id of EXPLAIN_IDS) {
          const said = explain(id, { ...request, answers: request.answers })
          for (const number of numbersIn(said)) expect(Number.isFinite(number)).toBe(true)
        }
      }),
      { numRuns: 5 },
    )
  })
})
