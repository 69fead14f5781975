import { judgeAnswer } from '../build-sheet/limits'
import { deriveInputs } from '../build-sheet/setups'
import { AppError } from '../errors'
import { estimate } from '../heat'
import type { Estimate } from '../heat/types'
import type { HeatInput } from '../schemas/heat-input'
import { climbOfInput, gradeHeld } from '../workbench/grade-evidence'
import { findHill } from '../workbench/hill'
import { applyRemedy } from './apply'
import { predictIdleFlow } from './idle-flow'
import type { AdviceCode } from './codes'
import type { AdviceRequest, Change, Effect, Remedy, RemedyWhat, TriedRemedy } from './types'

/** One run of the model with something changed, or why there is none. */
export type Trial = { input: HeatInput; answer: Estimate; problem: null } | { problem: string }

/** What else a remedy is judged by, by what the advice is about. */
const MORE_FIGURES: Partial<Record<AdviceCode, 'flow' | 'cold'>> = {
  cooler_flow_low: 'flow',
  limited_by_oil_flow: 'flow',
  over_cooled: 'cold',
}

/** Runs the model for one request, each change once, and counts. */
export class Trials {
  /** Runs of the whole model so far. */
  estimates = 0
  readonly request: AdviceRequest
  /** The request as it stands. */
  readonly base: Trial
  private readonly known = new Map<string, Trial>()

  constructor(request: AdviceRequest) {
    this.request = request
    const { answers } = request
    this.base =
      answers.kind === 'answer'
        ? { input: answers.input, answer: answers.judged, problem: null }
        : { problem: answers.issues[0]?.message ?? answers.message }
  }

  /** Whether a change was run before, so that asking again costs nothing. */
  isKnown(what: RemedyWhat): boolean {
    return this.known.has(keyOf(what)) || this.lockedAnswer(what) !== undefined
  }

  /** The judged answer with a change. */
  run(what: RemedyWhat): Trial {
    const key = keyOf(what)
    const found = this.known.get(key)
    if (found !== undefined) return found
    const trial = this.compute(what)
    this.known.set(key, trial)
    return trial
  }

  private compute(what: RemedyWhat): Trial {
    try {
      const changed = applyRemedy(this.request, what)
      const input = deriveInputs({ ...changed, control: this.request.control }).judged
      const known = this.lockedAnswer(what)
      if (known !== undefined) return { input, answer: known, problem: null }
      this.estimates += 1
      return { input, answer: estimate(input), problem: null }
    } catch (error) {
      if (!(error instanceof AppError)) throw error
      return { problem: error.details.issues?.[0]?.message ?? error.message }
    }
  }

  /** "If it locks" was computed with the answer already. */
  private lockedAnswer(what: RemedyWhat): Estimate | undefined {
    const { answers } = this.request
    const onlyLocks =
      what.kind === 'set-up' && what.change.lockup === 'always' && Object.keys(what.change).length === 1
    return onlyLocks && answers.kind === 'answer' ? (answers.ifLocked ?? undefined) : undefined
  }

  /**
   * What a remedy comes to.
   * @param remedy - of an advice
   * @param code - the advice's: advice about flow or cold shows those too
   * @param withGrade - whether the grade that is held is worked out as well, which costs more than the rest
   */
  try(remedy: Remedy, code: AdviceCode, withGrade = false): TriedRemedy {
    const { base } = this
    const after = this.run(remedy.what)
    const change = (read: (input: HeatInput, answer: Estimate) => number | null): Change => ({
      before: readTrial(base, read),
      after: readTrial(after, read),
    })
    const more = MORE_FIGURES[code]
    const effect: Effect = {
      sumpC: change((_, { peakSumpC }) => peakSumpC),
      coolerInletC: change((_, { peakCoolerInletC }) => peakCoolerInletC),
      coolantC: change((_, answer) => peakCoolantC(answer)),
      speedMps: change(speedOnHill),
      ...(more === 'flow' ? { idleQuartS: change((input) => predictIdleFlow(input).quartS) } : {}),
      ...(more === 'cold' ? { settledSumpC: change((_, answer) => warmestSettledC(answer)) } : {}),
      ...(withGrade ? { gradeHeld: change((input) => this.gradeOf(input)) } : {}),
      judgement: { before: this.judged(base), after: this.judged(after) },
      problem: after.problem,
    }
    return { ...remedy, effect }
  }

  private judged(trial: Trial) {
    return trial.problem === null ? judgeAnswer(trial.answer, this.request.limits).judgement : null
  }

  private gradeOf(input: HeatInput): number | null {
    return gradeHeld(input, findHill(input.duty), climbOfInput(input), this.request.limits).grade
  }
}

const keyOf = (what: RemedyWhat): string => JSON.stringify(what)

function readTrial(trial: Trial, read: (input: HeatInput, answer: Estimate) => number | null): number | null {
  if (trial.problem !== null) return null
  return read(trial.input, trial.answer)
}

/** Hottest the coolant gets [°C]. */
export function peakCoolantC({ series }: Estimate): number {
  return series.coolantC.reduce((hottest, tempC) => Math.max(hottest, tempC), -Infinity)
}

/** Speed held on the hardest stretch [m/s]; null where none is driven steadily. */
function speedOnHill(input: HeatInput, { segments }: Estimate): number | null {
  const { index } = findHill(input.duty)
  return index === undefined ? null : (segments[index]?.speedMps ?? null)
}

/** Warmest pan at which any stretch would settle if it never ended [°C]. */
function warmestSettledC({ segments }: Estimate): number | null {
  const settled = segments.flatMap(({ equilibrium }) => equilibrium?.sumpC ?? [])
  return settled.length === 0 ? null : Math.max(...settled)
}
