import type { Lane, LoopLayoutRequest, Position, Station } from './layout-types'
import type { Passage } from './pipes'

/** What both ways of drawing share. */

export const LINE_HEIGHT = 17
export const TEXT_HEIGHT = 3 * LINE_HEIGHT
/** The lines run this far inside the edge of the drawing [px]. */
export const EDGE = 12

/** How many coolers of one group share a lane, at most. */
export function laneDepth(
  { coolers }: LoopLayoutRequest,
  groups: readonly (readonly number[])[],
  position: Position,
): number {
  const inLane = (members: readonly number[]) =>
    members.filter((index) => coolers[index]?.position === position).length
  return Math.max(0, ...groups.map(inLane))
}

/** The place of a cooler among those of its group in the same lane. */
export function placeInLane(
  { coolers }: LoopLayoutRequest,
  members: readonly number[],
  index: number,
): number {
  const position = coolers[index]?.position
  return members.filter((member) => member < index && coolers[member]?.position === position).length
}

/** Where one cooler of a group goes. */
export type PlaceStation = (at: {
  index: number
  group: number
  members: readonly number[]
  lane: Lane
}) => Station

export function placeStations(
  { coolers }: LoopLayoutRequest,
  groups: readonly (readonly number[])[],
  lanes: readonly Lane[],
  place: PlaceStation,
): Station[] {
  return groups.flatMap((members, group) =>
    members.flatMap((index) => {
      const lane = lanes.find(({ position }) => position === coolers[index]?.position)
      return lane ? [place({ index, group, members, lane })] : []
    }),
  )
}

export function passagesOf(
  groups: readonly unknown[],
  stations: readonly Station[],
  passage: (station: Station) => Passage,
): Passage[][] {
  return groups.map((_, group) => stations.filter((station) => station.group === group).map(passage))
}
