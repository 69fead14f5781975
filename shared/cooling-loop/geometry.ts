/** Small geometry of a line drawing, in pixels. */

export interface Point {
  x: number
  y: number
}

export interface Rect extends Point {
  width: number
  height: number
}

/** Which way a length of pipe runs where its arrow sits [degrees, 0 to the right, clockwise]. */
export interface Arrow extends Point {
  angle: number
}

const tenth = (value: number) => Math.round(value * 10) / 10

/** Points without those that repeat one another or lie on a straight run, going on or turning back within it. */
export function simplify(points: readonly Point[]): Point[] {
  const kept: Point[] = []
  for (const point of points) {
    const last = kept.at(-1)
    if (last && Math.hypot(point.x - last.x, point.y - last.y) < 0.5) continue
    const before = kept.at(-2)
    const straight =
      before &&
      last &&
      ((Math.abs(before.x - last.x) < 0.01 && Math.abs(last.x - point.x) < 0.01) ||
        (Math.abs(before.y - last.y) < 0.01 && Math.abs(last.y - point.y) < 0.01))
    if (straight) kept.pop()
    kept.push(point)
  }
  return kept
}

function towards(from: Point, to: Point, distance: number): Point {
  const length = Math.hypot(to.x - from.x, to.y - from.y)
  const share = length === 0 ? 0 : distance / length
  return { x: tenth(from.x + (to.x - from.x) * share), y: tenth(from.y + (to.y - from.y) * share) }
}

/** A bent pipe through points as an SVG path: straight runs, each bend rounded. */
export function bentPath(points: readonly Point[], radius: number): string {
  const [first, ...rest] = simplify(points)
  if (!first || rest.length === 0) return ''
  const path = [`M${tenth(first.x)} ${tenth(first.y)}`]
  let from = first
  rest.forEach((corner, index) => {
    const next = rest[index + 1]
    if (!next) {
      path.push(`L${tenth(corner.x)} ${tenth(corner.y)}`)
      return
    }
    const before = Math.hypot(corner.x - from.x, corner.y - from.y)
    const after = Math.hypot(next.x - corner.x, next.y - corner.y)
    const reach = Math.min(radius, before / 2, after / 2)
    const enter = towards(corner, from, reach)
    const leave = towards(corner, next, reach)
    path.push(`L${enter.x} ${enter.y}`, `Q${tenth(corner.x)} ${tenth(corner.y)} ${leave.x} ${leave.y}`)
    from = corner
  })
  return path.join(' ')
}

/** An arrow a distance before the end of a pipe, when its last run is long enough to carry one. */
export function arrowAtEnd(points: readonly Point[], before: number): Arrow[] {
  const runs = simplify(points)
  const [from, to] = [runs.at(-2), runs.at(-1)]
  if (!from || !to || Math.hypot(to.x - from.x, to.y - from.y) < before + 4) return []
  return [{ ...towards(to, from, before), angle: angleOf(from, to) }]
}

/** An arrow at a share of the longest run, when it is longer than a length. */
export function arrowInLongestRun(points: readonly Point[], longerThan: number, share: number): Arrow[] {
  const runs = simplify(points)
  let best: { from: Point; to: Point; length: number } | undefined
  runs.forEach((to, index) => {
    const from = runs[index - 1]
    if (!from) return
    const length = Math.hypot(to.x - from.x, to.y - from.y)
    if (length > (best?.length ?? longerThan)) best = { from, to, length }
  })
  if (!best) return []
  return [{ ...towards(best.from, best.to, best.length * share), angle: angleOf(best.from, best.to) }]
}

function angleOf(from: Point, to: Point): number {
  return Math.round((Math.atan2(to.y - from.y, to.x - from.x) * 180) / Math.PI)
}

/** Whether two rectangles share more than an edge. */
export function overlaps(a: Rect, b: Rect): boolean {
  return (
    a.x < b.x + b.width - 0.01 &&
    b.x < a.x + a.width - 0.01 &&
    a.y < b.y + b.height - 0.01 &&
    b.y < a.y + a.height - 0.01
  )
}

export const clamp = (value: number, low: number, high: number) => Math.min(Math.max(value, low), high)
