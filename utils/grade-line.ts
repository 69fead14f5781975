import type { Judgement } from '#shared/schemas/limits'
import { LADDER } from './ladder'

/** A point of a road: how far along (0 to 1) and how high (0 to 1). */
export interface RoadPoint {
  along: number
  height: number
}

/** Something written along the road: at which share of the way, what, and how the fluid stands there. */
export interface RoadMark {
  along: number
  text: string
  judgement?: Judgement
}

/** The road of the mark: a valley, the long pull, a summit, and the first of the way down. */
export const MARK_ROAD: readonly RoadPoint[] = [
  { along: 0, height: 0.08 },
  { along: 0.1, height: 0.02 },
  { along: 0.2, height: 0.06 },
  { along: 0.34, height: 0.25 },
  { along: 0.46, height: 0.38 },
  { along: 0.6, height: 0.63 },
  { along: 0.74, height: 0.84 },
  { along: 0.85, height: 0.98 },
  { along: 0.91, height: 1 },
  { along: 1, height: 0.86 },
]

/** Tangents after Fritsch and Carlson: a smooth road that never rises above a summit that was given. */
function slopes(points: readonly RoadPoint[]): number[] {
  const rises = points.slice(1).map((point, index) => {
    const before = points[index] ?? point
    return point.along === before.along ? 0 : (point.height - before.height) / (point.along - before.along)
  })
  return points.map((_, index) => {
    const before = rises[index - 1]
    const after = rises[index]
    if (before === undefined || after === undefined) return before ?? after ?? 0
    return before * after <= 0 ? 0 : (2 * before * after) / (before + after)
  })
}

/**
 * The height of a road somewhere between its points: the cubic through them, without overshoot.
 * @param along - share of the way, held to the ends outside
 */
export function roadHeight(points: readonly RoadPoint[], along: number): number {
  const first = points[0]
  const last = points.at(-1)
  if (!first || !last) return 0
  if (along <= first.along) return first.height
  if (along >= last.along) return last.height
  const index = points.findIndex((point) => point.along >= along)
  const left = points[index - 1] ?? first
  const right = points[index] ?? last
  const tangents = slopes(points)
  const width = right.along - left.along
  const t = width === 0 ? 0 : (along - left.along) / width
  const startSlope = (tangents[index - 1] ?? 0) * width
  const endSlope = (tangents[index] ?? 0) * width
  return (
    left.height * (2 * t ** 3 - 3 * t ** 2 + 1) +
    startSlope * (t ** 3 - 2 * t ** 2 + t) +
    right.height * (-2 * t ** 3 + 3 * t ** 2) +
    endSlope * (t ** 3 - t ** 2)
  )
}

/**
 * The part of a road between two shares of the way as an SVG path in a box of the given size; high is up.
 * @param inset - kept free above and below [same unit as the size]
 */
export function roadPath(
  points: readonly RoadPoint[],
  size: { width: number; height: number; inset: number },
  from = 0,
  to = 1,
): string {
  const steps = Math.max(2, Math.ceil((to - from) * 96))
  const usable = size.height - 2 * size.inset
  return Array.from({ length: steps + 1 }, (_, step) => {
    const along = from + ((to - from) * step) / steps
    const x = along * size.width
    const y = size.inset + usable * (1 - roadHeight(points, along))
    return `${step === 0 ? 'M' : 'L'}${x.toFixed(2)} ${y.toFixed(2)}`
  }).join(' ')
}

/** The ladder written along the road of the mark: the higher the pull, the hotter. */
export const LADDER_MARKS: readonly RoadMark[] = (
  [
    [0.2, 'fine'],
    [0.46, 'watch'],
    [0.66, 'ease-off'],
    [0.84, 'stop'],
  ] as const
).map(([along, judgement]) => ({ along, judgement, text: LADDER[judgement].word }))
