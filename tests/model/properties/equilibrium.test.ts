import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { estimate } from '#shared/heat'
import type { HeatInput, Segment } from '#shared/schemas/heat-input'
import type { State } from '#shared/heat/types'
import { arbitraryInput } from '../../support/arbitrary-truck'
import {
  airSpeed,
  answered,
  holdsFor,
  onlySegment,
  PROPERTY_TIMEOUT_MS,
  isOil,
  settled,
  settledAsOil,
  withSegments,
  withStart,
} from '../../support/properties'

/** Laws of the state a segment settles at. The formulas here are written from the balances, not taken from the model. */

const settling = (shape: Parameters<typeof arbitraryInput>[0] = {}) =>
  arbitraryInput({ maxSegments: 1, kinds: ['steady', 'stopGo', 'idle'], ...shape })

/** 0.5 % or 5 W, whichever is more: how exact a heat must be. */
function expectHeat(actual: number, wanted: number, scale: number, what: string) {
  expect(Math.abs(actual - wanted), `${what}: ${actual} W against ${wanted} W`).toBeLessThanOrEqual(
    Math.max(5, 0.005 * Math.abs(scale)),
  )
}

/**
 * A bypass that senses the hot line can keep itself open – by oil that the coolant warms, or by oil so cold and slow that its
 * line stays hot – or stay shut: two resting places, and which one a truck reaches depends on where it comes from. Without
 * a bypass there is one.
 */
const hasOneRest = (input: HeatInput) => input.build.cooling.bypass === undefined

const firstSegment = (input: HeatInput): Segment => input.duty.segments[0] as Segment
const underbodyC = ({ build, duty }: HeatInput) => duty.ambientC + (build.cooling.underbodyRiseK ?? 15)
const surfaceTransfer = (speed: number) => 10 + 5.5 * speed ** 0.8

function expectSameState(actual: State, wanted: State, toleranceK: number, what: string) {
  for (const key of ['sumpC', 'coolerInletC', 'caseC', 'coolantC', 'axleC', 'transferCaseC'] as const)
    expect(
      Math.abs(actual[key] - wanted[key]),
      `${what}: ${key} ${actual[key]} against ${wanted[key]}`,
    ).toBeLessThan(toleranceK)
}

