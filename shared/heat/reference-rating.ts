import type { AirCooler, Fluid } from '../schemas/heat-input'
import { RATING_AIR_DENSITY_KG_M3 } from './air'
import {
  CONSTRUCTIONS,
  airCapacityRate,
  conductanceOfRating,
  exchangerHeat,
  impossibleRating,
  oilCapacityRate,
} from './coolers'
import type { ConstructionLaw } from './coolers'
import { kinematicViscosity, makeOil } from './fluids'
import type { Oil } from './fluids'
import { OIL_FLOW_LIMIT_W, REFERENCE_FLUID, REFERENCE_POINT, heatAtReferencePoint } from './reference-point'
import { DEFAULTS } from './resolve'
import type { MakerRating, RatedPart, RestatedPart } from './types'
import { limitedByOilFlowWarning, misfitWarning } from './warnings'

/** Makers' ratings, whatever their conditions, restated at the one reference point. */

/** A rating further from the fitted part than this is marked. Judgement. */
const LARGEST_MISFIT = 0.1

/** One rating as the fit sees it. */
interface RatingFact {
  rating: MakerRating
  uaWK: number
  oilRate: number
  airRate: number
  /** Air-side and oil-side resistance relative to the reference point. */
  airFactor: number
  oilFactor: number
}

/**
 * Resistances of a rating's conditions relative to the reference point.
 * Equation: air (V/4 m/s)^-a, oil (q_ref/q)^m (ν/ν_ref)^n.
 */
function factsOf(
  oil: Oil,
  law: ConstructionLaw,
  faceAreaM2: number,
  rating: MakerRating,
  path: string,
): RatingFact {
  const oilInC = rating.oilInC ?? DEFAULTS.ratingOilInC
  const oilRate = oilCapacityRate(oil, oilInC, rating.oilFlowM3S)
  const airRate = airCapacityRate(RATING_AIR_DENSITY_KG_M3, faceAreaM2, rating.airVelocityMps)
  const uaWK = conductanceOfRating({
    heatW: rating.heatW,
    inletDifferenceK: rating.inletDifferenceK,
    capacityRateA: oilRate,
    capacityRateB: airRate,
  })
  if (uaWK === undefined) throw impossibleRating(path)
  const viscosityRatio = kinematicViscosity(oil, oilInC) / kinematicViscosity(oil, REFERENCE_POINT.oilInC)
  return {
    rating,
    uaWK,
    oilRate,
    airRate,
    airFactor: (rating.airVelocityMps / REFERENCE_POINT.airVelocityMps) ** -law.airExponent,
    oilFactor:
      (REFERENCE_POINT.oilFlowM3S / rating.oilFlowM3S) ** law.flowExponent *
      viscosityRatio ** law.viscosityExponent,
  }
}

/** Conductance at the reference point that one rating gives at an air share. */
function uaFromFact(fact: RatingFact, airShare: number): number {
  return fact.uaWK * (airShare * fact.airFactor + (1 - airShare) * fact.oilFactor)
}

/** Heat a fitted part carries at a rating's conditions [W]. */
function heatAt(fact: RatingFact, uaWK: number, airShare: number): number {
  const ua = uaWK / (airShare * fact.airFactor + (1 - airShare) * fact.oilFactor)
  return exchangerHeat(ua, fact.oilRate, fact.airRate, fact.rating.inletDifferenceK)
}

const misfitOf = (fact: RatingFact, uaWK: number, airShare: number) =>
  heatAt(fact, uaWK, airShare) / fact.rating.heatW - 1

/** Sum of squared misfits of the best conductance at one air share, and that conductance. */
function bestAtShare(facts: readonly RatingFact[], airShare: number): { uaWK: number; sum: number } {
  const sumAt = (uaWK: number) => facts.reduce((sum, fact) => sum + misfitOf(fact, uaWK, airShare) ** 2, 0)
  const candidates = facts.map((fact) => uaFromFact(fact, airShare))
  const logUa = smallest(
    (value) => sumAt(Math.exp(value)),
    Math.log(Math.min(...candidates)) - 1e-9,
    Math.log(Math.max(...candidates)) + 1e-9,
  )
  return { uaWK: Math.exp(logUa), sum: sumAt(Math.exp(logUa)) }
}

const GOLDEN = (Math.sqrt(5) - 1) / 2

