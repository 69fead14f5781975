import { clamp, type Point, type Rect } from './geometry'
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

/** The oil from top to bottom, the air from the left, the words at the right: for a phone, or for many groups. */

const WIDEST = 600
const CORE_LENGTH = TEXT_HEIGHT + 3
/** From core to core of one lane: as wide as there is room, so that words keep a place beside them [px]. */
const WIDEST_PITCH = 26
const NARROWEST_PITCH = 19
const CORE_GAP = 6
const LEAST_TEXT = 44
const LEAST_CAPTION = 90
const EMPTY_LANE = 12
const PLATE_DEPTH = 17
const LANES_LEFT = EDGE + 18
const UNDERBODY_GAP = 16
const TEXT_GAP = 14
/** Length of the stack that has no cooler in it: room for the names along its plates [px]. */
const EMPTY_STACK = 84
const ROW = TEXT_HEIGHT + 8
/** Words of the bypass need up to four lines, and those of the hot line two [px]. */
const BYPASS_ROOM = 94
/** Where the lines enter and leave the case, from its left end at this size [px]. */
const RETURN_PORT = 37
const HOT_PORT = 113

interface AirPath {
  lanes: Lane[]
  plates: Plate[]
  /** Across the way of the oil. */
  right: number
  underbodyX: number | undefined
}

const ALWAYS: readonly Position[] = ['ahead-of-condenser', 'behind-condenser']
const WHERE_USED: readonly Position[] = ['radiator-tank', 'remote']

/** How far apart the cores of a lane stand in a drawing of a width. */
function findPitch(depth: (position: Position) => number, width: number): number {
  const cores = [...ALWAYS, ...WHERE_USED].reduce((sum, position) => sum + depth(position), 0)
  const lanes = [
    ...ALWAYS.map((position) => (depth(position) === 0 ? EMPTY_LANE : CORE_GAP)),
    ...WHERE_USED.map((position) => (depth(position) === 0 ? 0 : CORE_GAP)),
  ].reduce<number>((sum, lane) => sum + lane, 0)
  const gap = depth('remote') > 0 ? UNDERBODY_GAP : 0
  const room = width - LANES_LEFT - lanes - 2 * PLATE_DEPTH - gap - TEXT_GAP - LEAST_TEXT - 2
  return cores === 0 ? WIDEST_PITCH : clamp(Math.floor(room / cores), NARROWEST_PITCH, WIDEST_PITCH)
}

/** The stack from the front backwards, then what hangs under the body; heights are set when the rows are known. */
function layAirPath(depth: (position: Position) => number, pitch: number, top: number): AirPath {
  const path: AirPath = { lanes: [], plates: [], right: 0, underbodyX: undefined }
  let x = LANES_LEFT
  const take = (width: number): Rect => {
    const rect = { x, y: top, width, height: 0 }
    x += width
    return rect
  }
  const middle = (rect: Rect): Point => ({ x: rect.x + rect.width / 2, y: top })
  const lane = (position: Position) => {
    const deep = depth(position)
    const rect = take(deep === 0 ? EMPTY_LANE : deep * pitch + CORE_GAP)
    path.lanes.push({ position, rect, label: middle(rect), empty: deep === 0 })
  }
  const plate = (kind: Plate['kind']) => {
    const rect = take(PLATE_DEPTH)
    path.plates.push({ kind, rect, label: middle(rect) })
  }
  lane('ahead-of-condenser')
  plate('condenser')
  lane('behind-condenser')
  plate('radiator')
  if (depth('radiator-tank') > 0) lane('radiator-tank')
  if (depth('remote') > 0) {
    path.underbodyX = x + 7
    x += UNDERBODY_GAP
    lane('remote')
  }
  path.right = x
  return path
}

