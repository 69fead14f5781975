import { arrowAtEnd, arrowInLongestRun, bentPath, clamp, type Point } from './geometry'
import type { Pipe, PipeKind } from './layout-types'

/** The line the oil runs in, from the transmission through the groups of coolers and back. */

const BEND = 9
/** How far inside its band the header of a group in parallel stands [px]. */
export const HEADER = 12
/** An arrow stands this far before the end of a pipe; a run longer than that has one in its middle as well [px]. */
const ARROW_BEFORE_END = 9
const LONG_RUN = 90
/** Off the middle in the hot line, where a bypass may branch off. */
const ARROW_SHARE: Record<PipeKind, number> = { hot: 0.72, part: 0.5, cool: 0.5, bypass: 0.5 }

/** A place by its distance along the way of the oil (u) and across it (v). */
export type Place = [u: number, v: number]

/** A core as the oil sees it: where it enters and leaves, and how far across. */
export interface Passage {
  u0: number
  u1: number
  v: number
}

export interface Route {
  /** By group. */
  passages: readonly (readonly Passage[])[]
  bands: readonly { start: number; end: number }[]
  /** From the transmission to the height of the first group, and from that of the last one back. */
  leadIn: (v: number) => Place[]
  leadOut: (v: number) => Place[]
  /** The whole way where there is no cooler: out, and back from the same place. */
  short: { out: Place[]; back: Place[] }
  toPoint: (place: Place) => Point
}

type Lay = (kind: PipeKind, places: readonly Place[], arrows?: 'none' | 'end' | 'long') => void

const low = (members: readonly Passage[]) => Math.min(...members.map(({ v }) => v))
const high = (members: readonly Passage[]) => Math.max(...members.map(({ v }) => v))

/** Every length of pipe. */
export function layPipes(route: Route): Pipe[] {
  const { passages, bands, leadIn, leadOut, short, toPoint } = route
  const pipes: Pipe[] = []
  const lay: Lay = (kind, places, arrows = 'none') => {
    const points = places.map(toPoint)
    pipes.push({
      kind,
      path: bentPath(points, BEND),
      arrows: [
        ...(arrows === 'none' ? [] : arrowAtEnd(points, ARROW_BEFORE_END)),
        ...(arrows === 'long' ? arrowInLongestRun(points, LONG_RUN, ARROW_SHARE[kind]) : []),
      ],
    })
  }
  if (passages.length === 0) {
    lay('hot', short.out, 'long')
    lay('cool', short.back, 'long')
    return pipes
  }
  let at = passages[0]?.[0]?.v ?? 0
  let pending = leadIn(at)
  passages.forEach((members, group) => {
    const band = bands[group] ?? { start: 0, end: 0 }
    const before: PipeKind = group === 0 ? 'hot' : 'part'
    const after: PipeKind = group === passages.length - 1 ? 'cool' : 'part'
    const arrows = group === 0 ? 'long' : 'end'
    const [first, ...others] = members
    if (!first) return
    if (others.length === 0) {
      lay(before, [...pending, [band.start, at], [band.start, first.v], [first.u0, first.v]], arrows)
      at = first.v
      pending = [[first.u1, at]]
      return
    }
    // The header reaches to where the line comes from, and from where it goes on.
    const [enter, leave] = [band.start + HEADER, band.end - HEADER]
    const next = passages[group + 1]?.[0]?.v ?? clamp(at, low(members), high(members))
    const exit = clamp(next, low(members), high(members))
    layDivided(lay, before, [...pending, [enter, at]], members, arrows)
    layUnited(lay, after, [leave, exit], members)
    pending = [
      [leave, exit],
      [leave, next],
    ]
    at = next
  })
  lay('cool', [...pending, ...leadOut(at)], 'long')
  return pipes
}

/**
 * A group in parallel: the line to each of its cores. The way they share is laid for each, from its beginning, so that it
 * bends into the header as one pipe and stripes on top of one another fall together.
 */
function layDivided(
  lay: Lay,
  kind: PipeKind,
  shared: readonly Place[],
  members: readonly Passage[],
  arrows: 'end' | 'long',
): void {
  const header = shared.at(-1)?.[0] ?? 0
  members.forEach(({ u0, v }, place) =>
    lay(kind, [...shared, [header, v], [u0, v]], place === 0 ? arrows : 'end'),
  )
}

/** From each core of a group to where the line is one again, laid from there for the same reason. */
function layUnited(lay: Lay, kind: PipeKind, exit: Place, members: readonly Passage[]): void {
  for (const { u1, v } of members) lay(kind, [exit, [exit[0], v], [u1, v]])
}

/** The short cut past the coolers. */
export function layBypass(from: Point, to: Point): Pipe {
  const points = [from, to]
  return { kind: 'bypass', path: bentPath(points, 0), arrows: arrowAtEnd(points, ARROW_BEFORE_END + 12) }
}
