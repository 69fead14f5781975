import { z } from 'zod'
import { AppError } from '../errors'
import type { CatalogueCooler } from '../schemas/catalogue-cooler'
import { type Control, KnownSchema } from '../schemas/control'
import {
  AirConstructionSchema,
  AirPositionSchema,
  boundedNumber,
  type Cooler,
  type Duty,
  type Load,
  type Segment,
} from '../schemas/heat-input'
import type { Limits } from '../schemas/limits'
import type { BuildSheet, Origin, SheetValue } from '../schemas/sheet'
import { milesPerHourToMetersPerSecond } from '../units/conversions'
import { type Archetype, ARCHETYPE_IDS, createArchetypeSheet, findArchetype } from './archetypes'
import { toModelCooler } from './catalogue'
import { createGenericCooler } from './generic-cooler'
import { createDefaultLimits } from './limits'
import { findSettledStart } from './settled-start'
import { createStandingSetups, type SetupDraft } from './setups'
import { deriveBuild, setSheetBranch, setSheetValue } from './sheet'
import { parseTireCode, readTireCode } from './tire-code'

/**
 * The eight facts that decide: loaded weight and how it is known, tire, axle ratio, archetype, lock-up proven, the hill,
 * ambient and altitude, coolers and where. From them a whole build sheet, control, limits, scenario and set-ups.
 */

/** How a weight is known, what that makes of its origin, and one standard deviation of it. */
export const WEIGHT_SOURCES = {
  'scale-ticket': { origin: 'measured', relativeSpread: 0.005, words: 'Scale ticket' },
  placard: { origin: 'maker', relativeSpread: 0.05, words: 'Placard or brochure' },
  // Wider than a value nobody measured: what people say their truck weighs is light of the scale (judgement).
  guess: { origin: 'typical', relativeSpread: 0.08, words: 'A guess' },
} as const satisfies Record<string, { origin: Origin; relativeSpread: number; words: string }>

/** Drag area that a trailer adds behind a truck [m²]; common practice, no source. */
export const TRAILER_SHAPES = {
  none: { dragAreaM2: 0, words: 'No trailer' },
  flat: { dragAreaM2: 0.6, words: 'Flat or utility trailer' },
  boat: { dragAreaM2: 1.3, words: 'Boat' },
  box: { dragAreaM2: 2.6, words: 'Box or travel trailer' },
} as const

const oneOf = <const T extends readonly [string, ...string[]]>(values: T) =>
  z.enum(values, { error: `must be one of: ${values.join(', ')}` })

/** A cooler besides the one in the radiator tank, in the order the oil meets them. */
export const ExtraCoolerSchema = z.discriminatedUnion(
  'kind',
  [
    /** What the archetype carries in front from the works. */
    z.strictObject({ kind: z.literal('stock') }),
    z.strictObject({
      kind: z.literal('generic'),
      construction: AirConstructionSchema,
      position: AirPositionSchema,
      size: oneOf(['small', 'medium', 'large']),
      /** A fan of its own; remote coolers only. */
      fan: z.boolean({ error: 'must be true or false' }).optional(),
    }),
    z.strictObject({
      kind: z.literal('catalogue'),
      coolerId: z
        .string({ error: 'choose a cooler of the catalogue' })
        .min(1, { error: 'choose a cooler of the catalogue' }),
      position: AirPositionSchema,
    }),
  ],
  { error: 'must be of kind stock, generic or catalogue' },
)
export type ExtraCooler = z.infer<typeof ExtraCoolerSchema>

