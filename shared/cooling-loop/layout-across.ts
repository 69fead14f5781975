import { clamp, type Arrow, type Rect } from './geometry'
import {
  EDGE,
  laneDepth,
  passagesOf,
  placeInLane,
  placeStations,
  TEXT_HEIGHT,
  type PlaceStation,
} from './layout-common'
import type { Lane, LoopLayout, LoopLayoutRequest, Plate, Position } from './layout-types'
import { HEADER, layBypass, layPipes, type Place } from './pipes'

/** The oil from left to right, the air from the front of the truck above, the transmission below. */

const WIDEST = 1040
const NARROWEST = 600
/** Room for one group of coolers with its words [px]. */
const LEAST_BAND = 126
/** Names of what the air meets, at the left; the return line at the right [px]. */
const LABELS = 144
const RETURN_ROOM = 34
const CORE_DEPTH = 24
const CELL = CORE_DEPTH + 6 + TEXT_HEIGHT
const EMPTY_LANE = 24
/** Between two things the air meets: room for its arrow [px]. */
const AIR_GAP = 16
/** Where the lines leave and enter the case, from its left end [px]. */
const HOT_PORT = 62
const RETURN_PORT = 158

/** Wide enough for the names and every group of coolers side by side. */
export function fitsAcross(width: number, groups: number): boolean {
  const room = width - EDGE - LABELS - EDGE - RETURN_ROOM
  return width >= NARROWEST && room >= Math.max(1, groups) * LEAST_BAND
}

interface AirPath {
  lanes: Lane[]
  plates: Plate[]
  airArrows: Arrow[]
  underbody: LoopLayout['underbody']
  bottom: number
}

/** The stack from the front backwards, then what hangs under the body. */
function layAirPath(
  depth: (position: Position) => number,
  left: number,
  right: number,
  columns: readonly number[],
): AirPath {
  const path: AirPath = { lanes: [], plates: [], airArrows: [], underbody: null, bottom: 0 }
  const labelX = EDGE + 20
  let y = 22
  const take = (height: number): Rect => {
    const rect = { x: left, y, width: right - left, height }
    y += height
    return rect
  }
  const blow = () => {
    path.airArrows.push(...columns.map((x) => ({ x, y: y + AIR_GAP / 2, angle: 90 })))
    y += AIR_GAP
  }
  const lane = (position: Position) => {
    const deep = depth(position)
    const rect = take(deep === 0 ? EMPTY_LANE : deep * CELL + 4)
    const label = { x: labelX, y: rect.y + (deep === 0 ? 16 : CORE_DEPTH / 2 + 22) }
    path.lanes.push({ position, rect, label, empty: deep === 0 })
  }
  const plate = (kind: Plate['kind'], height: number) => {
    const rect = take(height)
    path.plates.push({ kind, rect, label: { x: labelX, y: rect.y + height / 2 + 4.5 } })
  }
  blow()
  lane('ahead-of-condenser')
  blow()
  plate('condenser', 12)
  blow()
  lane('behind-condenser')
  blow()
  plate('radiator', 20)
  const tanks = depth('radiator-tank')
  if (tanks > 0) {
    const rect = take(tanks * CELL + 16)
    path.lanes.push({
      position: 'radiator-tank',
      rect,
      label: { x: labelX, y: rect.y + 42 },
      empty: false,
    })
  }
  blow()
  if (depth('remote') > 0) {
    y += 8
    path.underbody = { from: { x: EDGE + 16, y }, to: { x: right + 16, y } }
    y += 6
    blow()
    lane('remote')
  }
  path.bottom = y
  return path
}

/** The layout of a loop that has the width for it. */
export function layoutAcross(request: LoopLayoutRequest, groups: readonly (readonly number[])[]): LoopLayout {
  const width = Math.min(request.width, WIDEST)
  const [left, right] = [EDGE + LABELS, width - EDGE - RETURN_ROOM]
  const band = (right - left) / Math.max(1, groups.length)
  const bands = groups.map((_, group) => ({ start: left + group * band, end: left + (group + 1) * band }))
  const columns = bands.length === 0 ? [(left + right) / 2] : bands.map(({ start, end }) => (start + end) / 2)
  const { bottom, ...air } = layAirPath(
    (position) => laneDepth(request, groups, position),
    left,
    right,
    columns,
  )

  const place: PlaceStation = ({ index, group, members, lane }) => {
    const center = columns[group] ?? 0
    const y =
      lane.rect.y + (lane.position === 'radiator-tank' ? 8 : 0) + placeInLane(request, members, index) * CELL
    const coreWidth = clamp(band - 52, 60, 150)
    const textWidth = Math.min(220, band - (members.length > 1 ? 2 * HEADER + 16 : 18))
    const around = Math.max(textWidth, coreWidth)
    return {
      index,
      group,
      core: { x: center - coreWidth / 2, y, width: coreWidth, height: CORE_DEPTH },
      text: { x: center - textWidth / 2, y: y + CELL - TEXT_HEIGHT, width: textWidth, height: TEXT_HEIGHT },
      target: { x: center - around / 2, y, width: around, height: CELL },
    }
  }
  const stations = placeStations(request, groups, air.lanes, place)

  // Without a cooler the line closes below the stack.
  const closeY = bottom + 10
  const lowest = groups.length === 0 ? closeY + 10 : bottom
  const bypassY = lowest + 46
  const runY = request.bypass ? bypassY + 62 : lowest + 46
  const transmission = { x: width / 2 - 115, y: runY + 20, width: 230, height: 80 }
  const [hotX, returnX] = [transmission.x + HOT_PORT, transmission.x + RETURN_PORT]
  const [leftX, rightX, caseY] = [EDGE, width - EDGE, transmission.y + 12]
  const leadIn = (v: number): Place[] => [
    [hotX, caseY],
    [hotX, runY],
    [leftX, runY],
    [leftX, v],
  ]
  const leadOut = (v: number): Place[] => [
    [rightX, v],
    [rightX, runY],
    [returnX, runY],
    [returnX, caseY],
  ]
  const pipes = layPipes({
    bands,
    passages: passagesOf(groups, stations, ({ core }) => ({
      u0: core.x,
      u1: core.x + core.width,
      v: core.y + core.height / 2,
    })),
    leadIn,
    leadOut,
    short: {
      out: [...leadIn(closeY), [width / 2, closeY]],
      back: [[width / 2, closeY], ...leadOut(closeY)],
    },
    toPoint: ([x, y]) => ({ x, y }),
  })
  if (request.bypass) pipes.push(layBypass({ x: leftX, y: bypassY }, { x: rightX, y: bypassY }))
  const captionWidth = hotX - EDGE - 28
  return {
    runs: 'across',
    width,
    height: transmission.y + transmission.height + 4,
    stations,
    ...air,
    pipes,
    outside: { x: left, y: 15, anchor: 'start', width: right - left },
    transmission,
    hotCaption: { x: EDGE + 14, y: runY - 30, anchor: 'start', width: captionWidth },
    returnCaption: { x: width - EDGE - 14, y: runY - 30, anchor: 'end', width: captionWidth },
    bypass: request.bypass
      ? {
          valve: { x: width / 2, y: bypassY },
          caption: { x: width / 2, y: bypassY - 17, anchor: 'middle', width: width - 2 * EDGE - 40 },
        }
      : null,
    bands,
  }
}