describe('at equilibrium', () => {
  it(
    'oil gives off what is made in it, and the coolant what it is given',
    () =>
      holdsFor(250, settling(), (input) => {
        const { segment, state } = settled(input)
        const { heat } = segment
        const made = heat.converterW + heat.gearW + heat.pumpW + heat.shiftW + state.heatSpinW
        expectHeat(state.heatGeneratedW, made, made, 'sum of the sources')
        expectHeat(state.heatCoolersW + state.heatPanCaseW, made, made, 'oil balance')
        const coolers = state.coolerHeatW.reduce((sum, each) => sum + each, 0)
        expectHeat(state.heatCoolersW, coolers, coolers, 'sum of the coolers')
        const tanks = input.build.cooling.coolers.reduce(
          (sum, cooler, index) =>
            sum + (cooler.construction === 'in-tank' ? (state.coolerHeatW[index] ?? NaN) : 0),
          0,
        )
        expectHeat(
          state.heatRadiatorW,
          state.heatEngineToCoolantW + tanks,
          state.heatEngineToCoolantW,
          'coolant balance',
        )
      }),
    PROPERTY_TIMEOUT_MS,
  )

  it(
    'pan, case, axle and transfer case give off what their surface law says',
    () =>
      holdsFor(150, settling(), (input) => {
        const { segment, state } = settled(input)
        const wind = airSpeed(segment.speedMps, firstSegment(input))
        const under = underbodyC(input)
        const { transmission, axle, transferCase } = input.build
        const conductance = surfaceTransfer(0.4 * wind) * (transmission.caseAreaM2 ?? 0.7)
        const caseHeat = 0.6 * conductance * (state.caseC - under)
        expectHeat(
          state.heatPanCaseW,
          0.4 * conductance * (state.sumpC - under) + caseHeat,
          state.heatPanCaseW,
          'pan and case',
        )
        expectHeat(250 * (state.sumpC - state.caseC), caseHeat, caseHeat, 'oil to case')
        expectHeat(
          surfaceTransfer(0.7 * wind) * (axle.surfaceM2 ?? 1.1) * (state.axleC - under),
          segment.heat.axleW,
          segment.heat.axleW,
          'axle',
        )
        expectHeat(
          surfaceTransfer(0.4 * wind) * (transferCase.surfaceM2 ?? 0.4) * (state.transferCaseC - under),
          segment.heat.transferCaseW,
          segment.heat.transferCaseW,
          'transfer case',
        )
      }),
    PROPERTY_TIMEOUT_MS,
  )

  it(
    'the converter is as much hotter than the sump as its heat needs',
    () =>
      holdsFor(150, settling(), (input) => {
        const { segment, state } = settledAsOil(input)
        const { fluid } = input.build.transmission
        const density15 =
          fluid.density15KgM3 ??
          { 'atf-standard': 855, 'atf-low': 850, 'atf-ultra-low': 845 }[fluid.class ?? 'atf-standard']
        const rate = (density15 - 0.62 * (state.sumpC - 15)) * state.coolerFlowM3S * (1800 + 4 * state.sumpC)
        expectHeat(
          rate * (state.coolerInletC - state.sumpC),
          segment.heat.converterW,
          segment.heat.converterW,
          'converter',
        )
        expectHeat(
          rate * (state.coolerInletC - state.coolerReturnC),
          state.heatCoolersW,
          state.heatCoolersW,
          'coolers',
        )
      }),
    PROPERTY_TIMEOUT_MS,
  )

  it(
    'is where an endless segment ends, from cold and from hot',
    () =>
      holdsFor(120, settling(), (input) => {
        const segment = firstSegment(input)
        const endless = { ...segment, durationS: 900_000 }
        Reflect.deleteProperty(endless, 'distanceM')
        const ends = [-30, 130].map((sumpC) => {
          const started = withStart(withSegments(input, [endless]), {
            sumpC,
            coolantC: Math.min(sumpC, 112),
            axleC: sumpC,
          })
          return onlySegment(answered(started, { stepS: 100_000 }))
        })
        const [cold, hot] = ends as [(typeof ends)[0], (typeof ends)[0]]
        for (const run of [cold, hot]) {
          if (run.equilibrium === null) throw new Error('no equilibrium')
          // Oil so cold that it hardly flows, under a converter far beyond any oil, swings for ever instead of settling.
          fc.pre(isOil(run.equilibrium) && isOil(run.end))
          // Nor does a converter settle in 900,000 s whose oil all but stands: its time constant is C/(ρ q cp).
          fc.pre((input.build.converter.heatCapacityJK ?? 12_000) / (1.7e6 * run.end.coolerFlowM3S) < 50_000)
          expectSameState(run.end, run.equilibrium, 0.1, 'end and equilibrium')
        }
        if (hasOneRest(input)) expectSameState(cold.end, hot.end, 0.1, 'cold and hot start')
      }),
    PROPERTY_TIMEOUT_MS,
  )

  it(
    'does not depend on where the truck comes from, unless a bypass remembers it',
    () =>
      holdsFor(
        200,
        fc.record({
          input: settling(),
          sumpC: fc.constantFrom(-25, 20, 80, 140),
          coolantC: fc.constantFrom(-25, 60, 95, 110),
        }),
        ({ input, sumpC, coolantC }) => {
          const here = settledAsOil(input)
          const there = settledAsOil(withStart(input, { sumpC, coolantC, axleC: 20 }))
          if (hasOneRest(input))
            expectSameState(there.state, here.state, 0.05, `from ${sumpC} and ${coolantC}`)
        },
      ),
    PROPERTY_TIMEOUT_MS,
  )
})

