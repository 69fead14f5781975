import { AppError } from '../errors'
import { estimate, restateAtReferencePoint } from '../heat'
import { REFERENCE_POINT } from '../heat/reference-point'
import type { RestatedPart } from '../heat/types'
import type { Targets } from '../schemas/estimate'
import type { CatalogueAirCooler, CatalogueCooler, CatalogueTankCooler } from '../schemas/catalogue-cooler'
import type { AirCooler, AirPosition, Cooler, HeatInput, TankCooler } from '../schemas/heat-input'

/** From a catalogue part to the model's cooler, and which parts hold a target when they are added to a truck. */

/** Fitting several ratings costs more than driving the truck, and a part is ranked at every change of a truck. */
const restatedParts = new WeakMap<CatalogueAirCooler, RestatedPart>()

/**
 * A part's ratings brought to the common reference point; only coolers in air have one. A part is not changed in place:
 * the same object gives the same answer.
 *
 * @throws rating_impossible naming the rating that cannot be
 */
export function restatePart(part: CatalogueAirCooler): RestatedPart {
  const known = restatedParts.get(part)
  if (known !== undefined) return known
  const { construction, faceAreaM2, ratings } = part
  const restated = restateAtReferencePoint({ construction, faceAreaM2, ratings })
  restatedParts.set(part, restated)
  return restated
}

/**
 * The model's cooler for a part. A single rating is taken as its maker states it; of several, the one core that fits them
 * best (least squares) stands at the reference point with the air share it came out with.
 *
 * @param part - from the catalogue
 * @param position - where it is mounted; an in-tank cooler always sits in the radiator tank
 * @throws rating_impossible when its ratings cannot be
 */
export function toModelCooler(part: CatalogueAirCooler, position: AirPosition): AirCooler
export function toModelCooler(part: CatalogueTankCooler, position?: AirPosition): TankCooler
export function toModelCooler(part: CatalogueCooler, position: AirPosition): Cooler
export function toModelCooler(part: CatalogueCooler, position?: AirPosition): Cooler {
  if (part.construction === 'in-tank')
    return {
      name: part.name,
      construction: 'in-tank',
      position: 'radiator-tank',
      rating: nearestRating(part),
    }
  const { construction, faceAreaM2, name, ratings } = part
  const base = { name, construction, position: position ?? 'ahead-of-condenser', faceAreaM2 }
  const [only, ...more] = ratings
  if (only !== undefined && more.length === 0) return { ...base, rating: only }
  const { heatW, airShare, pressureDropPa } = restatePart(part)
  return { ...base, airShare, rating: { ...REFERENCE_POINT, heatW, pressureDropPa } }
}

/** Of an in-tank cooler's ratings, the one whose oil flow is nearest to that of the reference point. */
function nearestRating(part: CatalogueTankCooler): TankCooler['rating'] {
  const distance = (rating: TankCooler['rating']) =>
    Math.abs(Math.log(rating.oilFlowM3S / REFERENCE_POINT.oilFlowM3S))
  const [nearest] = [...part.ratings].sort((a, b) => distance(a) - distance(b))
  if (nearest === undefined)
    throw new AppError('bad_input', { issues: [{ path: 'ratings', message: 'needs at least one rating' }] })
  return nearest
}

export type RankBasis = 'peak' | 'equilibrium'

export interface RankRequest {
  input: HeatInput
  parts: readonly CatalogueCooler[]
  /** Where parts in air are mounted. */
  position: AirPosition
  targets: Targets
  /** Peak of the drive cycle as driven, or the worst segment as if it never ended. */
  basis?: RankBasis
}

/** How a part was put into the loop. */
export type Placement = 'added-last' | 'replaces-tank' | 'added-first'

export interface RankedPart {
  part: CatalogueCooler
  placement: Placement
  /** Null for an in-tank cooler, which has no air side to restate, and for ratings that cannot be. */
  restated: RestatedPart | null
  /** The worst misfit of its ratings, as a share; null where they cannot be compared. */
  worstMisfit: number | null
  /** Over 10 %: its ratings do not fit one another. */
  misfitMarked: boolean
  peakSumpC: number | null
  peakCoolerInletC: number | null
  /** To the target that is nearest, negative when over it; null when there is no answer. */
  marginK: number | null
  decidedBy: 'sumpC' | 'coolerInletC' | null
  reaches: boolean
  /** More core would not help much: at the reference point it carries what the oil flow can. */
  limitedByOilFlow: boolean
  /** Why there is no answer. */
  problem: string | null
}

