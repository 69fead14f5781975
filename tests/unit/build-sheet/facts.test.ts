import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { ARCHETYPE_IDS, findArchetype } from '../../../shared/build-sheet/archetypes'
import { DEMO_CATALOGUE } from '../../../shared/build-sheet/demo-catalogue'
import {
  createDefaultFacts,
  createHillDuty,
  createSheetFromFacts,
  type EightFacts,
  EightFactsSchema,
} from '../../../shared/build-sheet/facts'
import { deriveInputs } from '../../../shared/build-sheet/setups'
import { deriveBuild, findSheetValue, listTypicalValues } from '../../../shared/build-sheet/sheet'
import { AppError } from '../../../shared/errors'
import { estimate } from '../../../shared/heat'
import { BuildCreateSchema } from '../../../shared/schemas/build'
import { HeatInputSchema } from '../../../shared/schemas/heat-input'
import { SetupChangeSchema } from '../../../shared/schemas/setup'

const facts = (change: Partial<EightFacts> = {}): EightFacts => ({
  ...createDefaultFacts('classic-4x4'),
  ...change,
})

function messageAt(candidate: unknown, path: string): string | undefined {
  return EightFactsSchema.safeParse(candidate).error?.issues.find((issue) => issue.path.join('.') === path)
    ?.message
}

describe('the eight facts', () => {
  it.each(ARCHETYPE_IDS)('of %s as it left the works are ones to start from', (id) => {
    expect(EightFactsSchema.safeParse(createDefaultFacts(id)).error?.issues).toBeUndefined()
  })

  it.each([
    [{ truckMassKg: 40 }, 'truckMassKg', '6,200 lb'],
    [{ truckMassKg: Number.NaN }, 'truckMassKg', 'must be a number'],
    [{ trailerMassKg: -1 }, 'trailerMassKg', '0 without a trailer'],
    [{ tireCode: 'huge' }, 'tireCode', '33 in would do'],
    [{ tireCode: undefined }, 'tireCode', 'one of the two'],
    [{ tyreRadiusM: 0.4 }, 'tireCode', 'one of the two'],
    [{ axleRatio: 0.3 }, 'axleRatio', 'a 4.10 axle is 4.1'],
    [{ ambientC: 200 }, 'ambientC', '38 °C is 100 °F'],
    [{ lockupProven: 'maybe' }, 'lockupProven', 'yes, no or unknown'],
    [{ hill: { grade: 6, lengthM: 8000, speedMps: 20 } }, 'hill.grade', '0.06 is a 6 % grade'],
    [{ trailerMassKg: 0, trailerShape: 'boat' }, 'trailerMassKg', 'has no weight yet'],
    [{ trailerMassKg: 900, trailerShape: 'none' }, 'trailerShape', 'flat, boat or box'],
    [{ coolers: { inTank: true, extras: [{ kind: 'stock' }] } }, 'coolers.extras.0.kind', 'from the works'],
    [
      {
        coolers: {
          inTank: true,
          extras: [
            {
              kind: 'generic',
              construction: 'tube-fin',
              position: 'ahead-of-condenser',
              size: 'small',
              fan: true,
            },
          ],
        },
      },
      'coolers.extras.0.fan',
      'only a remote cooler',
    ],
    [{ colour: 'red' }, '', 'Unrecognized key'],
  ])('refuse %j at %s', (change, path, message) => {
    expect(messageAt({ ...facts(), ...change }, path)).toContain(message)
  })
})

