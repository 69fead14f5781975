import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { AirCooler, Cooler, HeatInput } from '#shared/schemas/heat-input'
import { arbitraryInput, evenly } from '../../support/arbitrary-truck'
import { holdsFor, PROPERTY_TIMEOUT_MS, settledAsOil } from '../../support/properties'

/**
 * Which way things go. Only what is a law for every truck is here. Not laws, and so not asserted: that the sump falls with
 * more flow, a wider line, altitude, speed or a better cooler whose sink is the warmer; that a tiny cooler in series cools;
 * that the hot line rises with the heat or with the day (warmer oil is thinner, flows faster and carries the converter's
 * heat off at a smaller difference); that a hotter day or a blocked stack heats oil whose tank cooler it gives more coolant, by opening the thermostat.
 */

/** Rounding of two equilibria solved apart [K]. */
const SLACK_K = 0.02

const settling = (shape: Parameters<typeof arbitraryInput>[0] = {}) =>
  arbitraryInput({ maxSegments: 1, kinds: ['steady', 'stopGo', 'idle'], ...shape })

type Cooling = HeatInput['build']['cooling']

function withCooling(input: HeatInput, change: Partial<Cooling>): HeatInput {
  return { ...input, build: { ...input.build, cooling: { ...input.build.cooling, ...change } } }
}

function withCalibration(input: HeatInput, change: HeatInput['calibration']): HeatInput {
  return { ...input, calibration: { ...input.calibration, ...change } }
}

function withoutBypass(input: HeatInput): HeatInput {
  const cooling = { ...input.build.cooling }
  delete cooling.bypass
  return { ...input, build: { ...input.build, cooling } }
}

const hasTank = (input: HeatInput) =>
  input.build.cooling.coolers.some(({ construction }) => construction === 'in-tank')

