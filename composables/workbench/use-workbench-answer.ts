import type { GradeChartData } from '#shared/charts/grade-chart'
import { AppError } from '#shared/errors'
import { computeAnswer, type Answer, type Refusal } from '#shared/workbench/answer'
import type { Depth } from '#shared/workbench/depth'
import { computeGradeEvidence } from '#shared/workbench/grade-evidence'
import type { DepthRequest, WorkbenchRequest } from '#shared/workbench/request'
import { useEvidence } from './use-evidence'

/** A change counts as settled when nothing has moved for this long; then it is announced, and the next change starts anew. */
const SETTLED_AFTER_MS = 1000

/** What a ghost mark shows: the answer as it stood before the present change. */
export interface Ghost {
  sumpC: number
  coolerInletC: number
  heldGrade: number | null
}

/**
 * The answer that follows every change of a request: the peaks at once, in the same turn as the keystroke; the evidence
 * right after, beside the page. A value the model refuses leaves the last good answer standing, with the reason.
 */
export function useWorkbenchAnswer(
  request: Readonly<Ref<WorkbenchRequest>>,
  options: {
    initialDepth?: Partial<Depth> | null
    /** Only the grade curve and the band of the answer. */
    brief?: boolean
    /** What the deeper look needs besides: the catalogue, and where a part would be mounted. */
    extras?: () => Pick<DepthRequest, 'coolers' | 'mountAt'>
  } = {},
) {
  const withExtras = (): DepthRequest => ({ ...request.value, ...(options.extras?.() ?? { coolers: null }) })
  const first = computeAnswer(request.value)
  const refusal = shallowRef<Refusal | null>(first.kind === 'refusal' ? first : null)
  const answer = shallowRef<Answer | null>(first.kind === 'answer' ? first : null)
  const evidence = useEvidence({
    initialSubject: answer.value,
    initialGrades: answer.value ? firstGrades(request.value, answer.value) : null,
    initialDepth: options.initialDepth ?? null,
    brief: options.brief,
  })

  const ghost = shallowRef<Ghost | null>(null)
  const settledCount = ref(0)
  let settled = snapshot(answer.value, evidence.grades.value)
  let timer: ReturnType<typeof setTimeout> | undefined

  function settle() {
    timer = undefined
    settled = snapshot(answer.value, evidence.grades.value)
    settledCount.value += 1
  }

  watch(request, (now) => {
    const next = computeAnswer(now)
    // The first move of a change leaves its mark; the moves that follow belong to the same change.
    if (timer === undefined && next.kind === 'answer') ghost.value = settled
    clearTimeout(timer)
    timer = setTimeout(settle, SETTLED_AFTER_MS)
    refusal.value = next.kind === 'refusal' ? next : null
    if (next.kind === 'answer') {
      answer.value = next
      evidence.order(withExtras(), next)
    }
  })

  /** What is shown now is where a person starts from: nothing was before it. */
  async function startHere() {
    await nextTick()
    clearTimeout(timer)
    timer = undefined
    ghost.value = null
    settled = snapshot(answer.value, evidence.grades.value)
  }

  /** Asks for the evidence again, for the same answer: the catalogue came, or parts are to be mounted elsewhere. */
  function deepen() {
    if (answer.value) evidence.order(withExtras(), answer.value)
  }

  onScopeDispose(() => clearTimeout(timer))

  const { subject, grades, depth, upToDate } = evidence
  return { answer, refusal, ghost, settledCount, subject, grades, depth, upToDate, deepen, startHere }
}

function firstGrades(request: WorkbenchRequest, answer: Answer): GradeChartData | null {
  try {
    return computeGradeEvidence(request, answer)
  } catch (error) {
    if (error instanceof AppError) return null
    throw error
  }
}

function snapshot(answer: Answer | null, grades: GradeChartData | null): Ghost | null {
  if (answer === null) return null
  return {
    sumpC: answer.judged.peakSumpC,
    coolerInletC: answer.judged.peakCoolerInletC,
    heldGrade: grades?.held.grade ?? null,
  }
}
