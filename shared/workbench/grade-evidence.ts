import { ladderOfPlace, targetsOfLimits } from '../build-sheet/limits'
import { deriveInputs, type DerivedInputs } from '../build-sheet/setups'
import type { GradeChartData, GradeHeldSummary, GradePoint, GradeSeries } from '../charts/grade-chart'
import type { RungLimit } from '../charts/rungs'
import { AppError } from '../errors'
import { estimate, findGradeHeld, sweep } from '../heat'
import type { FootOfClimb } from '../heat/types'
import type { Climb } from '../schemas/estimate'
import type { HeatInput } from '../schemas/heat-input'
import type { Limits, Place } from '../schemas/limits'
import type { Answer } from './answer'
import { findHill, type Hill } from './hill'
import { MOST_OTHERS, type WorkbenchRequest } from './request'

/** Ends the grade axis may have: few, so that it does not run along while a slider moves. */
const AXIS_ENDS = [0.08, 0.12, 0.16, 0.2, 0.3, 0.45] as const
/** Steepest grade looked at for the grade that is held. */
export const STEEPEST_GRADE = 0.45
/** Points of a curve; those of other set-ups are only there to be compared with. */
const POINTS = 24
const FEW_POINTS = 12

/** The rungs of one place as lines a chart can draw. */
export function chartLimits(place: Place, limits: Limits): RungLimit[] {
  const ladder = ladderOfPlace(place, limits)
  return [
    { rung: 'watch', fromC: ladder.watchC, name: 'Watch' },
    { rung: 'ease-off', fromC: ladder.easeOffC, name: 'Ease off' },
    { rung: 'stop', fromC: ladder.stopC, name: 'Stop' },
  ]
}

/**
 * Temperature versus grade for the hill of the drive cycle, from where the cycle meets it: the present set-up in the state
 * that judges it, the same if it did lock, and the same on a climb that never ends.
 */
export function computeGradeEvidence(request: WorkbenchRequest, answer: Answer): GradeChartData {
  const hill = findHill(request.scenario.duty)
  const inputs = deriveInputs(request)
  const climb = climbOf(hill, answer)
  const held = gradeHeld(inputs.judged, hill, climb, request.limits)
  const maxGrade = axisEnd(Math.max(hill.grade ?? 0, held.grade ?? 0) + 0.015)
  const ask = { hill, maxGrade }
  const series: GradeSeries[] = [
    {
      id: 'present',
      name: presentName(inputs, request),
      kind: 'present',
      points: gradeCurve(inputs.judged, { ...ask, climb }),
    },
  ]
  if (inputs.judgedBy === 'unlocked' && inputs.locked !== null)
    series.push({
      id: 'if-locked',
      name: 'If it locks',
      kind: 'other-lock',
      points: gradeCurve(inputs.locked, { ...ask, climb }),
    })
  if (climb !== undefined)
    series.push({
      id: 'endless',
      name: 'Never-ending climb',
      kind: 'endless',
      points: gradeCurve(inputs.judged, { ...ask, climb: undefined }),
    })
  return {
    series: series.filter(({ points }) => points.length > 0),
    limits: {
      sumpC: chartLimits('sump', request.limits),
      coolerInletC: chartLimits('hotLine', request.limits),
    },
    speedMps: hill.speedMps,
    climbM: climb?.distanceM,
    held,
    hillGrade: hill.grade,
    maxGrade,
  }
}

function presentName(inputs: DerivedInputs, request: WorkbenchRequest): string {
  if (inputs.judgedBy === 'unlocked' && inputs.locked !== null) return 'Unlocked'
  return request.others.length > 0 ? request.setup.name : 'Now'
}

/** The same hill climbed by the other set-ups, each in the state that judges it and at its own speed. */
export function computeOtherCurves(request: WorkbenchRequest, evidence: GradeChartData): GradeSeries[] {
  return request.others.slice(0, MOST_OTHERS).flatMap((setup) => {
    try {
      const inputs = deriveInputs({ ...request, setup })
      const points = gradeCurve(inputs.judged, {
        hill: findHill(inputs.judged.duty),
        climb: climbOfInput(inputs.judged),
        maxGrade: evidence.maxGrade,
        points: FEW_POINTS,
      })
      return points.length === 0 ? [] : [{ id: setup.id, name: setup.name, kind: 'set-up' as const, points }]
    } catch (error) {
      if (error instanceof AppError) return []
      throw error
    }
  })
}

/** A climb as a drive cycle meets it: its length, and where the drive before it has left every temperature. */
export interface MetClimb {
  distanceM: number
  start?: Climb['start']
  foot?: FootOfClimb
}

