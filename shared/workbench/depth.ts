import { simpleBand, type Band } from '../build-sheet/band'
import { rankParts, type RankedPart } from '../build-sheet/catalogue'
import { judgeAnswer, targetsOfLimits, type AnswerJudgement } from '../build-sheet/limits'
import { deriveInputs } from '../build-sheet/setups'
import { listSpreads } from '../build-sheet/spreads'
import type { GradeBandPoint, GradeChartData, GradeSeries } from '../charts/grade-chart'
import { AppError } from '../errors'
import { estimate, sizing } from '../heat'
import type { TargetName } from '../heat/types'
import type { CatalogueCooler } from '../schemas/catalogue-cooler'
import {
  AIR_CONSTRUCTIONS,
  AIR_POSITIONS,
  type AirConstruction,
  type AirPosition,
  type HeatInput,
} from '../schemas/heat-input'
import { milesPerHourToMetersPerSecond } from '../units/conversions'
import { differenceF, differenceFToK } from '../units/temperature'
import type { Answer } from './answer'
import { askGrades, climbOfInput, computeOtherCurves, gradeHeld } from './grade-evidence'
import { findHill } from './hill'
import type { DepthRequest, WorkbenchRequest, WorkbenchSetup } from './request'

/** How sure the two peaks are, and which doubts make them so. */
export interface PeakBands {
  sumpC: { low: number; high: number }
  coolerInletC: { low: number; high: number }
  /** The largest doubts of the place that decides, in words, with their share of the variance. */
  doubts: { words: string; share: number }[]
}

/** Fluid life on this drive cycle, by the published wordings of the same rule. */
export interface FluidEvidence {
  /** What halves the life [K], shortest life first. */
  byHalving: { halvingK: number; hours: number; distanceM: number | null; cycles: number }[]
}

/** The cooler needed at one construction and place. */
export interface SizingRow {
  construction: AirConstruction
  position: AirPosition
  faceAreaM2: number | null
  heatW: number | null
  /** More core would not help: over what the oil flow carries at the reference point. */
  limitedByOilFlow: boolean
  decidedBy: TargetName | null
  problem: string | null
}

/** One catalogue part in this truck. */
export interface PartRow {
  id: string
  name: string
  construction: CatalogueCooler['construction']
  widthM: number
  heightM: number
  depthM: number
  ports: string
  priceCents: number
  placement: RankedPart['placement']
  restatedW: number | null
  misfit: number | null
  misfitMarked: boolean
  limitedByOilFlow: boolean
  peakSumpC: number | null
  peakCoolerInletC: number | null
  marginK: number | null
  decidedBy: TargetName | null
  reaches: boolean
  problem: string | null
}

/** Something to do instead of buying, with what it would come to. */
export interface Alternative {
  id: 'lock' | 'drop-a-gear' | 'slow-down' | 'all'
  words: string
  peakSumpC: number | null
  peakCoolerInletC: number | null
  judgement: AnswerJudgement['judgement'] | null
  problem: string | null
}

/** One set-up on the same scenario. */
export interface SetupRow {
  id: string
  name: string
  peakSumpC: number | null
  peakCoolerInletC: number | null
  judgement: AnswerJudgement['judgement'] | null
  /** The same if it did lock, where lock-up is not proven. */
  ifLockedSumpC: number | null
  problem: string | null
}

/** Everything under the answer that takes longer than a keystroke. */
export interface Depth {
  bands: PeakBands
  /** Of the grade that is held; null where none is, or every grade looked at is. */
  heldBand: { low: number; high: number } | null
  gradeBand: GradeBandPoint[]
  otherCurves: GradeSeries[]
  fluid: FluidEvidence
  setups: SetupRow[]
  alternatives: Alternative[]
  sizing: SizingRow[]
  parts: PartRow[]
}

/** One part of the deeper look; the caller may breathe, or give up, between two of them. */
export type DepthStage = (request: DepthRequest, answer: Answer, grades: GradeChartData) => Partial<Depth>

/** What a first look asks for: no number without its band. */
export const BRIEF_STAGES: readonly DepthStage[] = [(request) => ({ bands: computePeakBands(request) })]

