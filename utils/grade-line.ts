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

/** The road of the program: a valley floor, a first pitch, a bench with a dip, the long pull, the summit, the way down. */
export const LONG_PULL: readonly RoadPoint[] = [
  { along: 0, height: 0.07 },
  { along: 0.07, height: 0.05 },
  { along: 0.13, height: 0 },
  { along: 0.19, height: 0.06 },
  { along: 0.27, height: 0.21 },
  { along: 0.33, height: 0.3 },
  { along: 0.39, height: 0.32 },
  { along: 0.43, height: 0.3 },
  { along: 0.48, height: 0.36 },
  { along: 0.58, height: 0.56 },
  { along: 0.68, height: 0.73 },
  { along: 0.77, height: 0.86 },
  { along: 0.84, height: 0.97 },
  { along: 0.885, height: 1 },
  { along: 0.93, height: 0.94 },
  { along: 1, height: 0.78 },
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

/** The ladder written along the long pull: the higher the pull, the hotter. */
export const LADDER_MARKS: readonly RoadMark[] = (
  [
    [0.24, 'fine'],
    [0.5, 'watch'],
    [0.66, 'ease-off'],
    [0.82, 'stop'],
  ] as const
).map(([along, judgement]) => ({ along, judgement, text: LADDER[judgement].word }))