export const EightFactsSchema = z
  .strictObject({
    archetype: oneOf(ARCHETYPE_IDS),
    truckMassKg: boundedNumber(
      600,
      30_000,
      'kg, the truck with people and gear',
      '2812 kg is 6,200 lb; a scale ticket is best',
    ),
    trailerMassKg: boundedNumber(
      0,
      40_000,
      'kg, the loaded trailer',
      '1814 kg is 4,000 lb; 0 without a trailer',
    ),
    trailerShape: oneOf(['none', 'flat', 'boat', 'box']),
    weightSource: oneOf(['scale-ticket', 'placard', 'guess']),
    tireCode: z
      .string({ error: 'must be a size code such as LT265/70R17' })
      .max(40, { error: 'must be at most 40 characters; LT265/70R17 would do' })
      .optional(),
    tyreRadiusM: boundedNumber(0.25, 0.75, 'm rolling radius', 'a 33 in tire is about 0.41').optional(),
    axleRatio: boundedNumber(2, 10, '', 'a 4.10 axle is 4.1; it is on the axle tag or the door label'),
    lockupProven: KnownSchema,
    hill: z.strictObject({
      grade: boundedNumber(0, 0.5, '(rise over run)', '0.06 is a 6 % grade'),
      lengthM: boundedNumber(50, 100_000, 'm of climb', '8047 m is 5 miles'),
      speedMps: boundedNumber(0.5, 45, 'm/s up the hill', '20 m/s is 45 mph'),
    }),
    ambientC: boundedNumber(-40, 60, '°C outside', '38 °C is 100 °F'),
    altitudeM: boundedNumber(
      -430,
      5800,
      'm above sea level, of the top half of the hill',
      '1600 m is 5,250 ft',
    ),
    coolers: z.strictObject({
      inTank: z.boolean({ error: 'say whether the oil goes through the radiator tank: true or false' }),
      extras: z
        .array(ExtraCoolerSchema, { error: 'must be a list of coolers' })
        .max(4, { error: 'takes at most 4 coolers besides the one in the radiator tank' }),
    }),
  })
  .superRefine((facts, context) => {
    const issue = (path: (string | number)[], message: string) =>
      context.addIssue({ code: 'custom', path, message })
    if ((facts.tireCode === undefined) === (facts.tyreRadiusM === undefined))
      issue(['tireCode'], 'give a tire size code such as LT265/70R17, or a rolling radius, one of the two')
    if (facts.tireCode !== undefined) {
      const read = readTireCode(facts.tireCode)
      if ('problem' in read) issue(['tireCode'], read.problem)
    }
    if (facts.trailerMassKg > 0 && facts.trailerShape === 'none')
      issue(['trailerShape'], 'a trailer with weight has a shape: flat, boat or box')
    if (facts.trailerMassKg === 0 && facts.trailerShape !== 'none')
      issue(['trailerMassKg'], 'this trailer has no weight yet; type it, or choose no trailer')
    facts.coolers.extras.forEach((extra, index) => {
      if (extra.kind === 'stock' && listStockExtras(findArchetype(facts.archetype)).length === 0)
        issue(
          ['coolers', 'extras', index, 'kind'],
          'this kind of truck has no cooler besides the radiator tank from the works',
        )
      if (extra.kind === 'generic' && extra.fan === true && extra.position !== 'remote')
        issue(
          ['coolers', 'extras', index, 'fan'],
          'only a remote cooler has a fan of its own; set its place to remote or leave the fan out',
        )
    })
  })
export type EightFacts = z.infer<typeof EightFactsSchema>

/** What a form passes along so that nothing typed is lost: what stood in a field, by path of the sheet. */
export type TypedTexts = Partial<Record<string, { typed: string; unit?: string }>>

export interface ScenarioDraft {
  name: string
  load: Load
  duty: Duty
}

/** A build that is not saved yet; whoever saves it makes the ids. */
export interface BuildDraft {
  name: string
  sheet: BuildSheet
  control: Control
  limits: Limits
  scenario: ScenarioDraft
  setups: SetupDraft[]
}

function listStockExtras(archetype: Archetype | undefined): Cooler[] {
  return archetype?.build.cooling.coolers.filter(({ construction }) => construction !== 'in-tank') ?? []
}

/** The facts a form starts from: the archetype as it left the works, on a hill that asks something of it. */
export function createDefaultFacts(archetypeId: EightFacts['archetype']): EightFacts {
  const archetype = getArchetype(archetypeId)
  return {
    archetype: archetypeId,
    truckMassKg: archetype.weights.loadedKg,
    trailerMassKg: 1800,
    trailerShape: 'box',
    weightSource: 'guess',
    tireCode: archetype.stockTireCode,
    axleRatio: archetype.stockAxleRatio,
    lockupProven: 'unknown',
    hill: { grade: 0.06, lengthM: 8000, speedMps: 20 },
    ambientC: 38,
    altitudeM: 800,
    coolers: {
      inTank: archetype.build.cooling.coolers.some(({ construction }) => construction === 'in-tank'),
      extras: listStockExtras(archetype).map(() => ({ kind: 'stock' })),
    },
  }
}

function getArchetype(id: string): Archetype {
  const archetype = findArchetype(id)
  if (archetype === undefined)
    throw new AppError('bad_input', {
      issues: [{ path: 'archetype', message: `must be one of: ${ARCHETYPE_IDS.join(', ')}` }],
    })
  return archetype
}

/** The loop of the facts: the radiator tank first, then the extras in their order. */
function listCoolers(
  facts: EightFacts,
  archetype: Archetype,
  catalogue: readonly CatalogueCooler[],
): Cooler[] {
  const tank = archetype.build.cooling.coolers.filter(({ construction }) => construction === 'in-tank')
  const stock = [...listStockExtras(archetype)]
  const extras = facts.coolers.extras.map((extra, index): Cooler => {
    const path = `coolers.extras.${index}`
    if (extra.kind === 'stock') {
      const cooler = stock.shift()
      if (cooler === undefined)
        throw new AppError('bad_input', {
          issues: [
            { path: `${path}.kind`, message: 'this kind of truck has no further cooler from the works' },
          ],
        })
      return cooler
    }
    if (extra.kind === 'generic') return createGenericCooler(extra)
    const part = catalogue.find(({ id }) => id === extra.coolerId)
    if (part === undefined || part.construction === 'in-tank')
      throw new AppError('bad_input', {
        issues: [{ path: `${path}.coolerId`, message: 'is not a cooler of the catalogue that sits in air' }],
      })
    return toModelCooler(part, extra.position)
  })
  return [...(facts.coolers.inTank ? tank : []), ...extras]
}

