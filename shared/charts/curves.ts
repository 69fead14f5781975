import { area, line } from 'd3-shape'
import { rungAt, type Rung, type RungLimit } from './rungs'

/** A point of a curve in the data's own units. */
export interface CurvePoint {
  x: number
  y: number
}

/** A stretch of a curve that stands on one rung. */
export interface RungStretch {
  rung: Rung
  points: CurvePoint[]
}

/** A band around a curve at one x. */
export interface BandPoint {
  x: number
  low: number
  high: number
}

const toPath = line<CurvePoint>(
  (point) => point.x,
  (point) => point.y,
).digits(1)

const toArea = area<BandPoint>(
  (point) => point.x,
  (point) => point.low,
  (point) => point.high,
).digits(1)

/** SVG path through points that are already in pixels; empty for fewer than two. */
export function linePath(points: readonly CurvePoint[]): string {
  return points.length < 2 ? '' : (toPath(points) ?? '')
}

/** SVG path around a band that is already in pixels; empty for fewer than two points. */
export function bandPath(points: readonly BandPoint[]): string {
  return points.length < 2 ? '' : (toArea(points) ?? '')
}

/**
 * Cuts a list wherever two neighbours do not belong to one stroke (lock-up ends, a gear is lost, the truck cannot climb).
 * Every item ends up in exactly one piece.
 */
export function splitAtBreaks<T>(items: readonly T[], isBreak: (before: T, after: T) => boolean): T[][] {
  const pieces: T[][] = []
  let previous: T | undefined
  for (const item of items) {
    const piece = pieces.at(-1)
    if (piece && previous !== undefined && !isBreak(previous, item)) piece.push(item)
    else pieces.push([item])
    previous = item
  }
  return pieces
}

/**
 * Cuts a curve where it crosses a limit, so that each stretch can be drawn in the weight of its rung.
 * The crossing is put in by straight interpolation and belongs to both neighbours, so the strokes meet.
 */
export function splitByRung(points: readonly CurvePoint[], limits: readonly RungLimit[]): RungStretch[] {
  const stretches: RungStretch[] = []
  let previous: CurvePoint | undefined
  for (const point of points) {
    if (!previous) {
      stretches.push({ rung: rungAt(point.y, limits), points: [point] })
      previous = point
      continue
    }
    for (const crossing of crossings(previous, point, limits)) {
      stretches.at(-1)?.points.push(crossing.point)
      stretches.push({ rung: crossing.rung, points: [crossing.point] })
    }
    stretches.at(-1)?.points.push(point)
    previous = point
  }
  return stretches
}

function crossings(from: CurvePoint, to: CurvePoint, limits: readonly RungLimit[]) {
  const low = Math.min(from.y, to.y)
  const high = Math.max(from.y, to.y)
  const rising = to.y > from.y
  const passed = limits
    .filter((limit) => limit.fromC > low && limit.fromC <= high)
    .sort((a, b) => (rising ? a.fromC - b.fromC : b.fromC - a.fromC))
  return passed.map((limit) => ({
    point: { x: from.x + ((to.x - from.x) * (limit.fromC - from.y)) / (to.y - from.y), y: limit.fromC },
    // A rung begins at its limit: on it when rising, just under it when falling.
    rung: rungAt(rising ? limit.fromC : limit.fromC - 1e-9, limits),
  }))
}

/**
 * Thins a curve to about `most` points and keeps its ends and every local peak and valley of each bucket,
 * so that no peak is drawn lower than it was.
 */
export function thinCurve<T>(items: readonly T[], most: number, valueOf: (item: T) => number): T[] {
  if (items.length <= most || most < 4) return [...items]
  const inner = items.slice(1, -1)
  const buckets = Math.max(1, Math.floor((most - 2) / 2))
  const size = inner.length / buckets
  const kept: T[] = [items[0] as T]
  for (let bucket = 0; bucket < buckets; bucket += 1) {
    const slice = inner.slice(Math.floor(bucket * size), Math.floor((bucket + 1) * size))
    if (slice.length === 0) continue
    let lowest = 0
    let highest = 0
    slice.forEach((item, index) => {
      if (valueOf(item) < valueOf(slice[lowest] as T)) lowest = index
      if (valueOf(item) > valueOf(slice[highest] as T)) highest = index
    })
    const [first, second] = lowest < highest ? [lowest, highest] : [highest, lowest]
    kept.push(slice[first] as T)
    if (second !== first) kept.push(slice[second] as T)
  }
  kept.push(items.at(-1) as T)
  return kept
}

/** Value of a curve at x by straight interpolation; undefined outside it. Points must ascend in x. */
export function interpolateAt(points: readonly CurvePoint[], x: number): number | undefined {
  for (let index = 1; index < points.length; index += 1) {
    const left = points[index - 1] as CurvePoint
    const right = points[index] as CurvePoint
    if (x < left.x || x > right.x) continue
    if (right.x === left.x) return right.y
    return left.y + ((right.y - left.y) * (x - left.x)) / (right.x - left.x)
  }
  return points.length === 1 && points[0]?.x === x ? points[0].y : undefined
}
