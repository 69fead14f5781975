import type { Cooler } from '../schemas/heat-input'
import type { Arrow, Point, Rect } from './geometry'

/** What the drawing of the loop is made of: places and shapes, in pixels. */

export type Position = Cooler['position']

/** Filled: as it leaves the converter. Striped: partly cooled. Open: cooled. Thin: past the coolers. */
export type PipeKind = 'hot' | 'part' | 'cool' | 'bypass'

export interface Pipe {
  kind: PipeKind
  path: string
  arrows: Arrow[]
}

export interface Station {
  /** Index of the cooler. */
  index: number
  group: number
  core: Rect
  text: Rect
  /** What can be pressed for it: core and text together. */
  target: Rect
}

/** A place in the air path, with the room its coolers need. */
export interface Lane {
  position: Position
  rect: Rect
  label: Point
  empty: boolean
}

/** An exchanger that the air passes whatever is in the loop. */
export interface Plate {
  kind: 'condenser' | 'radiator'
  rect: Rect
  label: Point
}

export interface Caption extends Point {
  anchor: 'start' | 'middle' | 'end'
  width: number
}

export interface LoopLayout {
  /** The way the oil runs. */
  runs: 'across' | 'down'
  width: number
  height: number
  stations: Station[]
  lanes: Lane[]
  plates: Plate[]
  pipes: Pipe[]
  /** Small arrows of the air, at each thing it meets. */
  airArrows: Arrow[]
  outside: Caption
  /** Between what the stack holds and what hangs under the body. */
  underbody: { from: Point; to: Point } | null
  transmission: Rect
  hotCaption: Caption
  returnCaption: Caption
  bypass: { valve: Point; caption: Caption } | null
  /** Start and end of each group of coolers along the way of the oil. */
  bands: { start: number; end: number }[]
}

export interface LoopLayoutRequest {
  coolers: readonly Pick<Cooler, 'position' | 'parallelWithPrevious'>[]
  /** What the drawing may take up [px]. */
  width: number
  bypass: boolean
}
