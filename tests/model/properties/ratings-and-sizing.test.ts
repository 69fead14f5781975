import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { restateAtReferencePoint, sizing } from '#shared/heat'
import {
  conductanceOfRating,
  coolerPressureDrop,
  exchangerHeat,
  makeCoolerUnit,
  oilSideFactor,
} from '#shared/heat/coolers'
import { kinematicViscosity, makeOil } from '#shared/heat/fluids'
import type { AirCooler, HeatInput } from '#shared/schemas/heat-input'
import { arbitraryBuild, arbitraryInput, evenly } from '../../support/arbitrary-truck'
import { answered, answerOf, holdsFor, PROPERTY_TIMEOUT_MS } from '../../support/properties'

describe('a rating', () => {
  it('is reproduced by the cooler made from it', () =>
    holdsFor(200, arbitraryBuild({ minCoolers: 1 }), (build) => {
      const oil = makeOil(build.transmission.fluid)
      build.cooling.coolers.forEach((cooler, index) => {
        const unit = makeCoolerUnit(oil, cooler, `coolers.${index}`)
        const { rating } = cooler
        const oilInC = rating.oilInC ?? 93.3
        // Capacity rates from the property lines and the rating's own air or coolant, written here again.
        const density15 = oil.density15KgM3
        const oilRate = (density15 - 0.62 * (oilInC - 15)) * rating.oilFlowM3S * (1800 + 4 * oilInC)
        const sinkRate =
          cooler.construction === 'in-tank'
            ? cooler.rating.coolantFlowM3S * 1035 * 3600
            : 1.184 * cooler.faceAreaM2 * cooler.rating.airVelocityMps * 1006
        const oilSide = oilSideFactor(unit, rating.oilFlowM3S, kinematicViscosity(oil, oilInC))
        expect(oilSide).toBeCloseTo(1, 9)
        const ua = unit.uaRatedWK / (unit.airShare + (1 - unit.airShare) * oilSide)
        const heat = exchangerHeat(ua, oilRate, sinkRate, rating.inletDifferenceK)
        expect(heat / rating.heatW).toBeCloseTo(1, 7)
        expect(
          coolerPressureDrop(unit, rating.oilFlowM3S, kinematicViscosity(oil, oilInC)) /
            rating.pressureDropPa,
        ).toBeCloseTo(1, 9)
      })
    }))

  it('is refused when no exchanger could carry it', () =>
    holdsFor(
      100,
      fc.record({ rateA: evenly(20, 2000), rateB: evenly(20, 2000), excess: evenly(1.0001, 3) }),
      ({ rateA, rateB, excess }) => {
        const most = exchangerHeat(200 * Math.min(rateA, rateB), rateA, rateB, 50)
        const of = (heatW: number) =>
          conductanceOfRating({ heatW, inletDifferenceK: 50, capacityRateA: rateA, capacityRateB: rateB })
        expect(of(most * excess)).toBeUndefined()
        expect(of(most * 0.98)).toBeGreaterThan(0)
      },
    ))

  it('at the reference point is restated as itself', () =>
    holdsFor(
      60,
      fc.record({
        construction: fc.constantFrom('stacked-plate' as const, 'plate-fin' as const, 'tube-fin' as const),
        faceAreaM2: evenly(0.02, 0.12),
        effectiveness: evenly(0.1, 0.75),
      }),
      ({ construction, faceAreaM2, effectiveness }) => {
        const oilRate = (855 - 0.62 * (93.3 - 15)) * 1.26e-4 * (1800 + 4 * 93.3)
        const airRate = 1.184 * faceAreaM2 * 4 * 1006
        const heatW = effectiveness * Math.min(oilRate, airRate) * 55.56
        const restated = restateAtReferencePoint({
          construction,
          faceAreaM2,
          ratings: [
            {
              heatW,
              inletDifferenceK: 55.56,
              oilFlowM3S: 1.26e-4,
              airVelocityMps: 4,
              pressureDropPa: 2e4,
              oilInC: 93.3,
            },
          ],
        })
        // 100 °F is 55.5556 K: the reference may be written either way.
        expect(restated.heatW / heatW).toBeCloseTo(1, 3)
        expect(Math.abs(restated.misfits[0]?.misfit ?? NaN)).toBeLessThan(1e-3)
      },
    ))
})