describe('a build from the facts', () => {
  it.each(ARCHETYPE_IDS)('%s is one the program stores and the model takes', (id) => {
    const draft = createSheetFromFacts(createDefaultFacts(id), { catalogue: DEMO_CATALOGUE })
    const { setups, ...build } = draft
    const posted = BuildCreateSchema.safeParse({
      ...build,
      id: '01890a5d-ac96-774b-bcce-b302099a8057',
      scenario: { ...draft.scenario, id: '01890a5d-ac96-774b-bcce-b302099a8058' },
    })
    expect(posted.error?.issues).toBeUndefined()
    expect(setups.map(({ kind }) => kind)).toEqual(['as-it-is', 'drive-differently'])
    for (const { change } of setups) expect(SetupChangeSchema.safeParse(change).success).toBe(true)
    const { judged } = deriveInputs({ sheet: draft.sheet, scenario: draft.scenario, control: draft.control })
    expect(HeatInputSchema.safeParse(judged).error?.issues).toBeUndefined()
  })

  it('puts what the caller knows over what is typical', () => {
    const draft = createSheetFromFacts(
      facts({
        truckMassKg: 2812,
        trailerMassKg: 1814,
        trailerShape: 'boat',
        weightSource: 'scale-ticket',
        tireCode: ' LT265/70R17 ',
        axleRatio: 4.1,
        lockupProven: 'no',
      }),
      { typed: { 'vehicle.massKg': { typed: '6,200', unit: 'lb' } } },
    )
    expect(findSheetValue(draft.sheet, 'vehicle.massKg')).toEqual({
      path: 'vehicle.massKg',
      value: 2812,
      origin: 'measured',
      relativeSpread: 0.005,
      typed: '6,200',
      unit: 'lb',
    })
    expect(findSheetValue(draft.sheet, 'axle.ratio')).toMatchObject({ value: 4.1, origin: 'maker' })
    expect(findSheetValue(draft.sheet, 'vehicle.tyreRadiusM')).toMatchObject({
      typed: 'LT265/70R17',
      origin: 'maker',
      // 802.8 mm across, 3.05 diameters a turn.
      value: expect.closeTo((0.8028 * 3.05) / (2 * Math.PI), 9),
    })
    expect(draft.scenario.load).toEqual({ trailerMassKg: 1814, trailerDragAreaM2: 1.3 })
    expect(draft.control.lockupSeen).toBe('no')
    const typical = listTypicalValues(draft.sheet).map(({ path }) => path)
    expect(typical).toContain('vehicle.dragAreaM2')
    expect(typical).not.toContain('vehicle.massKg')
  })

  it('widens the weight from scale ticket over placard to guess', () => {
    const spreads = (['scale-ticket', 'placard', 'guess'] as const).map(
      (weightSource) =>
        findSheetValue(createSheetFromFacts(facts({ weightSource })).sheet, 'vehicle.massKg')
          ?.relativeSpread ?? 0,
    )
    expect(spreads).toEqual([...spreads].sort((a, b) => a - b))
    expect(new Set(spreads).size).toBe(3)
  })

  it('takes a rolling radius in place of a code', () => {
    const draft = createSheetFromFacts(facts({ tireCode: undefined, tyreRadiusM: 0.41 }))
    expect(findSheetValue(draft.sheet, 'vehicle.tyreRadiusM')).toMatchObject({
      value: 0.41,
      origin: 'measured',
    })
  })

  it('lays the loop: tank first, then the extras in their order', () => {
    const part = DEMO_CATALOGUE.find(({ construction }) => construction === 'stacked-plate')!
    const draft = createSheetFromFacts(
      facts({
        coolers: {
          inTank: true,
          extras: [
            { kind: 'generic', construction: 'plate-fin', position: 'remote', size: 'medium', fan: true },
            { kind: 'catalogue', coolerId: part.id, position: 'behind-condenser' },
          ],
        },
      }),
      { catalogue: DEMO_CATALOGUE },
    )
    const { coolers } = deriveBuild(draft.sheet).cooling
    expect(coolers.map(({ construction, position }) => [construction, position])).toEqual([
      ['in-tank', 'radiator-tank'],
      ['plate-fin', 'remote'],
      ['stacked-plate', 'behind-condenser'],
    ])
    expect(coolers[1]).toHaveProperty('fanFlowM3S')
    expect(coolers[2]?.name).toBe(part.name)
  })

  it('takes a truck without any cooler', () => {
    const draft = createSheetFromFacts(facts({ coolers: { inTank: false, extras: [] } }))
    expect(deriveBuild(draft.sheet).cooling.coolers).toEqual([])
  })

  it('keeps the cooler from the works typical', () => {
    const draft = createSheetFromFacts(createDefaultFacts('diesel-pickup'))
    expect(deriveBuild(draft.sheet).cooling.coolers).toEqual(
      findArchetype('diesel-pickup')?.build.cooling.coolers,
    )
    expect(findSheetValue(draft.sheet, 'cooling.coolers.1.rating.heatW')?.origin).toBe('typical')
  })

  it('names a cooler that is not in the catalogue', () => {
    const lost = facts({
      coolers: { inTank: true, extras: [{ kind: 'catalogue', coolerId: 'gone', position: 'remote' }] },
    })
    expect(() => createSheetFromFacts(lost, { catalogue: DEMO_CATALOGUE })).toThrow(AppError)
    const tank = DEMO_CATALOGUE.find(({ construction }) => construction === 'in-tank')!
    const wrong = facts({
      coolers: { inTank: true, extras: [{ kind: 'catalogue', coolerId: tank.id, position: 'remote' }] },
    })
    expect(() => createSheetFromFacts(wrong, { catalogue: DEMO_CATALOGUE })).toThrow(AppError)
  })
})