/** The hill's climb from the answer that is there already. */
function climbOf(hill: Hill, answer: Answer): MetClimb | undefined {
  if (hill.index === undefined || hill.distanceM === undefined) return undefined
  const foot = answer.judged.segments[hill.index - 1]?.end
  return { distanceM: hill.distanceM, ...(foot ? { foot } : startOf(answer.input)) }
}

/** The climb of an input of its own, which meets the hill from its own approach. */
export function climbOfInput(input: HeatInput): MetClimb | undefined {
  const hill = findHill(input.duty)
  if (hill.index === undefined || hill.distanceM === undefined) return undefined
  if (hill.index === 0) return { distanceM: hill.distanceM, ...startOf(input) }
  const segments = input.duty.segments.slice(0, hill.index)
  const foot = estimate({ ...input, duty: { ...input.duty, segments } }).segments.at(-1)?.end
  return { distanceM: hill.distanceM, ...(foot ? { foot } : {}) }
}

const startOf = ({ duty }: HeatInput): Pick<MetClimb, 'start'> =>
  duty.start === undefined ? {} : { start: duty.start }

/** The climb as the model's calls take it. */
function asked(climb: MetClimb | undefined): { climb?: Climb; foot?: FootOfClimb } {
  if (climb === undefined) return {}
  const { distanceM, start, foot } = climb
  return { climb: { distanceM, ...(start ? { start } : {}) }, ...(foot ? { foot } : {}) }
}

interface CurveRequest {
  hill: Hill
  climb: MetClimb | undefined
  maxGrade: number
  points?: number
}

/** A curve over the grades of the axis, its jumps found to a hundredth of a percent. */
export function gradeCurve(input: HeatInput, request: CurveRequest): GradePoint[] {
  const steps = request.points ?? POINTS
  const grades = Array.from({ length: steps + 1 }, (_, index) => (request.maxGrade * index) / steps)
  const points = askGrades(input, request, grades)
  return withJumpsFound(points, input, request)
}

/** The truck at some grades of a hill, without those it cannot climb. */
export function askGrades(input: HeatInput, { hill, climb }: CurveRequest, grades: number[]): GradePoint[] {
  const { points } = sweep({ input, speedMps: hill.speedMps, grades, segment: hill.road, ...asked(climb) })
  return points.flatMap((point) =>
    'error' in point
      ? []
      : [
          {
            grade: point.grade,
            sumpC: shortened(point.sumpC),
            coolerInletC: shortened(point.coolerInletC),
            speedMps: shortened(point.speedMps),
            speedHeld: point.speedHeld,
            gear: point.gear,
            locked: point.locked,
          },
        ],
  )
}

/** Digits nobody can see in a chart are not sent with the page. */
const shortened = (value: number): number => Number(value.toFixed(2))

/** Grades put between two neighbours per pass; three passes leave a gap of the step over 729. */
const BETWEEN = 8
const PASSES = 3

/** Narrows every place where lock-up comes or goes, so that the break is drawn where it is. */
function withJumpsFound(points: GradePoint[], input: HeatInput, request: CurveRequest): GradePoint[] {
  const all = [...points]
  points.forEach((point, index) => {
    const before = points[index - 1]
    if (!before || before.locked === point.locked) return
    let [low, high] = [before, point]
    for (let pass = 0; pass < PASSES; pass += 1) {
      const step = (high.grade - low.grade) / (BETWEEN + 1)
      const grades = Array.from({ length: BETWEEN }, (_, place) => low.grade + step * (place + 1))
      const row = [low, ...askGrades(input, request, grades), high]
      const after = row.findIndex((one, place) => place > 0 && one.locked !== low.locked)
      ;[low, high] = [row[after - 1] ?? low, row[after] ?? high]
    }
    all.push(...[low, high].filter((found) => !all.includes(found)))
  })
  return all.sort((a, b) => a.grade - b.grade)
}

/** The steepest grade of a hill that keeps the limits and holds the speed. */
export function gradeHeld(
  input: HeatInput,
  hill: Hill,
  climb: MetClimb | undefined,
  limits: Limits,
): GradeHeldSummary {
  const found = findGradeHeld({
    input,
    speedMps: hill.speedMps,
    limits: targetsOfLimits(limits),
    segment: hill.road,
    maxGrade: STEEPEST_GRADE,
    ...asked(climb),
  })
  return { grade: found.grade, endedBy: found.endedBy, maxGrade: STEEPEST_GRADE }
}

const axisEnd = (atLeast: number): number =>
  AXIS_ENDS.find((end) => end >= atLeast) ?? AXIS_ENDS.at(-1) ?? 0.45
