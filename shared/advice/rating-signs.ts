import { createGenericCore } from '../build-sheet/generic-cooler'
import { restatePart } from '../build-sheet/catalogue'
import { findSheetValue } from '../build-sheet/sheet'
import { createGenericTank } from '../cooling-loop/generic-tank'
import { AppError } from '../errors'
import { RATING_AIR_DENSITY_KG_M3 } from '../heat/air'
import { airCapacityRate, oilCapacityRate } from '../heat/coolers'
import { crossFlowEffectiveness, LARGEST_NTU } from '../heat/effectiveness'
import { COOLANT_HEAT_CAPACITY_J_M3_K, makeOil } from '../heat/fluids'
import { GENERIC_COOLERS, REFERENCE_POINT } from '../heat/reference-point'
import { DEFAULTS } from '../heat/resolve'
import type { Warning } from '../heat/types'
import { AIR_CONSTRUCTIONS, type Cooler, type HeatInput } from '../schemas/heat-input'
import type { BuildSheet } from '../schemas/sheet'
import { wattsToBtuPerHour } from '../units/conversions'
import { countAsGeneric, countRadiatorAt, fillRating, isInAir, takeOut } from './cooler-remedies'
import { draft, type Sign } from './sign'
import type { Situation } from './situation'
import type { Advice } from './types'
import { figure, heat, joinWords, rise, words } from './words'

/** What is wrong with a rating before anything is computed with it. */

/** What a heat rating says nothing without, and how it is called. */
const CONDITIONS = {
  inletDifferenceK: 'temperature difference',
  oilFlowM3S: 'oil flow',
  airVelocityMps: 'air speed',
  coolantFlowM3S: 'coolant flow',
  pressureDropPa: 'pressure drop',
} as const
type Condition = keyof typeof CONDITIONS
const IN_AIR: readonly Condition[] = ['inletDifferenceK', 'oilFlowM3S', 'airVelocityMps']
const IN_TANK: readonly Condition[] = ['inletDifferenceK', 'oilFlowM3S', 'coolantFlowM3S']

/** Vehicle weights and towing classes, as they stand on the boxes of coolers. */
const WEIGHT_CLASS =
  /\b(gvwr?|gcwr?|(weight|tow|towing) class)\b|\b\d{1,3}[,. ]?\d{3} ?(lbs?|pounds|kg|kilograms)\b|\b\d{1,3}[,. ]?\d{3} ?#/i
const LARGE_NUMBER = /\d{1,3}(?:[, ]\d{3})+|\d{4,6}/g
/** A heat that is the number of the weight class, to within this share, is that number. */
const SAME_NUMBER = 0.01
/** What a radiator carries of the most it could, where its rating says more; judgement. */
const USUAL_RADIATOR_SHARE = 0.6

/** One cooler as it stands on the sheet, complete or not. */
interface SheetCooler {
  index: number
  at: string
  name: string
  construction: string
  required: readonly Condition[]
  missing: Condition[]
  /** Conditions that nobody gave for the rating. */
  guessed: Condition[]
  heatW: number | undefined
  heatGiven: boolean
  words: string
}

function listSheetCoolers(sheet: BuildSheet): SheetCooler[] {
  const indices = new Set(
    sheet.values.flatMap(({ path }) => /^cooling\.coolers\.(\d+)\./.exec(path)?.[1] ?? []).map(Number),
  )
  return [...indices].sort((a, b) => a - b).map((index) => readSheetCooler(sheet, index))
}

function readSheetCooler(sheet: BuildSheet, index: number): SheetCooler {
  const at = `cooling.coolers.${index}`
  const leaf = (name: string) => findSheetValue(sheet, `${at}.${name}`)
  const text = (name: string) => String(leaf(name)?.value ?? '')
  const construction = text('construction')
  const required = construction === 'in-tank' ? IN_TANK : IN_AIR
  const heatLeaf = leaf('rating.heatW')
  return {
    index,
    at,
    name: text('name') === '' ? `cooler ${index + 1}` : text('name'),
    construction,
    required,
    missing: [...required, 'pressureDropPa' as const].filter((one) => leaf(`rating.${one}`) === undefined),
    guessed: required.filter((one) => leaf(`rating.${one}`)?.origin === 'typical'),
    heatW: typeof heatLeaf?.value === 'number' ? heatLeaf.value : undefined,
    heatGiven: heatLeaf !== undefined && heatLeaf.origin !== 'typical',
    words: [text('name'), heatLeaf?.typed, heatLeaf?.unit].filter(Boolean).join(' '),
  }
}

