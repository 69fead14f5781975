import type { BuildAnswer } from '../schemas/build'
import { computeAnswer } from './answer'
import { computeQuickDepth, type Depth } from './depth'
import { computeGradeEvidence } from './grade-evidence'
import { MOST_OTHERS } from './request'

/**
 * The deeper look of a saved build as its page first shows it: the first set-up, the others beside it. Null where there is
 * no such scenario, or the model has no answer for it; the page then says so.
 */
export function openDepth(answer: BuildAnswer, scenarioId: string): Partial<Depth> | null {
  const { build, setups, scenarios } = answer
  const scenario = scenarios.find(({ id }) => id === scenarioId)
  const [setup, ...others] = setups
  if (!scenario || !setup) return null
  const request = {
    sheet: build.sheet,
    control: build.control,
    limits: build.limits,
    scenario: { load: scenario.load, duty: scenario.duty },
    setup,
    others: others.slice(0, MOST_OTHERS),
    coolers: null,
  }
  const first = computeAnswer(request)
  if (first.kind === 'refusal') return null
  return computeQuickDepth(request, first, computeGradeEvidence(request, first))
}
