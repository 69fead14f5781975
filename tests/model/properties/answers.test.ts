import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { estimate, replay, sizing, sweep } from '#shared/heat'
import { HeatInputSchema, type HeatInput } from '#shared/schemas/heat-input'
import { arbitraryInput, evenly } from '../../support/arbitrary-truck'
import { arbitraryExtreme } from '../../support/arbitrary-extreme'
import { answerOf, holdsFor, PROPERTY_TIMEOUT_MS } from '../../support/properties'

/** Whatever the schema accepts gets finite numbers or a refusal by name, and gets them soon. */

/** Paths of everything in an answer that is a number but not a finite one. */
function notFinite(value: unknown, path = ''): string[] {
  if (typeof value === 'number') return Number.isFinite(value) ? [] : [`${path} = ${value}`]
  if (typeof value !== 'object' || value === null) return []
  return Object.entries(value).flatMap(([key, item]) => notFinite(item, path === '' ? key : `${path}.${key}`))
}

/** Milliseconds a call may take on a machine that is busy with other tests. */
const PATIENCE_MS = 3000

function timed<T>(call: () => T): T {
  const start = performance.now()
  const answer = call()
  expect(performance.now() - start, 'milliseconds').toBeLessThan(PATIENCE_MS)
  return answer
}

function expectSoundEstimate(input: HeatInput) {
  const before = JSON.stringify(input)
  const answer = timed(() => answerOf(() => estimate(input)))
  expect(JSON.stringify(input), 'the input as typed').toBe(before)
  if (answer === undefined) return
  expect(notFinite(answer)).toEqual([])
  expect(answer.segments).toHaveLength(input.duty.segments.length)
  for (const column of Object.values(answer.series)) expect(column).toHaveLength(answer.series.timeS.length)
  answer.segments.forEach((segment, index) => {
    expect(segment.kind).toBe(input.duty.segments[index]?.kind)
    expect(segment.equilibrium === null).toBe(segment.kind === 'stall')
    expect(segment.end.coolerHeatW).toHaveLength(input.build.cooling.coolers.length)
    expect(segment.peakSumpC).toBeGreaterThanOrEqual(segment.end.sumpC - 1e-9)
    expect(segment.peakCoolerInletC).toBeGreaterThanOrEqual(segment.end.coolerInletC - 1e-9)
  })
  expect(answer.fluidDamage).toBeGreaterThan(0)
}

describe('any valid input', () => {
  it('is a drawn truck that the schema accepts', () => {
    holdsFor(300, arbitraryInput(), (input) => {
      const parsed = HeatInputSchema.safeParse(input)
      expect(parsed.error?.issues ?? []).toEqual([])
    })
  })

  it(
    'gets a sound estimate or a refusal by name',
    () => holdsFor(250, arbitraryInput(), expectSoundEstimate),
    PROPERTY_TIMEOUT_MS,
  )

  it(
    'gets one even where single numbers are at the ends of their ranges',
    () => holdsFor(250, arbitraryExtreme(), expectSoundEstimate),
    PROPERTY_TIMEOUT_MS,
  )

  it(
    'gets a sound sweep',
    () =>
      holdsFor(
        40,
        fc.record({
          input: arbitraryInput({ maxSegments: 1 }),
          speedMps: evenly(3, 33),
          grades: fc.array(evenly(-0.08, 0.3), { minLength: 1, maxLength: 6 }),
          climb: fc.option(fc.record({ distanceM: evenly(200, 20_000) }), { nil: undefined }),
        }),
        ({ climb, ...request }) => {
          const answer = timed(() =>
            answerOf(() => sweep({ ...request, ...(climb === undefined ? {} : { climb }) })),
          )
          if (answer === undefined) return
          expect(notFinite(answer)).toEqual([])
          expect(answer.points.map(({ grade }) => grade)).toEqual(request.grades)
        },
      ),
    PROPERTY_TIMEOUT_MS,
  )

  it(
    'gets a sound sizing or a refusal by name',
    () =>
      holdsFor(
        40,
        fc.record({
          input: arbitraryInput({ maxSegments: 2, maxCoolers: 2, kinds: ['steady', 'stopGo', 'idle'] }),
          construction: fc.constantFrom('stacked-plate' as const, 'plate-fin' as const, 'tube-fin' as const),
          position: fc.constantFrom(
            'ahead-of-condenser' as const,
            'behind-condenser' as const,
            'remote' as const,
          ),
          targets: fc.oneof(
            fc.record({ sumpC: evenly(60, 130) }),
            fc.record({ coolerInletC: evenly(80, 160) }),
            fc.record({ sumpC: evenly(60, 130), coolerInletC: evenly(80, 160) }),
          ),
          basis: fc.constantFrom('equilibrium' as const, 'peak' as const),
        }),
        (request) => {
          const answer = timed(() => answerOf(() => sizing(request)))
          if (answer === undefined) return
          expect(notFinite(answer)).toEqual([])
          expect(answer.faceAreaM2).toBeGreaterThanOrEqual(0)
          expect(answer.faceAreaM2).toBeLessThanOrEqual(0.12)
        },
      ),
    PROPERTY_TIMEOUT_MS,
  )

  it(
    'gets a sound replay of any drive',
    () =>
      holdsFor(
        40,
        fc.record({
          input: arbitraryInput({ maxSegments: 1 }),
          samples: fc.array(
            fc.record({ step: evenly(0.5, 8), speed: evenly(0, 33), grade: evenly(-0.1, 0.15) }),
            { minLength: 2, maxLength: 120 },
          ),
          logged: fc.constantFrom('nothing' as const, 'altitude' as const, 'engine' as const),
          rpm: evenly(0, 5000),
        }),
        ({ input, samples, logged, rpm }) => {
          const gears = input.build.transmission.gears.length
          let time = 0
          let height = 300
          const timeS = samples.map(({ step }) => (time += step))
          const altitudeM = samples.map(({ speed, grade, step }) => (height += speed * grade * step))
          const speedMps = samples.map(({ speed }) => speed)
          const trace = {
            timeS,
            speedMps,
            ...(logged === 'altitude' ? { altitudeM } : { grade: samples.map(({ grade }) => grade) }),
            ...(logged === 'engine'
              ? {
                  engineRpm: speedMps.map((speed) => rpm * (0.3 + speed / 40)),
                  gear: speedMps.map((speed) => Math.min(gears, 1 + Math.floor(speed / 8))),
                }
              : {}),
          }
          const answer = timed(() => answerOf(() => replay({ input, trace })))
          if (answer === undefined) return
          expect(notFinite(answer)).toEqual([])
          expect(answer.timeS).toHaveLength(samples.length)
          expect(answer.sumpC).toHaveLength(samples.length)
          expect(answer.forceLimitedSamples).toBeLessThanOrEqual(samples.length)
        },
      ),
    PROPERTY_TIMEOUT_MS,
  )
})
