import type { AirPosition, Cooler } from '../schemas/heat-input'

/**
 * Rearranging the cooler loop. The list is in the order the oil meets the coolers; one marked `parallelWithPrevious` stands
 * beside the one before. Every function returns a new list the model's schema takes, whatever it is asked.
 */

/** As many as the model takes. */
export const MOST_COOLERS = 6

/** A loop after a change. */
export interface LoopEdit {
  coolers: Cooler[]
  /** Where each cooler was before; null for one that is new. A sheet carries origins along by it. */
  sources: (number | null)[]
  /** Where the cooler that was moved, changed or added is now; null when it is gone. */
  at: number | null
}

/** Indices of the coolers that share the flow, in the order the oil meets the groups. The first flag means nothing. */
export function groupLoop(coolers: readonly Pick<Cooler, 'parallelWithPrevious'>[]): number[][] {
  const groups: number[][] = []
  coolers.forEach((cooler, index) => {
    const last = groups.at(-1)
    if (cooler.parallelWithPrevious === true && last) last.push(index)
    else groups.push([index])
  })
  return groups
}

/** What tells one loop from another that looks like it: order, grouping, kind and place of its coolers. */
export function markLoop(coolers: readonly Cooler[]): string {
  return JSON.stringify(
    coolers.map(({ name, construction, position, parallelWithPrevious }) => [
      name,
      construction,
      position,
      parallelWithPrevious ?? false,
    ]),
  )
}

/** The group a cooler is in, and its place in it. */
function findPlace(groups: readonly number[][], index: number): { group: number; place: number } | undefined {
  const group = groups.findIndex((members) => members.includes(index))
  return group < 0 ? undefined : { group, place: groups[group]?.indexOf(index) ?? 0 }
}

function withFlag(cooler: Cooler, parallel: boolean): Cooler {
  if ((cooler.parallelWithPrevious ?? false) === parallel) return cooler
  const { parallelWithPrevious: _flag, ...rest } = cooler
  return parallel ? { ...rest, parallelWithPrevious: true } : rest
}

/** A loop from groups of indices into the old list. */
function assemble(
  coolers: readonly Cooler[],
  groups: readonly (readonly number[])[],
  moved: number,
): LoopEdit {
  const sources = groups.flat()
  const next = groups.flatMap((members) =>
    members.flatMap((source, place) => {
      const cooler = coolers[source]
      return cooler ? [withFlag(cooler, place > 0)] : []
    }),
  )
  const at = sources.indexOf(moved)
  return { coolers: next, sources, at: at < 0 ? null : at }
}

const unchanged = (coolers: readonly Cooler[], at: number): LoopEdit => ({
  coolers: [...coolers],
  sources: coolers.map((_, index) => index),
  at: coolers[at] ? at : null,
})

/** The groups with one cooler taken out; a group it leaves empty is gone. */
const without = (groups: readonly number[][], index: number): number[][] =>
  groups.map((members) => members.filter((member) => member !== index)).filter(({ length }) => length > 0)

/** Places a cooler on its own at a gap: before the group of that number as it stands now, or last. */
export function moveToGap(coolers: readonly Cooler[], index: number, gap: number): LoopEdit {
  const groups = groupLoop(coolers)
  const place = findPlace(groups, index)
  if (!place || !Number.isInteger(gap) || gap < 0 || gap > groups.length) return unchanged(coolers, index)
  const alone = groups[place.group]?.length === 1
  const shift = alone && gap > place.group ? 1 : 0
  return assemble(coolers, without(groups, index).toSpliced(gap - shift, 0, [index]), index)
}

/** Places a cooler beside the coolers of another group, as the last of them. */
export function moveBeside(coolers: readonly Cooler[], index: number, group: number): LoopEdit {
  const groups = groupLoop(coolers)
  const place = findPlace(groups, index)
  const target = groups[group]
  if (!place || !target || place.group === group) return unchanged(coolers, index)
  const next = groups.map((members, at) => {
    const rest = members.filter((member) => member !== index)
    return at === group ? [...rest, index] : rest
  })
  return assemble(
    coolers,
    next.filter(({ length }) => length > 0),
    index,
  )
}

