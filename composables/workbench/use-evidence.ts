import type { GradeChartData } from '#shared/charts/grade-chart'
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

/**
 * The evidence under an answer, worked out beside the page. Orders are numbered; news of an earlier order never replaces
 * what a later one brought, and the last order is always carried through.
 */
export function useEvidence(options: {
  initialGrades: GradeChartData | null
  initialDepth: Partial<Depth> | null
  brief?: boolean
}) {
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
    if (news.grades && isNews('grades', news.order)) grades.value = news.grades
    const fresh = Object.entries(news.depth ?? {}).filter(([key]) => isNews(key, news.order))
    if (fresh.length > 0) gather(Object.fromEntries(fresh))
    if (news.done && news.order === lastOrder) upToDate.value = true
  }

  // Several stages often arrive within one frame: they are shown together.
  let gathered: Partial<Depth> | undefined
  function gather(fresh: Partial<Depth>) {
    if (gathered === undefined) requestAnimationFrame(show)
    gathered = { ...gathered, ...fresh }
  }
  function show() {
    if (gathered) depth.value = { ...depth.value, ...gathered }
    gathered = undefined
  }

  let waiting: EvidenceOrder | undefined

  function order(request: DepthRequest) {
    lastOrder += 1
    upToDate.value = false
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

  onScopeDispose(() => clerk?.close())
  return { grades, depth, upToDate, order }
}
