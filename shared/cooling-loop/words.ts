import { CONSTRUCTION_WORDS, POSITION_WORDS } from '../build-sheet/generic-cooler'
import { formatGiven } from '../charts/formats'
import type { Cooler } from '../schemas/heat-input'
import { formatQuantity, quantityParts, type UnitSystem } from '../units/display'
import { groupLoop, type LoopEdit } from './edit'
import type { Position } from './layout-types'
import type { LoopReading } from './reading'

/** The loop in words: for the drawing's labels, for whoever does not see it, and for what is said after a change. */

/** Short enough to stand beside a drawing. */
export const LANE_WORDS: Record<Position, string> = {
  'ahead-of-condenser': 'ahead of condenser',
  'behind-condenser': 'behind condenser',
  'radiator-tank': 'radiator tank',
  remote: 'under the body',
}
export const PLATE_WORDS = { condenser: 'condenser', radiator: 'radiator' } as const

const NO_BREAK_SPACE = '\u00a0'

const ORDINALS = ['first', 'second', 'third', 'fourth', 'fifth', 'sixth'] as const
const ordinal = (place: number) => ORDINALS[place] ?? `number ${place + 1}`

const joined = (names: readonly string[]) =>
  names.length < 2 ? (names[0] ?? '') : `${names.slice(0, -1).join(', ')} and ${names.at(-1)}`

function hasFan(cooler: Cooler): boolean {
  return cooler.construction !== 'in-tank' && (cooler.fanFlowM3S ?? 0) > 0
}

/** Where a cooler sits, in full. */
export function placeWords(cooler: Cooler): string {
  const place = POSITION_WORDS[cooler.position]
  return cooler.position === 'remote' ? `${place}, ${hasFan(cooler) ? 'own fan' : 'no fan'}` : place
}

/** What a cooler does at the moment, or what it is where nothing is computed. */
export function heatWords(cooler: Cooler, heatW: number | undefined, system: UnitSystem): string {
  if (heatW === undefined) return `rated ${formatQuantity(cooler.rating.heatW, 'heatRate', system)}`
  if (heatW < 0) return `warms the oil, ${formatQuantity(-heatW, 'heatRate', system)}`
  return `takes ${formatQuantity(heatW, 'heatRate', system)}`
}

/** A line of the drawing in several lengths, the longest first. */
export type Wording = readonly [string, ...string[]]

/** The three lines beside a cooler in the drawing. */
export function stationLines(
  coolers: readonly Cooler[],
  index: number,
  reading: LoopReading | null,
  system: UnitSystem,
): readonly Wording[] {
  const cooler = coolers[index]
  if (!cooler) return []
  const groups = groupLoop(coolers)
  const group = groups.findIndex((members) => members.includes(index))
  const members = groups[group] ?? []
  const heatW = reading?.coolerHeatW[index]
  const heat: Wording = [
    heatWords(cooler, heatW, system),
    formatQuantity(heatW ?? cooler.rating.heatW, 'heatRate', system),
    // A figure is never cut: half of it would be another figure.
    quantityParts(heatW ?? cooler.rating.heatW, 'heatRate', system).figure,
  ]
  return [[cooler.name], heat, outWords(cooler, members, index, reading?.afterGroupC[group], system)]
}

/** What leaves a cooler, or how it is built where nothing is computed. */
function outWords(
  cooler: Cooler,
  members: readonly number[],
  index: number,
  afterC: number | undefined,
  system: UnitSystem,
): Wording {
  if (afterC === undefined)
    return [cooler.construction === 'in-tank' ? '' : CONSTRUCTION_WORDS[cooler.construction]]
  const out = formatQuantity(afterC, 'temperature', system)
  if (members.length === 1) return [`oil out ${out}`, out]
  // The mixture is told once, beside the last of them.
  return members.at(-1) === index ? [`mixed ${out}`, out] : ['']
}

/** What a bypass does, and what it does right now. */
export function bypassWords(
  bypass: { openC: number; fullC: number },
  reading: LoopReading | null,
  system: UnitSystem,
): Wording {
  const at = (tempC: number) => formatQuantity(tempC, 'temperature', system)
  const rule = `Bypass: straight back below ${at(bypass.openC)}, all through the coolers from ${at(bypass.fullC)}`
  const short = `Bypass until ${at(bypass.fullC)}`
  if (!reading) return [rule, short]
  const percent = Math.round(reading.throughShare * 100)
  const now = percent === 100 ? 'now all' : `now ${percent}${NO_BREAK_SPACE}%`
  return [`${rule}; ${now}`, `${short}; ${now}`, short]
}

