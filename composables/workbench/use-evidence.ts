import type { GradeChartData } from '#shared/charts/grade-chart'
import type { Answer } from '#shared/workbench/answer'
import type { Depth } from '#shared/workbench/depth'
import type { DepthRequest } from '#shared/workbench/request'
import { runEvidence, type EvidenceNews, type EvidenceOrder } from '#shared/workbench/run-evidence'

/** Where orders are sent: a worker, or the page's own thread where there is none. */
interface Clerk {
  send: (order: EvidenceOrder) => void
  close: () => void
}

function hireWorker(hear: (news: EvidenceNews) => void, fail: () => void): Clerk | undefined {
  if (typeof Worker === 'undefined') return undefined
  try {
    const worker = new Worker(new URL('../../workers/evidence.worker.ts', import.meta.url), {
      type: 'module',
    })
    worker.addEventListener('message', (event: MessageEvent<EvidenceNews>) => hear(event.data))
    worker.addEventListener('error', fail)
    return { send: (order) => worker.postMessage(order), close: () => worker.terminate() }
  } catch {
    // A browser that refuses module workers still gets its evidence, only in slices between frames.
    return undefined
  }
}

function workHere(hear: (news: EvidenceNews) => void): Clerk {
  let latest = 0
  let open = true
  return {
    send(order) {
      latest = order.order
      const isStale = () => !open || order.order < latest
      const breathe = () => new Promise<void>((resolve) => setTimeout(resolve, 0))
      void breathe().then(() =>
        isStale() ? undefined : runEvidence(order, { breathe, isStale, emit: hear }),
      )
    },
    close() {
      open = false
    },
  }
}

/** Parts of the deeper look that come within this time of one another are drawn together: every drawing costs a frame. */
const TOGETHER_MS = 120

/**
 * The evidence under an answer, worked out beside the page. Orders are numbered; news of an earlier order never replaces
 * what a later one brought, and the last order is always carried through. The answer it stands under is handed on with the
 * grade curve, so that one keystroke draws the answer alone and the next frame everything that explains it.
 */
export function useEvidence(options: {
  initialSubject: Answer | null
  initialGrades: GradeChartData | null
  initialDepth: Partial<Depth> | null
  brief?: boolean
}) {
  /** The answer that the evidence explains. */
  const subject = shallowRef(options.initialSubject)
  const grades = shallowRef(options.initialGrades)
  const depth = shallowRef<Partial<Depth> | null>(options.initialDepth)
  /** Whether what is shown belongs to the last order. */
  const upToDate = ref(true)
  let lastOrder = 0
  const shown = new Map<string, number>()
  let clerk: Clerk | undefined

  const isNews = (key: string, order: number) => {
    if (order < (shown.get(key) ?? 0)) return false
    shown.set(key, order)
    return true
  }

  function hear(news: EvidenceNews) {
    if (news.grades && isNews('grades', news.order)) {
      grades.value = news.grades
      if (waiting?.order === news.order) subject.value = waitingSubject
    }
    const fresh = Object.entries(news.depth ?? {}).filter(([key]) => isNews(key, news.order))
    if (fresh.length > 0) gather(Object.fromEntries(fresh))
    if (news.done) show()
    if (news.done && news.order === lastOrder) upToDate.value = true
  }

  let gathered: Partial<Depth> | undefined
  let timer: ReturnType<typeof setTimeout> | undefined
  function gather(fresh: Partial<Depth>) {
    timer ??= setTimeout(show, TOGETHER_MS)
    gathered = { ...gathered, ...fresh }
  }
  function show() {
    clearTimeout(timer)
    timer = undefined
    if (gathered) depth.value = { ...depth.value, ...gathered }
    gathered = undefined
  }

  let waiting: EvidenceOrder | undefined
  let waitingSubject: Answer | null = null

  function order(request: DepthRequest, answer: Answer) {
    lastOrder += 1
    upToDate.value = false
    waitingSubject = answer
    waiting = { order: lastOrder, request, brief: options.brief ?? false }
    clerk ??= hireWorker(hear, replaceWorker) ?? workHere(hear)
    clerk.send(waiting)
  }

  /** A worker that could not start (or died) is replaced by the page itself, and the last order is sent again. */
  function replaceWorker() {
    clerk?.close()
    clerk = workHere(hear)
    if (waiting) clerk.send(waiting)
  }

  onScopeDispose(() => {
    clearTimeout(timer)
    clerk?.close()
  })
  return { subject, grades, depth, upToDate, order }
}
