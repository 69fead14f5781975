import type { GradeChartData } from '../charts/grade-chart'
import { AppError } from '../errors'
import { computeAnswer } from './answer'
import { BRIEF_STAGES, DEPTH_STAGES, type Depth } from './depth'
import { computeGradeEvidence } from './grade-evidence'
import type { DepthRequest } from './request'

/** One order to work out what stands under the answer. A higher number is a later order. */
export interface EvidenceOrder {
  order: number
  request: DepthRequest
  /** Whether only the grade curve and the band of the answer are asked for. */
  brief: boolean
}

/** What came of an order so far: some of the evidence, or that the model refuses. */
export interface EvidenceNews {
  order: number
  grades?: GradeChartData
  depth?: Partial<Depth>
  /** The order is done; nothing more comes of it. */
  done?: true
}

/** What the loop needs from where it runs: a worker, or the page itself. */
export interface EvidenceHost {
  emit: (news: EvidenceNews) => void
  /** Lets waiting messages in between two stages. */
  breathe: () => Promise<void>
  /** Whether a later order has come meanwhile; then this one is given up. */
  isStale: () => boolean
}

/**
 * Works an order out stage by stage, what a person looks at first first. Given up as soon as a later one has come: the last
 * order is always carried through, so that what is shown in the end belongs to the last value.
 */
export async function runEvidence(
  { order, request, brief }: EvidenceOrder,
  host: EvidenceHost,
): Promise<void> {
  try {
    const answer = computeAnswer(request)
    if (answer.kind === 'refusal') return host.emit({ order, done: true })
    const grades = computeGradeEvidence(request, answer)
    host.emit({ order, grades })
    for (const stage of brief ? BRIEF_STAGES : DEPTH_STAGES) {
      await host.breathe()
      if (host.isStale()) return
      host.emit({ order, depth: stage(request, answer, grades) })
    }
  } catch (error) {
    // The model's own refusals are told by the answer; the evidence of before stays.
    if (!(error instanceof AppError)) throw error
  }
  host.emit({ order, done: true })
}
