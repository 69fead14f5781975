import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { replay } from '#shared/heat'
import type { HeatInput, Segment } from '#shared/schemas/heat-input'
import type { Estimate, SegmentResult, State } from '#shared/heat/types'
import { arbitraryInput, evenly } from '../../support/arbitrary-truck'
import {
  answered,
  answerOf,
  holdsFor,
  isOil,
  PROPERTY_TIMEOUT_MS,
  withSegments,
} from '../../support/properties'

/** Laws of the drive in time. */

/** Each of two runs may be 0.1 K off the exact solution; two of them may be that far apart on either side [K]. */
const APART_K = 0.2

const TEMPERATURES = ['sumpC', 'coolerInletC', 'caseC', 'coolantC', 'axleC', 'transferCaseC'] as const

function expectSameEnd(actual: State, wanted: State, toleranceK: number) {
  for (const key of TEMPERATURES)
    expect(
      Math.abs(actual[key] - wanted[key]),
      `${key}: ${actual[key]} against ${wanted[key]}`,
    ).toBeLessThanOrEqual(toleranceK)
}

const last = (answer: Estimate) => answer.segments.at(-1) as SegmentResult
const firstSegment = (input: HeatInput) => input.duty.segments[0] as Segment

/** A segment of a given length in time, whatever it said before. */
function lasting(segment: Segment, durationS: number): Segment {
  const made = { ...segment, durationS }
  Reflect.deleteProperty(made, 'distanceM')
  return made
}

const single = arbitraryInput({ maxSegments: 1 })