/** Quick enough to come with the page from the server. */
const QUICK_STAGES: readonly DepthStage[] = [
  ...BRIEF_STAGES,
  (request, _answer, grades) => ({ otherCurves: computeOtherCurves(request, grades) }),
  (request) => ({ setups: computeSetups(request), alternatives: computeAlternatives(request) }),
  (request) => ({ fluid: computeFluid(request) }),
]

/** Left to the browser's worker: together they take several times as long as all the rest of a page. */
const LONG_STAGES: readonly DepthStage[] = [
  (request) => ({ sizing: computeSizing(request) }),
  (request, _answer, grades) => ({ gradeBand: computeGradeBand(request, grades) }),
  (request, _answer, grades) => ({ heldBand: computeHeldBand(request, grades) }),
  (request) => (request.coolers === null ? {} : { parts: computeParts(request, request.coolers) }),
]

/** In the order in which a person looks. */
export const DEPTH_STAGES: readonly DepthStage[] = [...QUICK_STAGES, ...LONG_STAGES]

/** What of it comes with the page. */
export function computeQuickDepth(
  request: DepthRequest,
  answer: Answer,
  grades: GradeChartData,
): Partial<Depth> {
  return QUICK_STAGES.reduce<Partial<Depth>>(
    (depth, stage) => ({ ...depth, ...stage(request, answer, grades) }),
    {},
  )
}

const MOST_DOUBTS = 4

function computePeakBands(request: DepthRequest): PeakBands {
  const { judged } = deriveInputs(request)
  const bands = simpleBand({ input: judged, spreads: listSpreads(request.sheet) })
  const span = ({ low, high }: Band) => ({ low: round(low, 2), high: round(high, 2) })
  const decidedBy = judgeAnswer(
    { peakSumpC: bands.peakSumpC.value, peakCoolerInletC: bands.peakCoolerInletC.value },
    request.limits,
  ).decidedBy
  const decider = decidedBy === 'sump' ? bands.peakSumpC : bands.peakCoolerInletC
  return {
    sumpC: span(bands.peakSumpC),
    coolerInletC: span(bands.peakCoolerInletC),
    doubts: decider.parts
      .filter(({ share }) => share > 0.01)
      .slice(0, MOST_DOUBTS)
      .map(({ words, share }) => ({ words, share: round(share, 3) })),
  }
}

/** How sure the grade is that is held: the same doubts, each moved alone. */
function computeHeldBand(request: DepthRequest, grades: GradeChartData): Depth['heldBand'] {
  if (grades.held.grade === null || grades.held.endedBy === 'none') return null
  const { judged } = deriveInputs(request)
  const { heldGrade } = simpleBand({
    input: judged,
    spreads: listSpreads(request.sheet),
    measure: (input: HeatInput) => ({
      heldGrade: gradeHeld(input, findHill(input.duty), climbOfInput(input), request.limits).grade ?? 0,
    }),
  })
  return { low: round(Math.max(0, heldGrade.low), 4), high: round(heldGrade.high, 4) }
}

/** Grades at which the band is worked out; between them it is drawn straight. */
const BAND_POINTS = 8

function computeGradeBand(request: DepthRequest, grades: GradeChartData): GradeBandPoint[] {
  const { judged } = deriveInputs(request)
  const present = grades.series.find(({ kind }) => kind === 'present')
  if (present === undefined) return []
  const asked = bandGrades(present)
  if (asked.length === 0) return []
  const bands = simpleBand({
    input: judged,
    spreads: listSpreads(request.sheet),
    measure: (input: HeatInput): Record<string, number> => {
      const hill = findHill(input.duty)
      const points = askGrades(input, { hill, climb: climbOfInput(input), maxGrade: grades.maxGrade }, asked)
      return Object.fromEntries(
        points.flatMap((point) => [
          [`sump${point.grade}`, point.sumpC],
          [`line${point.grade}`, point.coolerInletC],
        ]),
      )
    },
  })
  return asked.flatMap((grade) => {
    const sumpC = bands[`sump${grade}`]
    const coolerInletC = bands[`line${grade}`]
    if (!isWhole(sumpC) || !isWhole(coolerInletC)) return []
    return [
      {
        grade,
        sumpC: { low: round(sumpC.low, 2), high: round(sumpC.high, 2) },
        coolerInletC: { low: round(coolerInletC.low, 2), high: round(coolerInletC.high, 2) },
      },
    ]
  })
}