/** One cooler of the ordered list. */
export function describeCooler(
  coolers: readonly Cooler[],
  index: number,
  reading: LoopReading | null,
  system: UnitSystem,
): string {
  const cooler = coolers[index]
  if (!cooler) return ''
  const groups = groupLoop(coolers)
  const group = groups.findIndex((members) => members.includes(index))
  const others = (groups[group] ?? []).filter((member) => member !== index)
  const beside =
    others.length > 0 ? `, beside ${joined(others.map((other) => coolers[other]?.name ?? ''))}` : ''
  const inC = reading === null ? undefined : group === 0 ? reading.inletC : reading.afterGroupC[group - 1]
  const outC = reading?.afterGroupC[group]
  const degrees = (tempC: number) => formatQuantity(tempC, 'temperature', system)
  const oil = inC === undefined || outC === undefined ? '' : `; oil in ${degrees(inC)}, out ${degrees(outC)}`
  return `${cooler.name}: ${CONSTRUCTION_WORDS[cooler.construction]}${
    cooler.construction === 'in-tank' ? '' : `, ${placeWords(cooler)}`
  }${beside}; ${heatWords(cooler, reading?.coolerHeatW[index], system)}${oil}`
}

/** The whole loop in one sentence, for a title. */
export function summarizeLoop(coolers: readonly Cooler[]): string {
  const groups = groupLoop(coolers)
  if (groups.length === 0) return 'No cooler: the oil comes straight back'
  const steps = groups.map((members) =>
    joined(members.map((index) => coolers[index]?.name ?? '')).concat(
      members.length > 1 ? ' side by side' : '',
    ),
  )
  return `The oil meets ${steps.join(', then ')}`
}

/** What is said aloud after a change. */
export function sayEdit(before: readonly Cooler[], edit: LoopEdit): string {
  const gone = before.find((_, index) => !edit.sources.includes(index))
  if (gone) return `${gone.name} is out of the loop. ${summarizeLoop(edit.coolers)}.`
  const moved = edit.at === null ? undefined : edit.coolers[edit.at]
  if (!moved || edit.at === null) return ''
  const groups = groupLoop(edit.coolers)
  const group = groups.findIndex((members) => members.includes(edit.at ?? -1))
  const others = (groups[group] ?? []).filter((member) => member !== edit.at)
  const beside =
    others.length > 0 ? `, beside ${joined(others.map((other) => edit.coolers[other]?.name ?? ''))}` : ''
  const source = edit.sources[edit.at]
  const old = source === null || source === undefined ? undefined : before[source]
  if (!old) return `${moved.name} is added, ${ordinal(group)} in the loop.`
  const air = old.position === moved.position ? '' : `, ${placeWords(moved)}`
  return `${moved.name} is ${ordinal(group)} of ${groups.length} in the loop${beside}${air}.`
}

/** Flow of the loop, as it is told beside the line. */
export function flowWords(flowM3S: number, system: UnitSystem): string {
  return formatGiven(flowM3S, 'volumeFlow', system)
}

/** Width of the program's type, near enough to cut or break a line [em per character]. */
const EM_PER_CHARACTER = 0.53
const widthOf = (text: string, sizePx: number) => text.length * EM_PER_CHARACTER * sizePx
const SMALL_PX = 13

/** The longest wording that fits a width; where none does the shortest, cut with an ellipsis. */
export function fitLine(wording: Wording, widthPx: number, sizePx = SMALL_PX): string {
  const fitting = wording.find((text) => widthOf(text, sizePx) <= widthPx)
  if (fitting !== undefined) return fitting
  const text = wording.at(-1) ?? ''
  const characters = Math.max(1, Math.floor(widthPx / (EM_PER_CHARACTER * sizePx)) - 1)
  return `${text.slice(0, characters).trimEnd()}…`
}

function wrap(text: string, widthPx: number): string[] {
  const lines: string[] = []
  for (const word of text.split(' ')) {
    const longer = lines.length === 0 ? word : `${lines.at(-1)} ${word}`
    if (lines.length > 0 && widthOf(longer, SMALL_PX) <= widthPx) lines[lines.length - 1] = longer
    else lines.push(word)
  }
  return lines
}

/** The longest wording that fits into so many lines of a width; where none does the shortest, cut. */
export function breakLines(wording: Wording, widthPx: number, most: number): string[] {
  const fits = (lines: readonly string[]) =>
    lines.length <= most && lines.every((line) => widthOf(line, SMALL_PX) <= widthPx)
  const broken = wording.map((text) => wrap(text, widthPx))
  return broken.find(fits) ?? (broken.at(-1) ?? []).slice(0, most).map((line) => fitLine([line], widthPx))
}