describe('the drive in time', () => {
  it(
    'splitting a segment changes nothing',
    () =>
      holdsFor(150, fc.record({ input: single, share: evenly(0.02, 0.98) }), ({ input, share }) => {
        const whole = answered(input)
        const { durationS } = last(whole)
        const segment = firstSegment(input)
        const split = answered(
          withSegments(input, [
            lasting(segment, durationS * share),
            lasting(segment, durationS * (1 - share)),
          ]),
        )
        expectSameEnd(last(split).end, last(whole).end, APART_K)
        expect(Math.abs(split.peakSumpC - whole.peakSumpC)).toBeLessThanOrEqual(APART_K)
        expect(Math.abs(split.peakCoolerInletC - whole.peakCoolerInletC)).toBeLessThanOrEqual(APART_K)
        expect(Math.abs(split.meanSumpC - whole.meanSumpC)).toBeLessThanOrEqual(APART_K)
        // Beyond any oil its ageing rate doubles every second or so; no promise there.
        if (whole.peakCoolerInletC < 300)
          expect(Math.abs(split.fluidDamage / whole.fluidDamage - 1)).toBeLessThanOrEqual(0.01)
        expect(split.totalS).toBeCloseTo(whole.totalS, 6)
      }),
    PROPERTY_TIMEOUT_MS,
  )

  it(
    'a distance is its duration at the speed driven',
    () =>
      holdsFor(150, arbitraryInput({ maxSegments: 1, kinds: ['steady'] }), (input) => {
        const segment = firstSegment(input)
        const byTime = answered(withSegments(input, [lasting(segment, 700)]))
        const far: Segment = { ...segment, distanceM: last(byTime).distanceM } as Segment
        Reflect.deleteProperty(far, 'durationS')
        const byDistance = answered(withSegments(input, [far]))
        expect(last(byDistance).durationS).toBeCloseTo(700, 6)
        expect(last(byDistance).distanceM).toBeCloseTo(last(byTime).speedMps * 700, 4)
        expectSameEnd(last(byDistance).end, last(byTime).end, 1e-4)
      }),
    PROPERTY_TIMEOUT_MS,
  )

  it(
    'what is made and not given off is stored',
    () =>
      holdsFor(30, fc.record({ input: single, lengthS: evenly(60, 600) }), ({ input, lengthS }) => {
        // One segment in many pieces: the state at each seam gives the heat flows, the trapezoid rule their sums.
        const pieces = 200
        const segment = lasting(firstSegment(input), lengthS / pieces)
        const first = lasting(segment, 0.01)
        const answer = answered(withSegments(input, [first, ...Array<Segment>(pieces).fill(segment)]))
        const states = answer.segments.map(({ end }) => end)
        fc.pre(states.every(isOil))
        const { fluid, fluidVolumeM3, dryMassKg } = input.build.transmission
        const density15 =
          fluid.density15KgM3 ??
          { 'atf-standard': 855, 'atf-low': 850, 'atf-ultra-low': 845 }[fluid.class ?? 'atf-standard']
        // ∫ (ρ15 - 0.62 (T - 15)) (1800 + 4 T) dT, from the two property lines.
        const a = density15 + 0.62 * 15
        const oilEnergy = (t: number) =>
          fluidVolumeM3 * (1800 * a * t + ((4 * a - 0.62 * 1800) * t ** 2) / 2 - (0.62 * 4 * t ** 3) / 3)
        const stored = (state: State) =>
          oilEnergy(state.sumpC) +
          (input.build.converter.heatCapacityJK ?? 12_000) * state.coolerInletC +
          650 * dryMassKg * state.caseC
        const coolantStored = (state: State) =>
          (input.build.cooling.coolantHeatCapacityJK ?? 150_000) * state.coolantC
        const tanks = (state: State) =>
          input.build.cooling.coolers.reduce(
            (sum, cooler, index) =>
              sum + (cooler.construction === 'in-tank' ? (state.coolerHeatW[index] ?? NaN) : 0),
            0,
          )
        let oilJ = 0
        let coolantJ = 0
        let passedJ = 0
        for (let index = 1; index < states.length; index++) {
          const dt = answer.segments[index]?.durationS ?? NaN
          const net = (state: State) => state.heatGeneratedW - state.heatCoolersW - state.heatPanCaseW
          const netCoolant = (state: State) => state.heatEngineToCoolantW + tanks(state) - state.heatRadiatorW
          const [before, now] = [states[index - 1] as State, states[index] as State]
          oilJ += ((net(before) + net(now)) / 2) * dt
          coolantJ += ((netCoolant(before) + netCoolant(now)) / 2) * dt
          passedJ += (Math.abs(now.heatGeneratedW) + Math.abs(now.heatCoolersW)) * dt
        }
        const [start, end] = [states[0] as State, states.at(-1) as State]
        // 0.1 K of what stores the heat, or 0.5 % of what passed through.
        const slack = (capacity: number, passed: number) => Math.max(0.1 * capacity, 0.005 * passed)
        expect(Math.abs(stored(end) - stored(start) - oilJ)).toBeLessThanOrEqual(
          slack(12_000 + 650 * dryMassKg + fluidVolumeM3 * 1.7e6, passedJ),
        )
        expect(Math.abs(coolantStored(end) - coolantStored(start) - coolantJ)).toBeLessThanOrEqual(
          slack(150_000, (start.heatEngineToCoolantW + end.heatRadiatorW) * lengthS),
        )
      }),
    PROPERTY_TIMEOUT_MS,
  )

  it(
    'a log of one constant drive replays as the steady segment',
    () =>
      holdsFor(80, arbitraryInput({ maxSegments: 1, kinds: ['steady'] }), (input) => {
        const segment = firstSegment(input) as Segment & { kind: 'steady' }
        const steady = answered(withSegments(input, [lasting(segment, 600)]), { stepS: 10 })
        const driven = last(steady)
        fc.pre(driven.speedHeld && isOil(driven.end) && steady.peakCoolerInletC < 300)
        const timeS = Array.from({ length: 601 }, (_, second) => 1000 + second)
        const trace = {
          timeS,
          speedMps: timeS.map(() => segment.speedMps),
          grade: timeS.map(() => segment.grade),
          surface: segment.surface ?? ('pavement' as const),
          ...(segment.headwindMps === undefined ? {} : { headwindMps: segment.headwindMps }),
          ...(segment.range === undefined ? {} : { range: segment.range }),
          ...(segment.topGear === undefined ? {} : { topGear: segment.topGear }),
        }
        // A trace names a surface, not a coefficient.
        fc.pre(segment.rollingResistance === undefined)
        const answer = replay({ input, trace })
        expect(answer.forceLimitedSamples).toBe(0)
        expect(answer.timeS).toEqual(timeS)
        expect(Math.abs((answer.sumpC.at(-1) ?? NaN) - driven.end.sumpC)).toBeLessThanOrEqual(APART_K)
        expect(Math.abs((answer.coolerInletC.at(-1) ?? NaN) - driven.end.coolerInletC)).toBeLessThanOrEqual(
          APART_K,
        )
        expect(Math.abs((answer.coolantC.at(-1) ?? NaN) - driven.end.coolantC)).toBeLessThanOrEqual(APART_K)
        steady.series.timeS.forEach((seriesS, index) => {
          const sample = Math.round(seriesS)
          expect(
            Math.abs((answer.sumpC[sample] ?? NaN) - (steady.series.sumpC[index] ?? NaN)),
            `sump at ${seriesS} s`,
          ).toBeLessThanOrEqual(APART_K)
        })
      }),
    PROPERTY_TIMEOUT_MS,
  )

  it(
    'the series has a point at every segment end, at most the step between, and the peaks lie on or above it',
    () =>
      holdsFor(
        100,
        fc.record({ input: arbitraryInput(), stepS: fc.constantFrom(1, 10) }),
        ({ input, stepS }) => {
          const answer = answered(input, { stepS })
          const { series, segments } = answer
          expect(series.timeS[0]).toBe(0)
          const gaps = series.timeS.slice(1).map((timeS, index) => timeS - (series.timeS[index] ?? NaN))
          expect(Math.min(...gaps)).toBeGreaterThanOrEqual(0)
          expect(Math.max(...gaps)).toBeLessThanOrEqual(stepS * (1 + 1e-9))
          let endS = 0
          for (const segment of segments) {
            endS += segment.durationS
            const at = series.timeS.findIndex((timeS) => Math.abs(timeS - endS) < 1e-6)
            expect(at, `a point at ${endS} s`).toBeGreaterThan(0)
            expect(series.sumpC[at]).toBeCloseTo(segment.end.sumpC, 9)
          }
          expect(series.timeS.at(-1)).toBeCloseTo(answer.totalS, 6)
          expect(answer.peakSumpC).toBeGreaterThanOrEqual(Math.max(...series.sumpC) - 0.02)
          expect(answer.peakCoolerInletC).toBeGreaterThanOrEqual(Math.max(...series.coolerInletC) - 0.02)
          expect(answer.peakSumpC).toBeCloseTo(Math.max(...segments.map(({ peakSumpC }) => peakSumpC)), 9)
        },
      ),
    PROPERTY_TIMEOUT_MS,
  )

  it(
    'fluid damage is the rule summed over the series, and the change intervals follow from it',
    () =>
      holdsFor(40, arbitraryInput({ maxSegments: 2 }), (input) => {
        const answer = answered(input, { stepS: 1 })
        fc.pre(answer.peakCoolerInletC < 300)
        const share = input.build.converter.oilShare ?? 0.35
        const rate = (oilC: number) =>
          2 ** ((Math.max(oilC, 79.444) - 79.444) / 11.111) / (160_934_400 / 15.6464)
        const { timeS, sumpC, coolerInletC } = answer.series
        let damage = 0
        let sumpOnly = 0
        let mean = 0
        for (let index = 1; index < timeS.length; index++) {
          const dt = (timeS[index] ?? NaN) - (timeS[index - 1] ?? NaN)
          // Ten midpoints on the straight line between two points: a hot line may rise by tens of kelvin in a second.
          for (let place = 0.05; place < 1; place += 0.1) {
            const between = (column: number[]) =>
              (1 - place) * (column[index - 1] ?? NaN) + place * (column[index] ?? NaN)
            const [sump, converter] = [between(sumpC), between(coolerInletC)]
            damage += (dt / 10) * ((1 - share) * rate(sump) + share * rate(converter))
            sumpOnly += (dt / 10) * rate(sump)
            mean += (dt / 10) * sump
          }
        }
        expect(Math.abs(answer.fluidDamage / damage - 1)).toBeLessThan(0.01)
        expect(Math.abs(answer.fluidDamageSumpOnly / sumpOnly - 1)).toBeLessThan(0.01)
        expect(Math.abs(answer.meanSumpC - mean / answer.totalS)).toBeLessThan(0.1)
        expect(answer.cyclesToFluidChange * answer.fluidDamage).toBeCloseTo(1, 9)
        expect((answer.hoursToFluidChange * 3600 * answer.fluidDamage) / answer.totalS).toBeCloseTo(1, 9)
        if (answer.distanceM === 0) expect(answer.distanceToFluidChangeM).toBeNull()
        else
          expect(
            ((answer.distanceToFluidChangeM ?? NaN) * answer.fluidDamage) / answer.distanceM,
          ).toBeCloseTo(1, 9)
        expect((answer.wallChart.atPeakM * rate(answer.peakSumpC)) / 15.6464).toBeCloseTo(1, 6)
      }),
    PROPERTY_TIMEOUT_MS,
  )
})

describe('replay', () => {
  it(
    'does not care where the clock starts',
    () =>
      holdsFor(
        20,
        fc.record({
          input: single,
          samples: fc.array(fc.record({ speed: evenly(0, 30), grade: evenly(-0.05, 0.06) }), {
            minLength: 5,
            maxLength: 80,
          }),
        }),
        ({ input, samples }) => {
          const run = (offset: number) =>
            answerOf(() =>
              replay({
                input,
                trace: {
                  timeS: samples.map((_, index) => offset + 2 * index),
                  speedMps: samples.map(({ speed }) => speed),
                  grade: samples.map(({ grade }) => grade),
                },
              }),
            )
          const [zero, late] = [run(0), run(86_400)]
          expect(late?.sumpC).toEqual(zero?.sumpC)
          expect(late?.forceLimitedSamples).toBe(zero?.forceLimitedSamples)
        },
      ),
    PROPERTY_TIMEOUT_MS,
  )
})