const isWhole = (band: Band | undefined): band is Band =>
  band !== undefined && Number.isFinite(band.low) && Number.isFinite(band.high)

/** Even steps along the curve, and both sides of every jump, so that the band breaks where the curve does. */
function bandGrades(series: GradeSeries): number[] {
  const points = series.points
  const last = points.length - 1
  const chosen = new Set<number>()
  for (let step = 0; step <= BAND_POINTS; step += 1) chosen.add(Math.round((last * step) / BAND_POINTS))
  points.forEach((point, index) => {
    const before = points[index - 1]
    if (before && before.locked !== point.locked) chosen.add(index - 1).add(index)
  })
  return [...chosen]
    .sort((a, b) => a - b)
    .flatMap((index) => {
      const grade = points[index]?.grade
      return grade === undefined ? [] : [grade]
    })
}

/**
 * Rises that halve a fluid's life in the wordings that are printed: 10 °C, 20 °F, 25 °F. Common practice, no primary source.
 */
export const HALVING_WORDINGS_K = [
  10,
  differenceFToK(differenceF(20)),
  differenceFToK(differenceF(25)),
] as const

function computeFluid(request: DepthRequest): FluidEvidence {
  const { judged } = deriveInputs(request)
  const byHalving = HALVING_WORDINGS_K.map((halvingK) => {
    const answer = estimate({ ...judged, fluidLife: { ...judged.fluidLife, halvingK } })
    return {
      halvingK,
      hours: answer.hoursToFluidChange,
      distanceM: answer.distanceToFluidChangeM,
      cycles: answer.cyclesToFluidChange,
    }
  })
  return { byHalving: byHalving.sort((a, b) => a.hours - b.hours) }
}

function peaksOf(input: HeatInput, request: WorkbenchRequest) {
  const { peakSumpC, peakCoolerInletC } = estimate(input)
  return {
    peakSumpC,
    peakCoolerInletC,
    judgement: judgeAnswer({ peakSumpC, peakCoolerInletC }, request.limits).judgement,
    problem: null,
  }
}

const NO_PEAKS = { peakSumpC: null, peakCoolerInletC: null, judgement: null } as const

/** Runs a computation whose refusal is an answer too. */
function orProblem<T>(compute: () => T, otherwise: (message: string) => T): T {
  try {
    return compute()
  } catch (error) {
    if (error instanceof AppError) return otherwise(error.details.issues?.[0]?.message ?? error.message)
    throw error
  }
}

function computeSetups(request: DepthRequest): SetupRow[] {
  return [request.setup, ...request.others].map((setup) =>
    orProblem<SetupRow>(
      () => {
        const inputs = deriveInputs({ ...request, setup })
        const ifLocked =
          inputs.judgedBy === 'unlocked' && inputs.locked !== null ? estimate(inputs.locked) : null
        return {
          id: setup.id,
          name: setup.name,
          ...peaksOf(inputs.judged, request),
          ifLockedSumpC: ifLocked?.peakSumpC ?? null,
        }
      },
      (problem) => ({ id: setup.id, name: setup.name, ...NO_PEAKS, ifLockedSumpC: null, problem }),
    ),
  )
}

const SLOWER_BY_MPS = milesPerHourToMetersPerSecond(5)
/** A crawl is not made slower (20 mph). */
const SLOWER_FROM_MPS = milesPerHourToMetersPerSecond(20)