/** The loop with a part in it: cores in air as the last in series, a tank cooler in place of the one there is. */
function placePart(
  coolers: readonly Cooler[],
  part: CatalogueCooler,
  position: AirPosition,
): { coolers: Cooler[]; placement: Placement } {
  const cooler = toModelCooler(part, position)
  if (cooler.construction !== 'in-tank') return { coolers: [...coolers, cooler], placement: 'added-last' }
  const at = coolers.findIndex(({ construction }) => construction === 'in-tank')
  return at < 0
    ? { coolers: [cooler, ...coolers], placement: 'added-first' }
    : { coolers: coolers.with(at, cooler), placement: 'replaces-tank' }
}

function withCoolers(input: HeatInput, coolers: Cooler[]): HeatInput {
  return { ...input, build: { ...input.build, cooling: { ...input.build.cooling, coolers } } }
}

/** Temperatures that count: the peaks of the drive cycle, or the worst of its segments as if each never ended. */
export function findTemperatures(
  input: HeatInput,
  basis: RankBasis,
): { sumpC: number; coolerInletC: number } {
  const answer = estimate(input)
  if (basis === 'peak') return { sumpC: answer.peakSumpC, coolerInletC: answer.peakCoolerInletC }
  const settled = answer.segments.flatMap(({ equilibrium }) => equilibrium ?? [])
  return {
    sumpC: Math.max(...settled.map(({ sumpC }) => sumpC)),
    coolerInletC: Math.max(...settled.map(({ coolerInletC }) => coolerInletC)),
  }
}

const MAX_COOLERS = 6

function rankPart(part: CatalogueCooler, request: RankRequest): RankedPart {
  const nothing: RankedPart = {
    part,
    placement: 'added-last',
    restated: null,
    worstMisfit: null,
    misfitMarked: false,
    peakSumpC: null,
    peakCoolerInletC: null,
    marginK: null,
    decidedBy: null,
    reaches: false,
    limitedByOilFlow: false,
    problem: null,
  }
  try {
    const restated = part.construction === 'in-tank' ? null : restatePart(part)
    const placed = placePart(request.input.build.cooling.coolers, part, request.position)
    const known: RankedPart = {
      ...nothing,
      placement: placed.placement,
      restated,
      worstMisfit:
        restated === null ? null : Math.max(...restated.misfits.map(({ misfit }) => Math.abs(misfit))),
      misfitMarked: restated?.misfits.some(({ marked }) => marked) ?? false,
      limitedByOilFlow: restated?.limitedByOilFlow ?? false,
    }
    if (placed.coolers.length > MAX_COOLERS)
      return { ...known, problem: `the loop takes at most ${MAX_COOLERS} coolers; take one out first` }
    const at = findTemperatures(withCoolers(request.input, placed.coolers), request.basis ?? 'peak')
    const margins = (['sumpC', 'coolerInletC'] as const).flatMap((name) => {
      const target = request.targets[name]
      return target === undefined ? [] : [{ name, marginK: target - at[name] }]
    })
    const [worst] = margins.sort((a, b) => a.marginK - b.marginK)
    return {
      ...known,
      peakSumpC: at.sumpC,
      peakCoolerInletC: at.coolerInletC,
      marginK: worst?.marginK ?? null,
      decidedBy: worst?.name ?? null,
      reaches: worst !== undefined && worst.marginK >= 0,
    }
  } catch (error) {
    if (error instanceof AppError) return { ...nothing, problem: error.message }
    throw error
  }
}

/**
 * Every part of a catalogue through the whole model: does the truck hold its targets with it?
 *
 * @param request - the input that judges, the parts, where they are mounted, the targets
 * @returns those that reach first, the cheapest on top (at one price the larger margin); then the others, the nearest
 *   first; last those without an answer
 */
export function rankParts(request: RankRequest): RankedPart[] {
  const order = (ranked: RankedPart) => (ranked.reaches ? 0 : ranked.marginK !== null ? 1 : 2)
  const margin = (ranked: RankedPart) => ranked.marginK ?? -Infinity
  return request.parts
    .map((part) => rankPart(part, request))
    .sort((a, b) => {
      if (order(a) !== order(b)) return order(a) - order(b)
      if (a.reaches && a.part.priceCents !== b.part.priceCents) return a.part.priceCents - b.part.priceCents
      return margin(a) === margin(b) ? 0 : margin(b) - margin(a)
    })
}
