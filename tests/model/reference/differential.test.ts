import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { HeatInput } from '#shared/schemas/heat-input'
import { AppError } from '#shared/errors'
import { estimate, replay } from '#shared/heat'
import { arbitraryInput } from '../../support/arbitrary-truck'
import { type ReferenceInput, ReferenceModel, ReferenceRefusal, type Temperatures } from './reference-model'

/**
 * Two implementations of the same equations, written apart, on random trucks. Where they disagree, one of them has
 * misread an equation or lost accuracy. LONGPULL_DIFFERENTIAL_RUNS asks for more trucks (the deep run does).
 */
const RUNS = Number(process.env.LONGPULL_DIFFERENTIAL_RUNS ?? 2)
const SEED = Number(process.env.LONGPULL_DIFFERENTIAL_SEED ?? 20261201)
const STEP_S = 0.5

interface Comparison {
  name: string
  ours: number
  reference: number
  tolerance: number
}

function temperature(name: string, ours: number, reference: number): Comparison {
  return { name, ours, reference, tolerance: 0.1 }
}
function heat(name: string, ours: number, reference: number): Comparison {
  return { name, ours, reference, tolerance: Math.max(5, 0.005 * Math.abs(reference)) }
}
function relative(name: string, ours: number, reference: number, share: number): Comparison {
  return { name, ours, reference, tolerance: share * Math.abs(reference) + 1e-12 }
}
function expectClose(comparisons: Comparison[]) {
  const off = comparisons.filter(
    ({ ours, reference, tolerance }) => !(Math.abs(ours - reference) <= tolerance),
  )
  expect(off).toEqual([])
}

/** The input with no `undefined` to trip over: what came over the wire. */
const asReference = (input: HeatInput) => structuredClone(input) as ReferenceInput

function refusalOf(run: () => unknown): string | undefined {
  try {
    run()
  } catch (error) {
    if (error instanceof AppError || error instanceof ReferenceRefusal) return error.message
    throw error
  }
  return undefined
}

/** No segment longer than five minutes: the second implementation takes small steps. */
function shortened(input: HeatInput): HeatInput {
  const mostS = 300
  const segments = input.duty.segments.map((segment) => {
    if (segment.kind === 'steady' && segment.distanceM !== undefined)
      return { ...segment, distanceM: Math.min(segment.distanceM, mostS * segment.speedMps) }
    return { ...segment, durationS: Math.min(segment.durationS ?? mostS, mostS) }
  })
  return { ...input, duty: { ...input.duty, segments } }
}

const TEMPERATURES = ['sumpC', 'coolerInletC', 'caseC', 'coolantC', 'axleC', 'transferCaseC'] as const