describe('the drive cycle of the facts', () => {
  it('meets the hill from a warm cruise on the flat and cools off after it', () => {
    const { segments } = createHillDuty(facts({ hill: { grade: 0.06, lengthM: 8000, speedMps: 18 } }))
    expect(segments).toHaveLength(3)
    expect(segments[1]).toEqual({ kind: 'steady', speedMps: 18, grade: 0.06, distanceM: 8000 })
    for (const flat of [segments[0], segments[2]]) {
      if (flat?.kind !== 'steady') throw new Error('not a steady segment')
      expect(flat.grade).toBe(0)
      expect(flat.speedMps).toBeGreaterThan(18)
    }
  })

  it('approaches a trail as slowly as it is climbed', () => {
    const { segments } = createHillDuty(facts({ hill: { grade: 0.15, lengthM: 500, speedMps: 2 } }))
    expect(segments[0]).toMatchObject({ speedMps: 2 })
  })

  it('runs the air conditioning when it is warm', () => {
    expect(createHillDuty(facts({ ambientC: 35 })).airConditioning).toBe(true)
    expect(createHillDuty(facts({ ambientC: 5 })).airConditioning).toBe(false)
  })

  it('starts settled: driving the approach longer changes nothing', () => {
    const draft = createSheetFromFacts(facts({ lockupProven: 'yes' }))
    const { judged } = deriveInputs({ sheet: draft.sheet, scenario: draft.scenario, control: draft.control })
    const answer = estimate(judged)
    const { start } = judged.duty
    expect(answer.segments[0]?.end.sumpC).toBeCloseTo(start?.sumpC ?? 0, 0)
    expect(answer.segments[0]?.end.axleC).toBeCloseTo(start?.axleC ?? 0, 0)
  })

  it('still comes with a start where the model refuses the approach', () => {
    const impossible = createSheetFromFacts(
      facts({ truckMassKg: 29_000, trailerMassKg: 39_000, hill: { grade: 0.5, lengthM: 1000, speedMps: 2 } }),
    )
    expect(impossible.scenario.duty.start).toBeDefined()
  })
})

describe('any facts the form lets through', () => {
  const extra = fc.oneof(
    fc.record({
      kind: fc.constant('generic' as const),
      construction: fc.constantFrom('stacked-plate' as const, 'plate-fin' as const, 'tube-fin' as const),
      position: fc.constantFrom(
        'ahead-of-condenser' as const,
        'behind-condenser' as const,
        'remote' as const,
      ),
      size: fc.constantFrom('small' as const, 'medium' as const, 'large' as const),
    }),
    fc.record({
      kind: fc.constant('catalogue' as const),
      coolerId: fc.constantFrom(
        ...DEMO_CATALOGUE.filter(({ construction }) => construction !== 'in-tank').map(({ id }) => id),
      ),
      position: fc.constantFrom(
        'ahead-of-condenser' as const,
        'behind-condenser' as const,
        'remote' as const,
      ),
    }),
  )
  const number = (min: number, max: number) => fc.double({ min, max, noNaN: true })
  const anyFacts: fc.Arbitrary<EightFacts> = fc
    .record({
      archetype: fc.constantFrom(...ARCHETYPE_IDS),
      truckMassKg: number(600, 30_000),
      trailer: fc.option(
        fc.record({
          massKg: number(1, 40_000),
          shape: fc.constantFrom('flat' as const, 'boat' as const, 'box' as const),
        }),
      ),
      weightSource: fc.constantFrom('scale-ticket' as const, 'placard' as const, 'guess' as const),
      tyreRadiusM: number(0.25, 0.75),
      axleRatio: number(2, 10),
      lockupProven: fc.constantFrom('yes' as const, 'no' as const, 'unknown' as const),
      hill: fc.record({ grade: number(0, 0.5), lengthM: number(50, 100_000), speedMps: number(0.5, 45) }),
      ambientC: number(-40, 60),
      altitudeM: number(-430, 5800),
      coolers: fc.record({ inTank: fc.boolean(), extras: fc.array(extra, { maxLength: 4 }) }),
    })
    .map(({ trailer, ...rest }) => ({
      ...rest,
      trailerMassKg: trailer?.massKg ?? 0,
      trailerShape: trailer?.shape ?? 'none',
    }))

  it('make a build the model takes: an answer, or a refusal it gives a name to', () => {
    fc.assert(
      fc.property(anyFacts, (candidate) => {
        expect(EightFactsSchema.safeParse(candidate).error?.issues).toBeUndefined()
        const draft = createSheetFromFacts(candidate, { catalogue: DEMO_CATALOGUE })
        const { judged } = deriveInputs({
          sheet: draft.sheet,
          scenario: draft.scenario,
          control: draft.control,
        })
        expect(HeatInputSchema.safeParse(judged).error?.issues).toBeUndefined()
        try {
          const answer = estimate(judged)
          expect(Number.isFinite(answer.peakSumpC)).toBe(true)
        } catch (error) {
          expect(error).toBeInstanceOf(AppError)
        }
      }),
      { numRuns: 150 },
    )
  }, 30_000)
})