describe('equilibrium', () => {
  it(
    'has a hotter sump with more heat, where no bypass answers it',
    () =>
      holdsFor(
        150,
        fc.record({ input: settling({ bypass: false }), more: evenly(1.05, 1.6) }),
        ({ input, more }) => {
          const scale = input.calibration?.heatScale ?? 1
          const before = settledAsOil(input).state
          const after = settledAsOil(withCalibration(input, { heatScale: scale * more })).state
          expect(after.sumpC).toBeGreaterThanOrEqual(before.sumpC - SLACK_K)
        },
      ),
    PROPERTY_TIMEOUT_MS,
  )

  it(
    'has a hotter sump on a hotter day, where the gear stays and no bypass answers it',
    () =>
      holdsFor(
        150,
        fc.record({ input: settling({ bypass: false }), rise: evenly(2, 20) }),
        ({ input, rise }) => {
          const before = settledAsOil(input)
          const after = settledAsOil({
            ...input,
            duty: { ...input.duty, ambientC: input.duty.ambientC + rise },
          })
          fc.pre(after.segment.gear === before.segment.gear && after.segment.locked === before.segment.locked)
          fc.pre(after.segment.speedHeld && before.segment.speedHeld)
          fc.pre(before.state.thermostatOpen === 1 || !hasTank(input))
          expect(after.state.sumpC).toBeGreaterThanOrEqual(before.state.sumpC - SLACK_K)
        },
      ),
    PROPERTY_TIMEOUT_MS,
  )

  it(
    'is hotter behind a blocked stack, where every cooler cools',
    () =>
      holdsFor(
        150,
        fc.record({ input: settling({ bypass: false }), blockedFraction: evenly(0.05, 0.9) }),
        ({ input, blockedFraction }) => {
          const { stack } = input.build.cooling
          const clean = settledAsOil(withCooling(input, { stack: { ...stack, blockedFraction: 0 } })).state
          const blocked = settledAsOil(withCooling(input, { stack: { ...stack, blockedFraction } })).state
          expect(blocked.coolantC).toBeGreaterThanOrEqual(clean.coolantC - SLACK_K)
          fc.pre(clean.coolerHeatW.every((heat) => heat >= 0))
          fc.pre(clean.thermostatOpen === 1 || !hasTank(input))
          expect(blocked.sumpC).toBeGreaterThanOrEqual(clean.sumpC - SLACK_K)
        },
      ),
    PROPERTY_TIMEOUT_MS,
  )

  it(
    'is hotter with a blocked cooler, where every cooler cools',
    () =>
      holdsFor(
        150,
        fc.record({
          input: settling({ bypass: false, minCoolers: 1 }),
          place: fc.nat(5),
          blockedFraction: evenly(0.1, 0.95),
        }),
        ({ input, place, blockedFraction }) => {
          const { coolers } = input.build.cooling
          const index = place % coolers.length
          const cooler = coolers[index] as Cooler
          fc.pre(cooler.construction !== 'in-tank')
          const blockedBy = (fraction: number) =>
            settledAsOil(
              withCooling(input, {
                coolers: coolers.map((each, at) =>
                  at === index ? { ...(each as AirCooler), blockedFraction: fraction } : each,
                ),
              }),
            ).state
          const clean = blockedBy(0)
          const blocked = blockedBy(blockedFraction)
          // A blocked stack cooler also spares the radiator its heat: coolant that warms the oil in a tank is then cooler.
          fc.pre([...clean.coolerHeatW, ...blocked.coolerHeatW].every((heat) => heat >= 0))
          expect(blocked.sumpC).toBeGreaterThanOrEqual(clean.sumpC - SLACK_K)
        },
      ),
    PROPERTY_TIMEOUT_MS,
  )

  it(
    'is cooler with a bigger cooler added to the stack',
    () =>
      holdsFor(
        150,
        fc.record({
          input: settling({ bypass: false, maxCoolers: 2 }),
          smaller: evenly(0.015, 0.05),
          larger: evenly(1.2, 2.4),
          construction: fc.constantFrom('stacked-plate' as const, 'plate-fin' as const, 'tube-fin' as const),
        }),
        ({ input, smaller, larger, construction }) => {
          const [small, large] = [smaller, smaller * larger].map((faceAreaM2) => {
            const added: AirCooler = {
              name: 'added',
              construction,
              position: 'ahead-of-condenser',
              faceAreaM2,
              rating: {
                // 1700 W/K per m² at an effectiveness that any of the areas reaches: heat in proportion to area.
                heatW: 60_000 * faceAreaM2,
                inletDifferenceK: 55.56,
                oilFlowM3S: 1.26e-4,
                airVelocityMps: 4,
                pressureDropPa: 25_000,
              },
            }
            return settledAsOil(withCooling(input, { coolers: [...input.build.cooling.coolers, added] }))
              .state
          })
          if (small === undefined || large === undefined) throw new Error('two areas')
          fc.pre((large.coolerHeatW.at(-1) ?? NaN) > 0 && (small.coolerHeatW.at(-1) ?? NaN) > 0)
          expect(large.sumpC).toBeLessThanOrEqual(small.sumpC + SLACK_K)
        },
      ),
    PROPERTY_TIMEOUT_MS,
  )

  it(
    'has a cooler hot line with more flow, where every cooler cools and no bypass answers it',
    () =>
      holdsFor(
        150,
        fc.record({ input: settling({ bypass: false }), more: evenly(1.1, 2) }),
        ({ input, more }) => {
          const scale = input.calibration?.flowScale ?? 1
          const before = settledAsOil(input)
          fc.pre(before.segment.heat.converterW > 0)
          const after = settledAsOil(withCalibration(input, { flowScale: scale * more }))
          fc.pre([...before.state.coolerHeatW, ...after.state.coolerHeatW].every((heat) => heat >= 0))
          expect(after.state.coolerInletC).toBeLessThanOrEqual(before.state.coolerInletC + SLACK_K)
        },
      ),
    PROPERTY_TIMEOUT_MS,
  )

  it(
    'is never cooler for a bypass, where every cooler cools',
    () =>
      holdsFor(
        150,
        fc.record({ input: settling({ minCoolers: 1 }), openC: evenly(40, 110), span: evenly(1, 25) }),
        ({ input, openC, span }) => {
          const plain = settledAsOil(withoutBypass(input)).state
          fc.pre(plain.coolerHeatW.every((heat) => heat >= 0))
          const bypassed = settledAsOil(withCooling(input, { bypass: { openC, fullC: openC + span } })).state
          expect(bypassed.sumpC).toBeGreaterThanOrEqual(plain.sumpC - SLACK_K)
        },
      ),
    PROPERTY_TIMEOUT_MS,
  )

  it(
    'is the same where a bypass is wide open anyway',
    () =>
      holdsFor(60, settling({ minCoolers: 1 }), (input) => {
        const plain = settledAsOil(withoutBypass(input)).state
        const open = settledAsOil(withCooling(input, { bypass: { openC: -59, fullC: -58 } })).state
        expect(open.sumpC).toBeCloseTo(plain.sumpC, 3)
        expect(open.coolerInletC).toBeCloseTo(plain.coolerInletC, 3)
      }),
    PROPERTY_TIMEOUT_MS,
  )
})