describe('along the cooler loop', () => {
  it(
    'oil leaves each cooler, or parallel group, between its inlet and its sinks',
    () =>
      holdsFor(250, arbitraryInput({ minCoolers: 1, maxSegments: 2 }), (input) => {
        const answer = answered(input)
        const { cooling, transmission } = input.build
        const { fluid } = transmission
        answer.segments.forEach((segment, at) => {
          for (const state of [segment.end, segment.equilibrium]) {
            if (state === null || !isOil(state)) continue
            const wind = airSpeed(segment.speedMps, input.duty.segments[at] as Segment)
            const density15 =
              fluid.density15KgM3 ??
              { 'atf-standard': 855, 'atf-low': 850, 'atf-ultra-low': 845 }[fluid.class ?? 'atf-standard']
            const bypass = cooling.bypass
            const open =
              bypass === undefined
                ? 1
                : Math.min(
                    1,
                    Math.max(0, (state.coolerInletC - bypass.openC) / (bypass.fullC - bypass.openC)),
                  )
            const rate =
              open * (density15 - 0.62 * (state.sumpC - 15)) * state.coolerFlowM3S * (1800 + 4 * state.sumpC)
            const stackC = input.duty.ambientC + 8 * Math.max(0, 1 - wind / 8)
            const pressure = 101325 * (1 - 2.25577e-5 * input.duty.altitudeM) ** 5.25588
            const density = pressure / (287.05 * (input.duty.ambientC + 273.15))
            const condenserW = input.duty.airConditioning === true ? (cooling.condenserW ?? 6000) : 0
            const behindC =
              stackC + condenserW / (density * cooling.radiator.faceAreaM2 * state.faceVelocityMps * 1006)
            const sinkOf = (index: number) => {
              const { position } = cooling.coolers[index] as (typeof cooling.coolers)[0]
              if (position === 'radiator-tank') return state.radiatorOutC
              if (position === 'remote') return underbodyC(input)
              return position === 'behind-condenser' ? behindC : stackC
            }
            let oilC = state.coolerInletC
            for (let first = 0; first < cooling.coolers.length;) {
              let last = first + 1
              while (cooling.coolers[last]?.parallelWithPrevious === true) last++
              const members = Array.from({ length: last - first }, (_, offset) => first + offset)
              const heats = members.map((index) => state.coolerHeatW[index] ?? NaN)
              const heat = heats.reduce((sum, each) => sum + each, 0)
              if (rate === 0) expect(heat).toBeCloseTo(0, 9)
              else {
                const reach = members.map(sinkOf)
                const outC = oilC - heat / rate
                const slack = 1e-6 * (1 + Math.abs(oilC))
                expect(outC).toBeGreaterThanOrEqual(Math.min(oilC, ...reach) - slack)
                expect(outC).toBeLessThanOrEqual(Math.max(oilC, ...reach) + slack)
                members.forEach((index, member) => {
                  // Each cooler moves heat toward its own sink.
                  const drop = oilC - sinkOf(index)
                  if (Math.abs(drop) > 1e-6)
                    expect((heats[member] ?? NaN) * drop).toBeGreaterThanOrEqual(-1e-9)
                })
                oilC = outC
              }
              first = last
            }
            expect(
              rate === 0 ? state.coolerInletC : open * oilC + (1 - open) * state.coolerInletC,
            ).toBeCloseTo(state.coolerReturnC, 4)
          }
        })
      }),
    PROPERTY_TIMEOUT_MS,
  )
})

describe('a stall', () => {
  it('has no equilibrium', () =>
    holdsFor(30, arbitraryInput({ kinds: ['stall'] }), (input) => {
      for (const segment of estimate(input).segments) expect(segment.equilibrium).toBeNull()
    }))
})