/** Ratings that say no heat at all, or heat without saying when. A set-up with coolers of its own has no such doubts. */
export const ratingsOnTheSheet: Sign = (situation) => {
  const { request } = situation
  if (request.setup?.change.coolers !== undefined) return []
  return listSheetCoolers(request.sheet).flatMap((cooler) => {
    const weightClass = weightClassAdvice(situation, cooler)
    return weightClass.length > 0 ? weightClass : conditionsAdvice(situation, cooler)
  })
}

function weightClassAdvice(situation: Situation, cooler: SheetCooler): Advice[] {
  const { heatW, at, name } = cooler
  if (heatW === undefined || !WEIGHT_CLASS.test(cooler.words)) return []
  const isTheClass = listNumbers(cooler.words).some(
    (number) => isNear(wattsToBtuPerHour(heatW), number) || isNear(heatW, number),
  )
  if (!isTheClass && cooler.guessed.length + cooler.missing.length === 0) return []
  const text = isTheClass
    ? words`The heat of ${name} is the number of its weight class. A truck’s weight says nothing of the heat a core carries.`
    : words`${name} is sold by a weight class. The ${heat(heatW)} on the sheet is nobody’s heat rating.`
  return [
    draft('weight_class_rating', isTheClass ? 'ease-off' : 'watch', text, {
      action: words`Ask for heat at an oil flow, an air speed and a temperature difference; without them, count it by its size.`,
      value: heat(heatW),
      ...usualHeat(situation, cooler),
      at,
      remedies: countAsGeneric(situation, cooler.index),
    }),
  ]
}

const listNumbers = (text: string): number[] =>
  [...text.matchAll(LARGE_NUMBER)].map(([found]) => Number(found.replace(/[, ]/g, '')))
const isNear = (a: number, b: number): boolean => Math.abs(a - b) <= SAME_NUMBER * b

/** What a usual core of its kind and face carries at the reference point, to hold a heat against. */
function usualHeat({ request }: Situation, cooler: SheetCooler): Pick<Advice, 'limit'> {
  const face = findSheetValue(request.sheet, `${cooler.at}.faceAreaM2`)?.value
  const construction = AIR_CONSTRUCTIONS.find((one) => one === cooler.construction)
  if (construction === undefined || typeof face !== 'number') return {}
  const { name } = cooler
  const { rating } = createGenericCore({
    name,
    construction,
    position: 'ahead-of-condenser',
    faceAreaM2: face,
  })
  return { limit: heat(rating.heatW) }
}

function conditionsAdvice(situation: Situation, cooler: SheetCooler): Advice[] {
  const { heatW, name, missing, guessed, at } = cooler
  if (heatW === undefined || (missing.length === 0 && !(cooler.heatGiven && guessed.length > 0))) return []
  const lacks = missing.length > 0 ? missing : guessed
  const listed = joinWords(lacks.map((one) => CONDITIONS[one]))
  const text =
    missing.length > 0
      ? words`${name} is rated at ${heat(heatW)}, but its ${listed} is not on the sheet: it cannot be computed.`
      : words`${name} is rated at ${heat(heatW)}, but nobody gave the ${listed} of that rating; usual ones stand in.`
  return [
    draft('rating_lacks_conditions', missing.length > 0 ? 'stop' : 'watch', text, {
      action: words`Look for them beside the rating or ask the maker: the same core carries twice the heat at twice the temperature difference.`,
      value: heat(heatW),
      ...usualHeat(situation, cooler),
      at,
      remedies:
        missing.length > 0
          ? fillRating(situation.request.sheet, at, usualConditions(cooler))
          : countAsGeneric(situation, cooler.index),
    }),
  ]
}

/** What stands in for conditions that are missing: the reference point, or a usual radiator tank. */
function usualConditions({ construction, missing }: SheetCooler): Record<string, number> {
  const tank = createGenericTank().rating
  const inAir = AIR_CONSTRUCTIONS.find((one) => one === construction)
  const usual: Record<string, number | undefined> =
    inAir === undefined ? tank : { ...REFERENCE_POINT, pressureDropPa: GENERIC_COOLERS[inAir].pressureDropPa }
  return Object.fromEntries(missing.map((one) => [one, usual[one] ?? tank[one as keyof typeof tank] ?? 0]))
}

/** A rating no exchanger could have: the model gives no answer at all. */
export const impossibleRatings: Sign = (situation) => {
  const { refusal, input } = situation
  if (refusal?.code !== 'rating_impossible' || input === null) return []
  return refusal.issues.flatMap(({ path }) => {
    const index = /^build\.cooling\.coolers\.(\d+)\.rating$/.exec(path)?.[1]
    if (index === undefined) return path.includes('radiator') ? [impossibleRadiator(input)] : []
    const cooler = input.build.cooling.coolers[Number(index)]
    return cooler === undefined ? [] : [impossibleCooler(situation, cooler, Number(index), input)]
  })
}