/** The layout of a loop in a narrow place. */
export function layoutDown(request: LoopLayoutRequest, groups: readonly (readonly number[])[]): LoopLayout {
  const width = Math.min(request.width, WIDEST)
  const transmission = { x: LANES_LEFT, y: 4, width: 161, height: 58 }
  const [returnX, hotX] = [transmission.x + RETURN_PORT, transmission.x + HOT_PORT]
  const caseY = transmission.y + 40
  const returnRunY = transmission.y + transmission.height + 14
  const bypassY = returnRunY + 30
  const runY = request.bypass ? bypassY + BYPASS_ROOM : returnRunY + 36
  const top = runY + 40

  const depth = (position: Position) => laneDepth(request, groups, position)
  const pitch = findPitch(depth, width)
  const air = layAirPath(depth, pitch, top)
  const textX = Math.max(air.right + TEXT_GAP, hotX + 18)
  const textWidth = width - textX - 2

  let y = top + 4
  const bands = groups.map((members) => {
    const start = y
    const inner = Math.max(CORE_LENGTH, members.length * ROW)
    y += inner + (members.length > 1 ? 2 * HEADER + 26 : 2 * HEADER)
    return { start, end: y }
  })
  const bottom = (groups.length === 0 ? y + EMPTY_STACK : y) + 4
  for (const { rect } of [...air.lanes, ...air.plates]) rect.height = bottom - top
  // Lines cross the stack between the rows, never in the middle of one.
  const [row] = bands
  for (const { label } of air.plates) label.y = row ? (row.start + row.end) / 2 : (top + bottom) / 2

  const place: PlaceStation = ({ index, group, members, lane }) => {
    const { start, end } = bands[group] ?? { start: 0, end: 0 }
    const middle = (start + end) / 2
    const x = lane.rect.x + CORE_GAP + placeInLane(request, members, index) * pitch
    const textY = middle + (members.indexOf(index) - members.length / 2) * ROW + 4
    return {
      index,
      group,
      core: { x, y: middle - CORE_LENGTH / 2, width: pitch - CORE_GAP, height: CORE_LENGTH },
      text: { x: textX, y: textY, width: textWidth, height: TEXT_HEIGHT },
      target: { x: textX - 6, y: textY - 4, width: textWidth + 8, height: ROW },
    }
  }
  const stations = placeStations(request, groups, air.lanes, place)

  const endY = bottom + 24
  const closing: Place = [endY, (hotX + EDGE) / 2]
  const back: Place[] = [
    [endY, EDGE],
    [returnRunY, EDGE],
    [returnRunY, returnX],
    [caseY, returnX],
  ]
  const pipes = layPipes({
    bands,
    passages: passagesOf(groups, stations, ({ core }) => ({
      u0: core.y,
      u1: core.y + core.height,
      v: core.x + core.width / 2,
    })),
    leadIn: (v) => [
      [caseY, hotX],
      [runY, hotX],
      [runY, v],
    ],
    leadOut: (v) => [[endY, v], ...back],
    short: { out: [[caseY, hotX], [endY, hotX], closing], back: [closing, ...back] },
    toPoint: ([along, across]) => ({ x: across, y: along }),
  })
  if (request.bypass) pipes.push(layBypass({ x: hotX, y: bypassY }, { x: EDGE, y: bypassY }))

  const arrowsInto = (lane: Lane, rows: readonly { start: number; end: number }[]) =>
    rows.map(({ start, end }) => ({ x: lane.rect.x - 4, y: (start + end) / 2, angle: 0 }))
  const airArrows = air.lanes.flatMap((lane) => {
    if (lane.position === 'ahead-of-condenser')
      return arrowsInto(lane, bands.length === 0 ? [{ start: top, end: bottom }] : bands)
    const held = groups.map((members) =>
      members.some((index) => request.coolers[index]?.position === lane.position),
    )
    return lane.position === 'remote'
      ? arrowsInto(
          lane,
          bands.filter((_, group) => held[group]),
        )
      : []
  })
  const captionAt = (x: number, captionY: number) => ({
    x,
    y: captionY,
    anchor: 'start' as const,
    width: width - x - 2,
  })
  const besideHot = hotX + 18
  const firstX = stations[0] ? stations[0].core.x + stations[0].core.width : 0
  // Words of the return line stand beside the others, or below the line where there is no room for them.
  const below = textWidth < LEAST_CAPTION
  return {
    runs: 'down',
    width,
    height: endY + (below ? 46 : 20),
    stations,
    lanes: air.lanes,
    plates: air.plates,
    pipes,
    airArrows,
    outside: captionAt(Math.min(textX, Math.max(besideHot, firstX + 8)), top - 8),
    underbody:
      air.underbodyX === undefined
        ? null
        : { from: { x: air.underbodyX, y: top }, to: { x: air.underbodyX, y: bottom } },
    transmission,
    hotCaption: captionAt(besideHot, runY - 34),
    returnCaption: below ? captionAt(LANES_LEFT, endY + 20) : captionAt(textX, endY - 6),
    bypass: request.bypass
      ? { valve: { x: (hotX + EDGE) / 2, y: bypassY }, caption: captionAt(besideHot, bypassY - 14) }
      : null,
    bands,
  }
}
