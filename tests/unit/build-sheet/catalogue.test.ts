import { describe, expect, it } from 'vitest'
import { ARCHETYPES } from '../../../shared/build-sheet/archetypes'
import {
  findTemperatures,
  rankParts,
  restatePart,
  toModelCooler,
} from '../../../shared/build-sheet/catalogue'
import { DEMO_CATALOGUE } from '../../../shared/build-sheet/demo-catalogue'
import { estimate } from '../../../shared/heat'
import { GENERIC_COOLERS, heatAtReferencePoint, referenceOil } from '../../../shared/heat/reference-point'
import { CatalogueCoolerSchema, type CatalogueAirCooler } from '../../../shared/schemas/catalogue-cooler'
import { CoolerSchema, type HeatInput } from '../../../shared/schemas/heat-input'

const inAir = DEMO_CATALOGUE.filter((part): part is CatalogueAirCooler => part.construction !== 'in-tank')
const inTank = DEMO_CATALOGUE.filter(({ construction }) => construction === 'in-tank')

const input: HeatInput = {
  build: {
    ...ARCHETYPES[0]!.build,
    converter: { ...ARCHETYPES[0]!.build.converter, lockup: { fitted: false } },
  },
  load: { trailerMassKg: 1500, trailerDragAreaM2: 1.3 },
  duty: {
    ambientC: 35,
    altitudeM: 300,
    airConditioning: true,
    start: { sumpC: 85, coolantC: 92, axleC: 60 },
    segments: [{ kind: 'steady', speedMps: 20, grade: 0.05, distanceM: 8000 }],
  },
}

describe('the invented catalogue', () => {
  it('has 24 parts of all constructions, each one the program stores', () => {
    expect(DEMO_CATALOGUE).toHaveLength(24)
    for (const part of DEMO_CATALOGUE)
      expect(CatalogueCoolerSchema.safeParse(part).error?.issues, part.name).toBeUndefined()
    expect(new Set(DEMO_CATALOGUE.map(({ construction }) => construction))).toEqual(
      new Set(['stacked-plate', 'plate-fin', 'tube-fin', 'in-tank']),
    )
    expect(new Set(DEMO_CATALOGUE.map(({ id }) => id)).size).toBe(24)
    expect(new Set(DEMO_CATALOGUE.map(({ name }) => name)).size).toBe(24)
  })

  it('states ratings at the varied conditions that makers use', () => {
    const ratings = inAir.flatMap((part) => part.ratings)
    const spread = (values: number[]) => [Math.min(...values), Math.max(...values)]
    // 1 to 4 US gal/min; 100 to 180 °F of difference.
    const [leastFlow, mostFlow] = spread(ratings.map(({ oilFlowM3S }) => oilFlowM3S / 6.30902e-5))
    expect(leastFlow).toBeCloseTo(1, 2)
    expect(mostFlow).toBeCloseTo(4, 2)
    const [least, most] = spread(ratings.map(({ inletDifferenceK }) => inletDifferenceK * 1.8))
    expect(least).toBeCloseTo(100, 0)
    expect(most).toBeCloseTo(180, 0)
    expect(new Set(ratings.map(({ airVelocityMps }) => airVelocityMps)).size).toBeGreaterThan(4)
  })

  it.each(inAir.map((part) => [part.name, part] as const))(
    '%s has a face as large as its core',
    (_name, part) => {
      expect(part.faceAreaM2 / (part.widthM * part.heightM)).toBeCloseTo(1, 2)
    },
  )

  it.each(inAir.map((part) => [part.name, part] as const))('%s can be restated', (_name, part) => {
    const restated = restatePart(part)
    const generic = GENERIC_COOLERS[part.construction].uaPerAreaWM2K * part.faceAreaM2
    // A real core lies within about a third of the generic one of its kind (judgement).
    expect(restated.uaWK / generic).toBeGreaterThan(0.7)
    expect(restated.uaWK / generic).toBeLessThan(1.4)
    expect(restated.heatW).toBeGreaterThan(1000)
    // Whatever the core, 2 gal/min cannot give up more than it carries over 55.56 K: about 12.2 kW.
    expect(restated.heatW).toBeLessThan(12_200)
    expect(restated.misfits).toHaveLength(part.ratings.length)
  })

  it('has two parts whose ratings do not fit one another, and says so in a note', () => {
    const marked = inAir.filter((part) => restatePart(part).misfits.some((one) => one.marked))
    expect(marked).toHaveLength(2)
    for (const part of marked) expect(part.note).toMatch(/ratings/)
  })

  it('orders cores of one construction by size when nothing but size differs', () => {
    const heat = (name: string) => restatePart(inAir.find((part) => part.name === name)!).heatW
    const cores = ['280 × 127', '280 × 190', '280 × 241', '280 × 292'].map((size) =>
      heat(`Plate core ${size} × 38`),
    )
    expect(cores).toEqual([...cores].sort((a, b) => a - b))
  })
})