/** The generic cooler that sizing speaks of, from its answer. */
function sizedCooler(
  request: { construction: AirCooler['construction']; position: AirCooler['position'] },
  faceAreaM2: number,
): AirCooler {
  const perArea = { 'stacked-plate': 2900, 'plate-fin': 2500, 'tube-fin': 1500 }[request.construction]
  const dropPa = { 'stacked-plate': 25_000, 'plate-fin': 25_000, 'tube-fin': 35_000 }[request.construction]
  return {
    name: 'sized',
    construction: request.construction,
    position: request.position,
    faceAreaM2,
    rating: {
      heatW: perArea * faceAreaM2,
      inletDifferenceK: 55.56,
      oilFlowM3S: 1.26e-4,
      airVelocityMps: 4,
      pressureDropPa: dropPa,
    },
  }
}

describe('sizing', () => {
  it(
    'hits its target with the area it names, and misses it with less',
    () =>
      holdsFor(
        60,
        fc.record({
          input: arbitraryInput({ maxSegments: 2, maxCoolers: 2, kinds: ['steady', 'stopGo', 'idle'] }),
          construction: fc.constantFrom('stacked-plate' as const, 'plate-fin' as const, 'tube-fin' as const),
          position: fc.constantFrom(
            'ahead-of-condenser' as const,
            'behind-condenser' as const,
            'remote' as const,
          ),
          below: fc.record({ sump: evenly(0, 30), inlet: evenly(0, 40), which: fc.constantFrom(1, 2, 3) }),
          basis: fc.constantFrom('equilibrium' as const, 'peak' as const),
        }),
        ({ input, construction, position, below, basis }) => {
          const reached = (of: HeatInput) => {
            const answer = answered(of)
            return basis === 'peak'
              ? { sumpC: answer.peakSumpC, coolerInletC: answer.peakCoolerInletC }
              : {
                  sumpC: Math.max(
                    ...answer.segments.map(({ equilibrium }) => equilibrium?.sumpC ?? -Infinity),
                  ),
                  coolerInletC: Math.max(
                    ...answer.segments.map(({ equilibrium }) => equilibrium?.coolerInletC ?? -Infinity),
                  ),
                }
          }
          // Targets somewhat below what the truck reaches without: most are worth a cooler.
          const bare = reached(input)
          const targets = {
            ...(below.which !== 2 ? { sumpC: bare.sumpC - below.sump } : {}),
            ...(below.which !== 1 ? { coolerInletC: bare.coolerInletC - below.inlet } : {}),
          }
          fc.pre(bare.sumpC < 290 && bare.coolerInletC < 390)
          const answer = answerOf(() => sizing({ input, construction, position, targets, basis }))
          if (answer === undefined) return
          const withArea = (faceAreaM2: number) => {
            // The rating of the generic cooler is its UA; its heat at the reference point follows from that.
            const cooler = sizedCooler({ construction, position }, faceAreaM2)
            cooler.rating.heatW = answer.heatW
            const { cooling } = input.build
            const coolers = [...cooling.coolers, cooler]
            return reached({ ...input, build: { ...input.build, cooling: { ...cooling, coolers } } })
          }
          if (answer.faceAreaM2 === 0) {
            expect(answer.uaWK).toBe(0)
            if (targets.sumpC !== undefined) expect(bare.sumpC).toBeLessThanOrEqual(targets.sumpC + 0.1)
            if (targets.coolerInletC !== undefined)
              expect(bare.coolerInletC).toBeLessThanOrEqual(targets.coolerInletC + 0.1)
            return
          }
          const perArea = { 'stacked-plate': 2900, 'plate-fin': 2500, 'tube-fin': 1500 }[construction]
          expect(answer.uaWK / (perArea * answer.faceAreaM2)).toBeCloseTo(1, 6)
          const sized = withArea(answer.faceAreaM2)
          if (targets.sumpC !== undefined) expect(sized.sumpC).toBeLessThanOrEqual(targets.sumpC + 0.1)
          if (targets.coolerInletC !== undefined)
            expect(sized.coolerInletC).toBeLessThanOrEqual(targets.coolerInletC + 0.1)
          const decided = answer.decidedBy ?? 'neither'
          expect(decided).not.toBe('neither')
          // Its pressure drop alone may do it: less flow warms up more slowly. Then the area is as small as they come.
          if (answer.faceAreaM2 < 1e-4) return
          if (decided === 'sumpC') expect(sized.sumpC).toBeGreaterThanOrEqual((targets.sumpC ?? NaN) - 0.1)
          if (decided === 'coolerInletC')
            expect(sized.coolerInletC).toBeGreaterThanOrEqual((targets.coolerInletC ?? NaN) - 0.1)
        },
      ),
    PROPERTY_TIMEOUT_MS,
  )
})
