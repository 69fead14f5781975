import type { Point } from './geometry'
import type { LoopLayout, Position } from './layout-types'

/** Where a cooler that is dragged would go: to a gap between groups or beside one of them, and into which air. */
export interface Drop {
  gap?: number
  beside?: number
  position?: Position
}

/** What letting go at a point means for a cooler. */
export function findDrop(layout: LoopLayout, index: number, point: Point): Drop {
  const across = layout.runs === 'across'
  const along = across ? point.x : point.y
  const station = layout.stations.find((one) => one.index === index)
  const group = layout.bands.findIndex(({ start, end }) => along >= start && along < end)
  const drop: Drop = { position: findLane(layout, point) }
  const { start, end } = layout.bands[group] ?? { start: 0, end: 0 }
  const share = (along - start) / Math.max(1, end - start)
  if (group < 0) drop.gap = along < (layout.bands[0]?.start ?? 0) ? 0 : layout.bands.length
  else if (share > 0.25 && share < 0.75) {
    if (group !== station?.group) drop.beside = group
  } else drop.gap = share < 0.5 ? group : group + 1
  return drop
}

/** The lane whose room a point is in or nearest to. */
function findLane(layout: LoopLayout, point: Point): Position | undefined {
  const across = layout.runs === 'across'
  const at = across ? point.y : point.x
  let nearest: { position: Position; distance: number } | undefined
  for (const { position, rect } of layout.lanes) {
    const [from, to] = across ? [rect.y, rect.y + rect.height] : [rect.x, rect.x + rect.width]
    const distance = at < from ? from - at : at > to ? at - to : 0
    if (distance < (nearest?.distance ?? Infinity)) nearest = { position, distance }
  }
  return nearest?.position
}