/** Most heat an endlessly large exchanger would carry at the conditions of a rating [W]. */
export function mostHeatOfRating(cooler: Cooler, input: HeatInput): number {
  const { rating } = cooler
  const oil = makeOil(input.build.transmission.fluid)
  const oilRate = oilCapacityRate(oil, rating.oilInC ?? DEFAULTS.ratingOilInC, rating.oilFlowM3S)
  const otherRate = isInAir(cooler)
    ? airCapacityRate(RATING_AIR_DENSITY_KG_M3, cooler.faceAreaM2, cooler.rating.airVelocityMps)
    : cooler.rating.coolantFlowM3S * COOLANT_HEAT_CAPACITY_J_M3_K
  return mostHeat(oilRate, otherRate, rating.inletDifferenceK)
}

function mostHeat(rateA: number, rateB: number, differenceK: number): number {
  const [smaller, larger] = [Math.min(rateA, rateB), Math.max(rateA, rateB)]
  return crossFlowEffectiveness(LARGEST_NTU, smaller / larger) * smaller * differenceK
}

function impossibleCooler(situation: Situation, cooler: Cooler, index: number, input: HeatInput): Advice {
  const { heatW, inletDifferenceK, oilFlowM3S } = cooler.rating
  const mostW = mostHeatOfRating(cooler, input)
  const text = words`${cooler.name} is rated at ${heat(heatW)}; with ${figure(oilFlowM3S, 'volumeFlow')} of oil and ${rise(inletDifferenceK)} between oil and ${isInAir(cooler) ? 'air' : 'coolant'}, no core of any size carries more than ${heat(mostW)}.`
  return draft('rating_impossible', 'stop', text, {
    action: words`Check heat, temperature difference and both flows against the maker’s sheet; one of them was read in another unit or belongs to another rating.`,
    value: heat(heatW),
    limit: heat(mostW),
    at: `cooling.coolers.${index}`,
    remedies: [...countAsGeneric(situation, index), ...takeOut(situation, index)],
  })
}

function impossibleRadiator(input: HeatInput): Advice {
  const { faceAreaM2, rating } = input.build.cooling.radiator
  const { heatW, inletDifferenceK } = rating
  const mostW = mostHeat(
    rating.coolantFlowM3S * COOLANT_HEAT_CAPACITY_J_M3_K,
    airCapacityRate(RATING_AIR_DENSITY_KG_M3, faceAreaM2, rating.airVelocityMps),
    inletDifferenceK,
  )
  const text = words`The radiator is rated at ${heat(heatW)}; with the air its face takes and ${rise(inletDifferenceK)} between coolant and air, none carries more than ${heat(mostW)}.`
  return draft('rating_impossible', 'stop', text, {
    action: words`Check the radiator’s heat, face, air speed and temperature difference.`,
    value: heat(heatW),
    limit: heat(mostW),
    at: 'cooling.radiator',
    remedies: [countRadiatorAt(Math.round(USUAL_RADIATOR_SHARE * mostW))],
  })
}

/** A cooler of the loop that is a part of the catalogue whose ratings contradict one another. */
export const misfitRatings: Sign = (situation) => {
  const { request, input } = situation
  return (input?.build.cooling.coolers ?? []).flatMap((cooler, index) => {
    const part = request.parts?.find(({ name }) => name === cooler.name)
    if (part === undefined || part.construction === 'in-tank' || part.ratings.length < 2) return []
    const worst = worstMisfit(() => restatePart(part).warnings)
    if (worst === undefined) return []
    const { value = 0, limit = 0 } = worst
    const side = value < 0 ? 'more' : 'less'
    const text = words`The ratings of ${cooler.name} do not fit one another: one states ${side} heat than one core could have beside the others, by ${figure(Math.abs(value), 'share')}.`
    return [
      draft('rating_misfit', 'watch', text, {
        value: figure(Math.abs(value), 'share'),
        limit: figure(limit, 'share'),
        at: `cooling.coolers.${index}`,
        remedies: countAsGeneric(situation, index),
      }),
    ]
  })
}

function worstMisfit(read: () => readonly Warning[]): Warning | undefined {
  try {
    return read()
      .filter(({ code }) => code === 'rating_misfit')
      .sort((a, b) => Math.abs(b.value ?? 0) - Math.abs(a.value ?? 0))[0]
  } catch (error) {
    if (error instanceof AppError) return undefined
    throw error
  }
}
