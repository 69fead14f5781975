import fc from 'fast-check'
import { AppError, type ErrorCode } from '#shared/errors'
import { estimate } from '#shared/heat'
import type { Estimate, SegmentResult, State } from '#shared/heat/types'
import type { HeatInput, Segment } from '#shared/schemas/heat-input'

/**
 * How properties are run: the same inputs every time, and as few as the fast run can afford. A deep run asks for more
 * with PROPERTY_RUNS (a multiple of the fast run, such as 10) and for others with PROPERTY_SEED.
 */
const MULTIPLE = Number(process.env['PROPERTY_RUNS'] ?? '1')
const SEED = Number(process.env['PROPERTY_SEED'] ?? '20260117')

/** Time a test with that many runs may take [ms]. */
export const PROPERTY_TIMEOUT_MS = 60_000 * Math.max(1, MULTIPLE)

/** Asserts that a property holds for `runs` drawn inputs (times PROPERTY_RUNS). */
export function holdsFor<T>(runs: number, drawn: fc.Arbitrary<T>, property: (value: T) => void) {
  fc.assert(fc.property(drawn, property), {
    seed: SEED,
    numRuns: Math.ceil(runs * MULTIPLE),
    maxSkipsPerRun: 200,
    // Shrinking takes minutes where each run is a whole drive; while looking for several faults at once, do without.
    endOnFailure: process.env['PROPERTY_NO_SHRINK'] === '1',
  })
}

/** What the model may say instead of an answer to an input that the schema accepts. */
export const REFUSALS: readonly ErrorCode[] = [
  'cannot_climb_grade',
  'cannot_pull_away',
  'cannot_hold_cruise',
  'rating_impossible',
  'no_single_cooler',
  'model_refuses',
  // A drive cycle so long that its series would not fit into an answer.
  'bad_input',
]

/** An answer, or undefined where the model refuses by name. Any other error goes on. */
export function answerOf<T>(call: () => T): T | undefined {
  try {
    return call()
  } catch (error) {
    if (error instanceof AppError && REFUSALS.includes(error.code)) return undefined
    throw error
  }
}

/** The estimate of an input, or the draw is skipped where the model refuses. */
export function answered(input: HeatInput, options: { stepS?: number } = {}): Estimate {
  const answer = answerOf(() => estimate(input, options))
  fc.pre(answer !== undefined)
  return answer as Estimate
}

/** The one segment of an estimate of one segment. */
export function onlySegment(answer: Estimate): SegmentResult {
  const [segment] = answer.segments
  if (segment === undefined || answer.segments.length !== 1) throw new Error('not one segment')
  return segment
}

/** Where the one segment of an input settles, or the draw is skipped where the model refuses. */
export function settled(input: HeatInput): { segment: SegmentResult; state: State } {
  const segment = onlySegment(answered(input))
  if (segment.equilibrium === null) throw new Error('the segment never settles')
  return { segment, state: segment.equilibrium }
}

/**
 * Whether oil could be at these temperatures at all. A truck without a cooler and with a hot converter settles beyond any
 * oil; there the model only promises numbers, and holds its property lines at their last value.
 */
export function isOil(state: State): boolean {
  return state.coolerInletC < 300 && state.sumpC < 300 && state.sumpC > -40
}

/** As `settled`, or the draw is skipped where it settles beyond any oil. */
export function settledAsOil(input: HeatInput): { segment: SegmentResult; state: State } {
  const answer = settled(input)
  fc.pre(isOil(answer.state))
  return answer
}

/** The same input with another duty. */
export function withSegments(input: HeatInput, segments: Segment[]): HeatInput {
  return { ...input, duty: { ...input.duty, segments } }
}

/** The same input from other temperatures. */
export function withStart(input: HeatInput, start: HeatInput['duty']['start']): HeatInput {
  return { ...input, duty: { ...input.duty, start } }
}

/** Air speed along the truck that pan, case, axle and stack feel [m/s]. */
export function airSpeed(speedMps: number, segment: Segment): number {
  return Math.max(0, speedMps + (segment.headwindMps ?? 0))
}