/** Roads are climbed from a cruise; a trail is approached as slowly as it is climbed. */
const ROAD_SPEED_MPS = milesPerHourToMetersPerSecond(30)
const CRUISE_MPS = { alone: milesPerHourToMetersPerSecond(65), towing: milesPerHourToMetersPerSecond(60) }

/** Air conditioning runs from here on (75 °F); judgement. */
const AIR_CONDITIONING_FROM_C = 24

/**
 * The drive cycle of the facts: 20 minutes on the flat, the climb, 10 minutes on the flat. The flat before it is driven
 * at a cruise, so that the hill is met with everything warm; the one after it shows the pan cooling off again.
 */
export function createHillDuty(
  facts: Pick<EightFacts, 'hill' | 'ambientC' | 'altitudeM' | 'trailerMassKg'>,
): Duty {
  const { grade, lengthM, speedMps } = facts.hill
  const cruise = facts.trailerMassKg > 0 ? CRUISE_MPS.towing : CRUISE_MPS.alone
  const flatMps = speedMps < ROAD_SPEED_MPS ? speedMps : Math.max(speedMps, cruise)
  const flat = (durationS: number): Segment => ({ kind: 'steady', speedMps: flatMps, grade: 0, durationS })
  return {
    ambientC: facts.ambientC,
    altitudeM: facts.altitudeM,
    airConditioning: facts.ambientC >= AIR_CONDITIONING_FROM_C,
    segments: [flat(1200), { kind: 'steady', speedMps, grade, distanceM: lengthM }, flat(600)],
  }
}

function scenarioName(facts: EightFacts): string {
  const percent = Number((facts.hill.grade * 100).toPrecision(2))
  return `${percent} % climb${facts.trailerMassKg > 0 ? ' with trailer' : ''}`
}

/**
 * A whole build from the eight facts: the archetype's sheet with what the caller knows put over it.
 *
 * @param facts - as {@link EightFactsSchema} takes them
 * @param options.catalogue - the shop's coolers; needed where an extra names one
 * @param options.typed - what stood in the fields, by path of the sheet
 * @returns sheet, control, limits, scenario and the two standing set-ups
 * @throws bad_input whose issues carry the facts' own paths
 */
export function createSheetFromFacts(
  facts: EightFacts,
  options: { catalogue?: readonly CatalogueCooler[]; typed?: TypedTexts } = {},
): BuildDraft {
  const archetype = getArchetype(facts.archetype)
  const typed = options.typed ?? {}
  const put = (sheet: BuildSheet, value: SheetValue) =>
    setSheetValue(sheet, { ...value, ...typed[value.path] })

  const weight = WEIGHT_SOURCES[facts.weightSource]
  let sheet = put(createArchetypeSheet(archetype), {
    path: 'vehicle.massKg',
    value: facts.truckMassKg,
    origin: weight.origin,
    relativeSpread: weight.relativeSpread,
  })
  sheet = put(sheet, { path: 'axle.ratio', value: facts.axleRatio, origin: 'maker' })
  sheet =
    facts.tireCode === undefined
      ? put(sheet, { path: 'vehicle.tyreRadiusM', value: facts.tyreRadiusM ?? 0, origin: 'measured' })
      : put(sheet, {
          path: 'vehicle.tyreRadiusM',
          value: parseTireCode(facts.tireCode).rollingRadiusM,
          typed: facts.tireCode.trim(),
          unit: 'tire size',
          origin: 'maker',
        })
  const coolers = listCoolers(facts, archetype, options.catalogue ?? [])
  // As it left the works nothing about the coolers is new: the archetype's values keep standing.
  if (JSON.stringify(coolers) !== JSON.stringify(archetype.build.cooling.coolers)) {
    const fromMaker = facts.coolers.extras.some(({ kind }) => kind === 'catalogue')
    sheet = setSheetBranch(sheet, 'cooling.coolers', coolers, fromMaker ? 'maker' : 'typical')
  }

  const build = deriveBuild(sheet)
  const load: Load =
    facts.trailerMassKg > 0
      ? {
          trailerMassKg: facts.trailerMassKg,
          trailerDragAreaM2: TRAILER_SHAPES[facts.trailerShape].dragAreaM2,
        }
      : {}
  const duty = createHillDuty(facts)
  const scenario: ScenarioDraft = {
    name: scenarioName(facts),
    load,
    duty: { ...duty, start: findSettledStart({ build, load, duty }) },
  }
  return {
    name: archetype.name,
    sheet,
    control: {
      generationsMatch: 'unknown',
      lockupCommand: 'unknown',
      loadSignal: 'unknown',
      brakeSwitchWired: 'unknown',
      lockupSeen: facts.lockupProven,
    },
    limits: createDefaultLimits(),
    scenario,
    setups: createStandingSetups({ build, scenario }),
  }
}
