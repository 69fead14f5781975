import { flattenBranch } from '../build-sheet/sheet'
import type { BuildSheet, Origin, SheetValue } from '../schemas/sheet'

/** Lists of the sheet (gears, coolers) whose entries move while each of their values keeps its origin and what was typed. */

/** How many entries a list of the sheet has. */
export function countEntries(sheet: BuildSheet, list: string): number {
  return entriesOf(sheet, list).length
}

/** The leaves of each entry, in order. */
function entriesOf(sheet: BuildSheet, list: string): SheetValue[][] {
  const entries = new Map<number, SheetValue[]>()
  for (const value of sheet.values) {
    if (!value.path.startsWith(`${list}.`)) continue
    const index = Number(value.path.slice(list.length + 1).split('.')[0])
    entries.set(index, [...(entries.get(index) ?? []), value])
  }
  return [...entries.entries()].sort(([a], [b]) => a - b).map(([, values]) => values)
}

function putEntries(sheet: BuildSheet, list: string, entries: readonly SheetValue[][]): BuildSheet {
  const at = sheet.values.findIndex(({ path }) => path.startsWith(`${list}.`))
  const rest = sheet.values.filter(({ path }) => !path.startsWith(`${list}.`))
  const place = at < 0 ? rest.length : at
  const leaves = entries.flatMap((values, index) =>
    values.map((value) => ({ ...value, path: renumber(value.path, list, index) })),
  )
  return { ...sheet, values: [...rest.slice(0, place), ...leaves, ...rest.slice(place)] }
}

function renumber(path: string, list: string, index: number): string {
  const [, ...rest] = path.slice(list.length + 1).split('.')
  return [list, index, ...rest].join('.')
}

/** A new sheet with one entry moved to another place of its list. */
export function moveEntry(sheet: BuildSheet, list: string, from: number, to: number): BuildSheet {
  const entries = entriesOf(sheet, list)
  const moved = entries[from]
  if (moved === undefined || to < 0 || to >= entries.length) return sheet
  return putEntries(sheet, list, entries.toSpliced(from, 1).toSpliced(to, 0, moved))
}

/** A new sheet without one entry; the ones behind it move up. */
export function removeEntry(sheet: BuildSheet, list: string, index: number): BuildSheet {
  return putEntries(sheet, list, entriesOf(sheet, list).toSpliced(index, 1))
}

/** A new sheet with an entry more, at the end of its list. */
export function addEntry(sheet: BuildSheet, list: string, entry: object, origin: Origin): BuildSheet {
  const leaves = flattenBranch(entry, origin, `${list}.0`)
  return putEntries(sheet, list, [...entriesOf(sheet, list), leaves])
}
