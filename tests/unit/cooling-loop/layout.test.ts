import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { findDrop } from '../../../shared/cooling-loop/drop'
import { groupLoop } from '../../../shared/cooling-loop/edit'
import { overlaps, type Point, type Rect } from '../../../shared/cooling-loop/geometry'
import { layoutLoop } from '../../../shared/cooling-loop/layout'
import type { LoopLayout, Pipe, Position } from '../../../shared/cooling-loop/layout-types'
import type { Cooler } from '../../../shared/schemas/heat-input'
import { anyLoop } from './arbitrary-loop'

const at = (position: Position, parallelWithPrevious = false) => ({ position, parallelWithPrevious })
const TANK = at('radiator-tank')
const FRONT = at('ahead-of-condenser')
const BEHIND = at('behind-condenser')
const REMOTE = at('remote')

/** Every point a pipe is drawn through. */
function pointsOf(pipe: Pipe): Point[] {
  const numbers = [...pipe.path.matchAll(/-?\d+(?:\.\d+)?/g)].map(Number)
  return Array.from({ length: numbers.length / 2 }, (_, index) => ({
    x: numbers[2 * index] ?? Number.NaN,
    y: numbers[2 * index + 1] ?? Number.NaN,
  }))
}
const shrink = ({ x, y, width, height }: Rect, by: number): Rect => ({
  x: x + by,
  y: y + by,
  width: width - 2 * by,
  height: height - 2 * by,
})
function crosses(pipe: Pipe, rect: Rect): boolean {
  const points = pointsOf(pipe)
  return points.some((to, index) => {
    const from = points[index - 1]
    if (!from) return false
    const run = {
      x: Math.min(from.x, to.x),
      y: Math.min(from.y, to.y),
      width: Math.abs(to.x - from.x),
      height: Math.abs(to.y - from.y),
    }
    return overlaps(rect, { ...run, width: run.width + 0.1, height: run.height + 0.1 })
  })
}
const first = (pipe: Pipe | undefined) => (pipe ? pointsOf(pipe)[0] : undefined)
const last = (pipe: Pipe | undefined) => (pipe ? pointsOf(pipe).at(-1) : undefined)
const oil = (layout: LoopLayout) => layout.pipes.filter(({ kind }) => kind !== 'bypass')

describe('a loop on a desk', () => {
  const layout = layoutLoop({ coolers: [TANK, FRONT, REMOTE], width: 1000, bypass: true })

  it('runs the oil to the right and the air down, in the order each meets things', () => {
    expect(layout.runs).toBe('across')
    const xs = layout.stations.map(({ core }) => core.x)
    expect(xs).toEqual([...xs].sort((a, b) => a - b))
    const y = (name: string) =>
      layout.lanes.find(({ position }) => position === name)?.rect.y ??
      layout.plates.find(({ kind }) => kind === name)?.rect.y ??
      Number.NaN
    const down = [
      'ahead-of-condenser',
      'condenser',
      'behind-condenser',
      'radiator',
      'radiator-tank',
      'remote',
    ]
    expect(down.map(y)).toEqual(down.map(y).sort((a, b) => a - b))
  })

  it('draws the line hot, partly cooled and cooled, with the short cut past the coolers', () => {
    expect(layout.pipes.map(({ kind }) => kind)).toEqual(['hot', 'part', 'part', 'cool', 'bypass'])
    expect(layout.bypass?.valve.y).toBeLessThan(layout.transmission.y)
  })

  it('leaves the valve out where there is no bypass', () => {
    const plain = layoutLoop({ coolers: [TANK], width: 1000, bypass: false })
    expect(plain.bypass).toBeNull()
    expect(plain.pipes.map(({ kind }) => kind)).toEqual(['hot', 'cool'])
  })
})

describe('a loop on a phone', () => {
  const layout = layoutLoop({
    coolers: [TANK, FRONT, { ...BEHIND, parallelWithPrevious: true }],
    width: 358,
    bypass: true,
  })

  it('runs the oil down and the air to the right', () => {
    expect(layout.runs).toBe('down')
    const [tank, front, behind] = layout.stations
    expect(front?.core.y).toBeGreaterThan(tank?.core.y ?? Infinity)
    expect(front?.core.y).toBe(behind?.core.y)
    expect(front?.core.x).toBeLessThan(behind?.core.x ?? 0)
    expect(behind?.core.x).toBeLessThan(tank?.core.x ?? 0)
  })

  it('is drawn so where more groups come than fit side by side', () => {
    const six = [TANK, FRONT, BEHIND, REMOTE, FRONT, BEHIND]
    expect(layoutLoop({ coolers: six, width: 800, bypass: false }).runs).toBe('down')
    expect(layoutLoop({ coolers: six, width: 1040, bypass: false }).runs).toBe('across')
  })
})

describe('without a cooler', () => {
  it.each([358, 1000])('the line goes straight back at %i px', (width) => {
    const layout = layoutLoop({ coolers: [], width, bypass: false })
    const [out, back] = layout.pipes
    expect(layout.pipes.map(({ kind }) => kind)).toEqual(['hot', 'cool'])
    expect(last(out)).toEqual(first(back))
  })
})