describe('a part as a cooler of the model', () => {
  it.each(DEMO_CATALOGUE.map((part) => [part.name, part] as const))(
    '%s is one the model takes',
    (_name, part) => {
      const cooler = toModelCooler(part, 'behind-condenser')
      expect(CoolerSchema.safeParse(cooler).error?.issues).toBeUndefined()
      expect(cooler.position).toBe(part.construction === 'in-tank' ? 'radiator-tank' : 'behind-condenser')
    },
  )

  it('keeps a single rating as its maker states it', () => {
    const single = inAir.find(({ ratings }) => ratings.length === 1)!
    expect(toModelCooler(single, 'ahead-of-condenser').rating).toEqual(single.ratings[0])
  })

  it('stands at the reference point where there are several', () => {
    const several = inAir.find(({ ratings }) => ratings.length > 1)!
    const cooler = toModelCooler(several, 'ahead-of-condenser')
    const restated = restatePart(several)
    expect(cooler.rating).toMatchObject({
      inletDifferenceK: expect.closeTo(55.56, 2),
      oilFlowM3S: 1.26e-4,
      airVelocityMps: 4,
    })
    expect(cooler.rating.heatW).toBeCloseTo(restated.heatW, 6)
    expect(cooler.airShare).toBe(restated.airShare)
    expect(
      heatAtReferencePoint(referenceOil(), restated.uaWK, several.faceAreaM2) / restated.heatW,
    ).toBeCloseTo(1, 3)
  })

  it('takes the rating of an in-tank cooler nearest to 2 gal/min', () => {
    const tank = inTank[0]!
    if (tank.construction !== 'in-tank') throw new Error('not in a tank')
    const rating = tank.ratings[0]!
    const two = {
      ...tank,
      ratings: [
        { ...rating, oilFlowM3S: 3e-4 },
        { ...rating, oilFlowM3S: 1.3e-4 },
      ],
    }
    expect(toModelCooler(two).rating.oilFlowM3S).toBe(1.3e-4)
  })
})

describe('ranking the catalogue', () => {
  const bare = estimate(input)
  const ranked = rankParts({
    input,
    parts: DEMO_CATALOGUE,
    position: 'ahead-of-condenser',
    targets: { sumpC: bare.peakSumpC - 12, coolerInletC: bare.peakCoolerInletC - 5 },
  })

  it('answers for every part, through the whole model', () => {
    expect(ranked).toHaveLength(24)
    for (const one of ranked) {
      expect(one.problem).toBeNull()
      const cooler = toModelCooler(one.part, 'ahead-of-condenser')
      const coolers = one.placement === 'replaces-tank' ? [cooler] : [...input.build.cooling.coolers, cooler]
      const answer = estimate({
        ...input,
        build: { ...input.build, cooling: { ...input.build.cooling, coolers } },
      })
      expect(one.peakSumpC).toBe(answer.peakSumpC)
      expect(one.peakCoolerInletC).toBe(answer.peakCoolerInletC)
    }
  })

  it('judges by the smaller margin', () => {
    for (const one of ranked) {
      const margins = [
        bare.peakSumpC - 12 - one.peakSumpC!,
        bare.peakCoolerInletC - 5 - one.peakCoolerInletC!,
      ]
      expect(one.marginK).toBeCloseTo(Math.min(...margins), 9)
      expect(one.reaches).toBe(one.marginK! >= 0)
      expect(one.decidedBy).toBe(margins[0]! <= margins[1]! ? 'sumpC' : 'coolerInletC')
    }
  })

  it('puts the cheapest that reaches on top, then the nearest misses', () => {
    const reaching = ranked.filter(({ reaches }) => reaches)
    const missing = ranked.filter(({ reaches }) => !reaches)
    expect(reaching.length).toBeGreaterThan(0)
    expect(missing.length).toBeGreaterThan(0)
    expect(ranked).toEqual([...reaching, ...missing])
    const prices = reaching.map(({ part }) => part.priceCents)
    expect(prices).toEqual([...prices].sort((a, b) => a - b))
    const margins = missing.map(({ marginK }) => marginK!)
    expect(margins).toEqual([...margins].sort((a, b) => b - a))
  })

  it('puts a tank cooler in place of the one there is, or first where there is none', () => {
    expect(
      ranked.filter(({ part }) => part.construction === 'in-tank').map(({ placement }) => placement),
    ).toEqual(Array(4).fill('replaces-tank'))
    const without = { ...input, build: { ...input.build, cooling: { ...input.build.cooling, coolers: [] } } }
    const [first] = rankParts({
      input: without,
      parts: inTank.slice(0, 1),
      position: 'ahead-of-condenser',
      targets: { sumpC: 200 },
    })
    expect(first?.placement).toBe('added-first')
  })

  it('marks what oil flow limits and what does not fit, and passes a refusal on', () => {
    expect(ranked.filter(({ misfitMarked }) => misfitMarked)).toHaveLength(2)
    for (const one of ranked)
      if (one.restated !== null) expect(one.limitedByOilFlow).toBe(one.restated.heatW > 9500)
    const impossible = { ...inAir[0]!, ratings: [{ ...inAir[0]!.ratings[0]!, heatW: 30_000 }] }
    const [refused] = rankParts({
      input,
      parts: [impossible],
      position: 'ahead-of-condenser',
      targets: { sumpC: 120 },
    })
    expect(refused).toMatchObject({
      reaches: false,
      marginK: null,
      problem: 'rating is beyond what its air and oil flow can carry',
    })
    const full = {
      ...input,
      build: {
        ...input.build,
        cooling: { ...input.build.cooling, coolers: Array(6).fill(input.build.cooling.coolers[0]) },
      },
    }
    expect(
      rankParts({ input: full, parts: inAir.slice(0, 1), position: 'remote', targets: { sumpC: 120 } })[0]
        ?.problem,
    ).toContain('at most 6')
  })

  it('on a climb that never ends takes the settled temperatures', () => {
    const settled = findTemperatures(input, 'equilibrium')
    expect(settled.sumpC).toBe(bare.segments[0]?.equilibrium?.sumpC)
    expect(findTemperatures(input, 'peak')).toEqual({
      sumpC: bare.peakSumpC,
      coolerInletC: bare.peakCoolerInletC,
    })
  })
})