describe('the model against a second implementation of the same equations', () => {
  it('gives the same duty as driven, and the same refusals', () => {
    fc.assert(
      fc.property(arbitraryInput({ maxSegments: 2 }).map(shortened), (input) => {
        const refusal = refusalOf(() => new ReferenceModel(asReference(input)).run(1e9))
        expect(refusalOf(() => estimate(input))).toBe(refusal)
        fc.pre(refusal === undefined)
        const reference = new ReferenceModel(asReference(input))
        const expected = reference.run(STEP_S)
        const answer = estimate(input)
        const heatScale = input.calibration?.heatScale ?? 1
        answer.segments.forEach((segment, index) => {
          const { demand, at, end, ...peaks } = expected.segments[index]!
          const name = (what: string) => `segment ${index} ${what}`
          expect({ gear: segment.gear, locked: segment.locked, held: segment.speedHeld }).toEqual({
            gear: demand.gear,
            locked: demand.locked,
            held: demand.speedHeld,
          })
          expectClose([
            relative(name('speedMps'), segment.speedMps, demand.speed, 1e-4),
            relative(name('engineRpm'), segment.engineRpm, demand.engineRpm, 1e-4),
            relative(name('speedRatio'), segment.speedRatio, demand.speedRatio, 1e-4),
            relative(name('distanceM'), segment.distanceM, demand.speed * segment.durationS, 1e-4),
            heat(name('converterW'), segment.heat.converterW, heatScale * demand.converterW),
            heat(name('gearW'), segment.heat.gearW, heatScale * demand.gearW),
            heat(name('pumpW'), segment.heat.pumpW, heatScale * demand.pumpW),
            heat(name('shiftW'), segment.heat.shiftW, heatScale * demand.shiftW),
            heat(name('axleW'), segment.heat.axleW, demand.axleW),
            heat(name('transferCaseW'), segment.heat.transferCaseW, demand.transferCaseW),
            heat(name('spinW'), segment.heat.spinW, at.heatSpinW),
            temperature(name('peakSumpC'), segment.peakSumpC, peaks.peakSumpC),
            temperature(name('peakCoolerInletC'), segment.peakCoolerInletC, peaks.peakCoolerInletC),
            ...TEMPERATURES.map((key, at) => temperature(name(`end ${key}`), segment.end[key], end[at]!)),
            temperature(name('coolerReturnC'), segment.end.coolerReturnC, at.coolerReturnC),
            heat(name('heatRadiatorW'), segment.end.heatRadiatorW, at.heatRadiatorW),
            heat(name('heatCoolersW'), segment.end.heatCoolersW, at.heatCoolersW),
            relative(name('coolerFlowM3S'), segment.end.coolerFlowM3S, at.coolerFlowM3S, 0.002),
            relative(name('faceVelocityMps'), segment.end.faceVelocityMps, at.faceVelocityMps, 1e-4),
          ])
        })
        expectClose([
          temperature('meanSumpC', answer.meanSumpC, expected.meanSumpC),
          relative('fluidDamage', answer.fluidDamage, expected.fluidDamage, 0.01),
          relative('totalS', answer.totalS, expected.totalS, 1e-4),
        ])
      }),
      { numRuns: RUNS, seed: SEED, endOnFailure: true },
    )
  }, 600_000)

  it('settles where the second implementation settles', () => {
    fc.assert(
      fc.property(arbitraryInput({ maxSegments: 1, kinds: ['steady', 'stopGo', 'idle'] }), (input) => {
        const model = refusalOf(() => new ReferenceModel(asReference(input)).run(1e9))
        fc.pre(model === undefined)
        const reference = new ReferenceModel(asReference(input))
        const segment = reference.input.duty.segments[0]!
        const cold: Temperatures = [20, 20, 20, 60, 20, 20]
        const hot: Temperatures = [150, 160, 150, 115, 150, 150]
        const fromCold = reference.settle(segment, cold)
        const fromHot = reference.settle(segment, hot)
        const sameFromBoth = fromCold.every((value, at) => Math.abs(value - fromHot[at]!) < 0.01)
        fc.pre(sameFromBoth)
        const settled = estimate(input).segments[0]!.equilibrium!
        expectClose(TEMPERATURES.map((key, at) => temperature(key, settled[key], fromCold[at]!)))
      }),
      { numRuns: 2 * RUNS, seed: SEED, endOnFailure: true },
    )
  }, 600_000)

  it('replays a log to the same temperatures', () => {
    const log = fc
      .array(
        fc.record({ change: fc.integer({ min: -150, max: 150 }), grade: fc.integer({ min: -60, max: 80 }) }),
        {
          minLength: 20,
          maxLength: 150,
        },
      )
      .map((samples) => {
        let speed = 12
        const speedMps = samples.map(
          ({ change }) => (speed = Math.min(32, Math.max(0, speed + change / 100))),
        )
        return {
          timeS: samples.map((_, index) => 2 * index),
          speedMps,
          grade: samples.map(({ grade }) => grade / 1000),
        }
      })
    fc.assert(
      fc.property(arbitraryInput({ maxSegments: 1, kinds: ['idle'] }), log, (input, trace) => {
        const reference = new ReferenceModel(asReference(input))
        const expected = reference.replay(trace, STEP_S)
        const answer = replay({ input, trace })
        expect(answer.forceLimitedSamples).toBe(expected.forceLimitedSamples)
        expectClose(
          trace.timeS.flatMap((time, at) => [
            temperature(`sump at ${time} s`, answer.sumpC[at]!, expected.sumpC[at]!),
            temperature(`hot line at ${time} s`, answer.coolerInletC[at]!, expected.coolerInletC[at]!),
            temperature(`coolant at ${time} s`, answer.coolantC[at]!, expected.coolantC[at]!),
          ]),
        )
      }),
      { numRuns: RUNS, seed: SEED, endOnFailure: true },
    )
  }, 600_000)
})