describe('for any loop and any width', () => {
  const request = fc.record({
    coolers: anyLoop,
    width: fc.integer({ min: 280, max: 1600 }),
    bypass: fc.boolean(),
  })
  const forAny = (
    check: (layout: LoopLayout, asked: { coolers: readonly Cooler[]; width: number }) => void,
  ) =>
    fc.assert(
      fc.property(request, (asked) => check(layoutLoop(asked), asked)),
      { numRuns: 400 },
    )

  it('keeps everything on the sheet', () => {
    forAny((layout, { width }) => {
      expect(layout.width).toBeLessThanOrEqual(width)
      const sheet = { x: 0, y: 0, width: layout.width, height: layout.height }
      const inside = (rect: Rect) =>
        rect.x >= 0 &&
        rect.y >= 0 &&
        rect.x + rect.width <= sheet.width &&
        rect.y + rect.height <= sheet.height
      const rects = [
        ...layout.stations.flatMap(({ core, text, target }) => [core, text, target]),
        ...layout.lanes.map(({ rect }) => rect),
        ...layout.plates.map(({ rect }) => rect),
        layout.transmission,
      ]
      for (const rect of rects) expect(inside(rect), JSON.stringify(rect)).toBe(true)
      const points = [
        ...layout.pipes.flatMap(pointsOf),
        ...layout.airArrows,
        ...layout.pipes.flatMap(({ arrows }) => arrows),
      ]
      for (const { x, y } of points) expect(inside({ x, y, width: 0, height: 0 }), `${x} ${y}`).toBe(true)
    })
  })

  it('lets nothing of one cooler lie on another', () => {
    forAny(({ stations }) => {
      for (const a of stations)
        for (const b of stations) {
          if (a.index >= b.index) continue
          expect(overlaps(a.core, b.core)).toBe(false)
          expect(overlaps(a.text, b.text)).toBe(false)
          expect(overlaps(a.core, b.text) || overlaps(a.text, b.core)).toBe(false)
          expect(overlaps(a.target, b.target)).toBe(false)
        }
    })
  })

  it('puts each cooler into the air it is in, with a target for a glove', () => {
    forAny(({ stations, lanes }, { coolers }) => {
      expect(stations).toHaveLength(coolers.length)
      for (const { index, core, target } of stations) {
        const lane = lanes.find(({ position }) => position === coolers[index]?.position)
        expect(lane && overlaps(lane.rect, core) && !lane.empty).toBe(true)
        expect(Math.min(target.width, target.height)).toBeGreaterThanOrEqual(48)
      }
    })
  })

  it('keeps the groups in the order the oil meets them', () => {
    forAny((layout, { coolers }) => {
      expect(layout.bands).toHaveLength(groupLoop(coolers).length)
      layout.bands.forEach(({ start, end }, group) => {
        expect(end).toBeGreaterThan(start)
        expect(start).toBeGreaterThanOrEqual((layout.bands[group - 1]?.end ?? 0) - 1e-9)
      })
      for (const { core, group } of layout.stations) {
        const { start, end } = layout.bands[group] ?? { start: NaN, end: NaN }
        const [from, to] =
          layout.runs === 'across' ? [core.x, core.x + core.width] : [core.y, core.y + core.height]
        expect(from).toBeGreaterThan(start)
        expect(to).toBeLessThan(end)
      }
    })
  })

  it('lays the line from the transmission through every core back to it, past all else', () => {
    forAny((layout) => {
      const pipes = oil(layout)
      const { x, y, width, height } = layout.transmission
      for (const end of [first(pipes[0]), last(pipes.at(-1))]) {
        expect(end?.x).toBeGreaterThan(x)
        expect(end?.x).toBeLessThan(x + width)
        expect(end?.y).toBeGreaterThan(y)
        expect(end?.y).toBeLessThan(y + height)
      }
      const ends = pipes.flatMap((pipe) => [first(pipe), last(pipe)])
      for (const { core, text } of layout.stations) {
        const [near, far] =
          layout.runs === 'across'
            ? [
                { x: core.x, y: core.y + core.height / 2 },
                { x: core.x + core.width, y: core.y + core.height / 2 },
              ]
            : [
                { x: core.x + core.width / 2, y: core.y },
                { x: core.x + core.width / 2, y: core.y + core.height },
              ]
        for (const port of [near, far])
          expect(ends.some((end) => end && Math.hypot(end.x - port.x, end.y - port.y) < 0.2)).toBe(true)
        for (const pipe of pipes) {
          expect(crosses(pipe, shrink(core, 1)), `${pipe.path} through ${JSON.stringify(core)}`).toBe(false)
          expect(crosses(pipe, shrink(text, 1)), `${pipe.path} over words ${JSON.stringify(text)}`).toBe(
            false,
          )
        }
      }
    })
  })

  it('knows a drop on a cooler’s own place as no change, and far ends as first and last', () => {
    forAny((layout, { coolers }) => {
      for (const { index, core, group } of layout.stations) {
        const middle = { x: core.x + core.width / 2, y: core.y + core.height / 2 }
        expect(findDrop(layout, index, middle)).toEqual({ position: coolers[index]?.position })
        for (const other of layout.stations.filter((station) => station.group !== group))
          expect(
            findDrop(layout, index, {
              x: other.core.x + other.core.width / 2,
              y: other.core.y + other.core.height / 2,
            }),
          ).toEqual({ beside: other.group, position: coolers[other.index]?.position })
        expect(findDrop(layout, index, { x: 0, y: 0 }).gap).toBe(0)
        expect(findDrop(layout, index, { x: layout.width, y: layout.height }).gap).toBe(layout.bands.length)
      }
    })
  })
})