/** Argument of the smallest value between two bounds, by golden section; the function has one valley. */
function smallest(f: (x: number) => number, from: number, to: number): number {
  let [a, b] = [from, to]
  let x1 = b - GOLDEN * (b - a)
  let x2 = a + GOLDEN * (b - a)
  let f1 = f(x1)
  let f2 = f(x2)
  while (b - a > 1e-10 * (1 + Math.abs(a))) {
    if (f1 <= f2) {
      ;[b, x2, f2] = [x2, x1, f1]
      x1 = b - GOLDEN * (b - a)
      f1 = f(x1)
    } else {
      ;[a, x1, f1] = [x1, x2, f2]
      x2 = a + GOLDEN * (b - a)
      f2 = f(x2)
    }
  }
  return 0.5 * (a + b)
}

/**
 * Whether ratings tell air and oil side apart: at least one differs from the first in the ratio of the two factors.
 */
function tellsSidesApart(facts: readonly RatingFact[]): boolean {
  const ratio = (fact: RatingFact) => fact.airFactor / fact.oilFactor
  return facts.some((fact) => Math.abs(ratio(fact) / ratio(facts[0]!) - 1) > 1e-6)
}

/** Pressure drop at the reference point, the geometric mean over the ratings [Pa]. */
function dropAtReference(facts: readonly RatingFact[], oil: Oil, law: ConstructionLaw): number {
  const logs = facts.map(({ rating }) => {
    const viscosityRatio =
      kinematicViscosity(oil, REFERENCE_POINT.oilInC) /
      kinematicViscosity(oil, rating.oilInC ?? DEFAULTS.ratingOilInC)
    return Math.log(
      rating.pressureDropPa *
        (REFERENCE_POINT.oilFlowM3S / rating.oilFlowM3S) ** law.dropFlowExponent *
        viscosityRatio ** law.dropViscosityExponent,
    )
  })
  return Math.exp(logs.reduce((sum, value) => sum + value, 0) / logs.length)
}

/**
 * Restates an air cooler at the reference point. One rating: its conductance is moved there by the construction's laws.
 * Several: conductance and air share are those with the least squared relative misfit of heat.
 * @param part - a cooler of a build, or construction, face area and ratings of a catalogue part
 * @param fluid - fluid in the loop; a standard ATF unless named
 * @returns heat, UA, air share and pressure drop at the reference point, and the misfit of every rating
 * @throws AppError rating_impossible naming the rating
 * Source: least squares; laws of `CONSTRUCTIONS`.
 */
export function restateAtReferencePoint(
  part: RatedPart | AirCooler,
  fluid: Fluid = REFERENCE_FLUID,
): RestatedPart {
  const oil = makeOil(fluid)
  const law = CONSTRUCTIONS[part.construction]
  const single = 'rating' in part
  const ratings = single ? [part.rating] : part.ratings
  const facts = ratings.map((rating, index) =>
    factsOf(oil, law, part.faceAreaM2, rating, single ? 'rating' : `ratings.${index}`),
  )
  const givenShare = part.airShare ?? law.airShare
  const airShare =
    facts.length > 1 && part.airShare === undefined && tellsSidesApart(facts)
      ? smallest((share) => bestAtShare(facts, share).sum, 0, 1)
      : givenShare
  const uaWK = facts.length > 1 ? bestAtShare(facts, airShare).uaWK : uaFromFact(facts[0]!, airShare)
  const misfits = facts.map((fact) => {
    const misfit = misfitOf(fact, uaWK, airShare)
    return { misfit, marked: Math.abs(misfit) > LARGEST_MISFIT }
  })
  const heatW = heatAtReferencePoint(oil, uaWK, part.faceAreaM2)
  return {
    heatW,
    uaWK,
    airShare,
    pressureDropPa: dropAtReference(facts, oil, law),
    limitedByOilFlow: heatW > OIL_FLOW_LIMIT_W,
    misfits,
    warnings: [
      ...(heatW > OIL_FLOW_LIMIT_W ? [limitedByOilFlowWarning(heatW, OIL_FLOW_LIMIT_W, '')] : []),
      ...misfits.flatMap(({ misfit, marked }, index) =>
        marked ? [misfitWarning(misfit, LARGEST_MISFIT, `ratings.${index}`)] : [],
      ),
    ],
  }
}