/** What could be done without buying anything: lock it, drop a gear, slow down, and all of it. */
function computeAlternatives(request: DepthRequest): Alternative[] {
  const inputs = deriveInputs(request)
  const hill = findHill(inputs.judged.duty)
  const gear = hill.index === undefined ? undefined : gearOnHill(inputs.judged, hill.index)
  const change = request.setup.change
  const canLock = inputs.judgedBy === 'unlocked' && inputs.locked !== null
  const lower = gear !== undefined && gear > 1 ? { topGear: gear - 1 } : undefined
  const slower = hill.speedMps >= SLOWER_FROM_MPS ? { speedMps: hill.speedMps - SLOWER_BY_MPS } : undefined
  const changes: { id: Alternative['id']; words: string; change: WorkbenchSetup['change'] }[] = []
  if (canLock)
    changes.push({
      id: 'lock',
      words: 'Prove lock-up, so that the converter locks',
      change: { lockup: 'always' },
    })
  if (lower)
    changes.push({
      id: 'drop-a-gear',
      words: `Drop a gear: ${ordinal(lower.topGear)} at most`,
      change: lower,
    })
  if (slower)
    changes.push({ id: 'slow-down', words: 'Slow down by 5 mph (8 km/h) on the climb', change: slower })
  if (changes.length > 1)
    changes.push({
      id: 'all',
      words: changes.length === 2 ? 'Both' : 'All three',
      change: { ...(canLock ? { lockup: 'always' as const } : {}), ...lower, ...slower },
    })
  return changes.map((one) =>
    orProblem<Alternative>(
      () => {
        const changed = deriveInputs({ ...request, setup: { change: { ...change, ...one.change } } })
        return { id: one.id, words: one.words, ...peaksOf(changed.judged, request) }
      },
      (problem) => ({ id: one.id, words: one.words, ...NO_PEAKS, problem }),
    ),
  )
}

function gearOnHill(input: HeatInput, index: number): number | undefined {
  return estimate(input).segments[index]?.gear
}

const ORDINALS = ['', '1st', '2nd', '3rd']
const ordinal = (count: number): string => ORDINALS[count] ?? `${count}th`

/** Over this a core is limited by the oil flow at the reference point, not by its size [W]. */
const OIL_FLOW_LIMIT_W = 9500

function computeSizing(request: DepthRequest): SizingRow[] {
  const { judged } = deriveInputs(request)
  const targets = targetsOfLimits(request.limits)
  return AIR_CONSTRUCTIONS.flatMap((construction) =>
    AIR_POSITIONS.map((position) =>
      orProblem<SizingRow>(
        () => {
          const found = sizing({ input: judged, construction, position, targets, basis: 'peak' })
          return {
            construction,
            position,
            faceAreaM2: found.faceAreaM2,
            heatW: found.heatW,
            limitedByOilFlow: found.heatW > OIL_FLOW_LIMIT_W,
            decidedBy: found.decidedBy ?? null,
            problem: null,
          }
        },
        (problem) => ({
          construction,
          position,
          faceAreaM2: null,
          heatW: null,
          limitedByOilFlow: false,
          decidedBy: null,
          problem,
        }),
      ),
    ),
  )
}

function computeParts(request: DepthRequest, parts: CatalogueCooler[]): PartRow[] {
  const { judged } = deriveInputs(request)
  return rankParts({
    input: judged,
    parts,
    position: request.mountAt ?? 'ahead-of-condenser',
    targets: targetsOfLimits(request.limits),
  }).map((ranked) => ({
    id: ranked.part.id,
    name: ranked.part.name,
    construction: ranked.part.construction,
    widthM: ranked.part.widthM,
    heightM: ranked.part.heightM,
    depthM: ranked.part.depthM,
    ports: ranked.part.ports,
    priceCents: ranked.part.priceCents,
    placement: ranked.placement,
    restatedW: roundOrNull(ranked.restated?.heatW ?? null, 0),
    misfit: roundOrNull(ranked.worstMisfit, 3),
    misfitMarked: ranked.misfitMarked,
    limitedByOilFlow: ranked.limitedByOilFlow,
    peakSumpC: roundOrNull(ranked.peakSumpC, 2),
    peakCoolerInletC: roundOrNull(ranked.peakCoolerInletC, 2),
    marginK: roundOrNull(ranked.marginK, 2),
    decidedBy: ranked.decidedBy,
    reaches: ranked.reaches,
    problem: ranked.problem,
  }))
}

/** Digits nobody reads are not sent with the page. */
const round = (value: number, digits: number): number => Number(value.toFixed(digits))
const roundOrNull = (value: number | null, digits: number): number | null =>
  value === null ? null : round(value, digits)