/** One step nearer to the transmission: before the group ahead, or out of its own group to stand before it. */
export function moveEarlier(coolers: readonly Cooler[], index: number): LoopEdit {
  const groups = groupLoop(coolers)
  const place = findPlace(groups, index)
  if (!place) return unchanged(coolers, index)
  const shares = (groups[place.group]?.length ?? 0) > 1
  return moveToGap(coolers, index, shares ? place.group : place.group - 1)
}

/** One step nearer to the return line: behind the group that follows, or out of its own group to stand behind it. */
export function moveLater(coolers: readonly Cooler[], index: number): LoopEdit {
  const groups = groupLoop(coolers)
  const place = findPlace(groups, index)
  if (!place) return unchanged(coolers, index)
  const shares = (groups[place.group]?.length ?? 0) > 1
  return moveToGap(coolers, index, shares ? place.group + 1 : place.group + 2)
}

/** Beside the one before: the two share the flow. */
export function makeParallel(coolers: readonly Cooler[], index: number): LoopEdit {
  const place = findPlace(groupLoop(coolers), index)
  return place ? moveBeside(coolers, index, place.group - 1) : unchanged(coolers, index)
}

/** Back in line: out of its group, before it when it is the first of it, else behind it. */
export function makeSeries(coolers: readonly Cooler[], index: number): LoopEdit {
  const groups = groupLoop(coolers)
  const place = findPlace(groups, index)
  if (!place || groups[place.group]?.length === 1) return unchanged(coolers, index)
  return moveToGap(coolers, index, place.place === 0 ? place.group : place.group + 1)
}

/** Where it sits in the air. What belongs to a remote cooler only is dropped elsewhere; a tank cooler stays in its tank. */
export function setPosition(coolers: readonly Cooler[], index: number, position: AirPosition): LoopEdit {
  const cooler = coolers[index]
  if (!cooler || cooler.construction === 'in-tank' || cooler.position === position)
    return unchanged(coolers, index)
  const { ramFraction: _ram, fanFlowM3S: _fan, ...rest } = cooler
  return { ...unchanged(coolers, index), coolers: coolers.with(index, { ...rest, position }) }
}

/** Two changes, one after the other, as one. */
export function chainEdits(first: LoopEdit, second: LoopEdit): LoopEdit {
  return {
    ...second,
    sources: second.sources.map((source) => (source === null ? null : (first.sources[source] ?? null))),
  }
}

/** A cooler more, on its own: before the group of the gap, or last. A full loop stays as it is. */
export function addCooler(coolers: readonly Cooler[], cooler: Cooler, gap?: number): LoopEdit {
  if (coolers.length >= MOST_COOLERS) return { ...unchanged(coolers, 0), at: null }
  const added = coolers.length
  const groups = groupLoop(coolers)
  const at = gap === undefined ? groups.length : Math.min(Math.max(Math.trunc(gap), 0), groups.length)
  const edit = assemble([...coolers, cooler], groups.toSpliced(at, 0, [added]), added)
  return { ...edit, sources: edit.sources.map((source) => (source === added ? null : source)) }
}

/** A cooler less; what stood beside it stays where it was. */
export function removeCooler(coolers: readonly Cooler[], index: number): LoopEdit {
  if (!coolers[index]) return unchanged(coolers, index)
  return assemble(coolers, without(groupLoop(coolers), index), index)
}

/** What can be done with a cooler where it stands. */
export interface LoopChoices {
  earlier: boolean
  later: boolean
  /** Put beside the one before. */
  beside: boolean
  /** Back in line. */
  inLine: boolean
  position: boolean
}

export function listChoices(coolers: readonly Cooler[], index: number): LoopChoices {
  const groups = groupLoop(coolers)
  const place = findPlace(groups, index)
  if (!place) return { earlier: false, later: false, beside: false, inLine: false, position: false }
  const shares = (groups[place.group]?.length ?? 0) > 1
  return {
    earlier: shares || place.group > 0,
    later: shares || place.group < groups.length - 1,
    beside: !shares && place.group > 0,
    inLine: shares,
    position: coolers[index]?.construction !== 'in-tank',
  }
}
