import { groupLoop } from './edit'
import { fitsAcross, layoutAcross } from './layout-across'
import { layoutDown } from './layout-down'
import type { LoopLayout, LoopLayoutRequest } from './layout-types'

/**
 * Where everything of the loop's drawing stands. Two axes carry its meaning: along one the order in which the oil meets the
 * coolers, along the other the order in which the air meets them. Wide, the oil runs to the right and the air comes from
 * above; narrow, or with more groups than fit side by side, the oil runs down and the air comes from the left.
 *
 * @param request - coolers, the width there is [px], whether a bypass is fitted
 * @returns places in pixels; nothing lies outside `width` and `height`
 */
export function layoutLoop(request: LoopLayoutRequest): LoopLayout {
  const groups = groupLoop(request.coolers)
  return fitsAcross(request.width, groups.length)
    ? layoutAcross(request, groups)
    : layoutDown(request, groups)
}
