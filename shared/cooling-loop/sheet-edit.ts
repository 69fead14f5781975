import { flattenBranch, setSheetBranch } from '../build-sheet/sheet'
import type { BuildSheet, Origin, SheetValue } from '../schemas/sheet'
import type { LoopEdit } from './edit'

/** The list of coolers on the build sheet. */
export const COOLERS_PATH = 'cooling.coolers'

/**
 * A sheet with the loop as it was rearranged: every value of a cooler that only moved keeps its origin, its spread and what
 * was typed; a changed one keeps its origin; those of a new cooler get the origin given.
 */
export function applyLoopEdit(sheet: BuildSheet, edit: LoopEdit, originOfNew: Origin): BuildSheet {
  const known = new Map(sheet.values.map((value) => [value.path, value]))
  const leaves = edit.coolers.flatMap((cooler, index) => {
    const source = edit.sources[index] ?? null
    return flattenBranch(cooler, 'typical', `${COOLERS_PATH}.${index}`).map((leaf): SheetValue => {
      if (source === null) return { ...leaf, origin: originOfNew }
      const before = known.get(leaf.path.replace(`${COOLERS_PATH}.${index}.`, `${COOLERS_PATH}.${source}.`))
      if (!before) return leaf
      return before.value === leaf.value
        ? { ...before, path: leaf.path }
        : { path: leaf.path, value: leaf.value, origin: before.origin }
    })
  })
  // The branch is put where it was, and then each of its leaves is given back what it carried.
  const placed = setSheetBranch(sheet, COOLERS_PATH, edit.coolers, originOfNew)
  const byPath = new Map(leaves.map((leaf) => [leaf.path, leaf]))
  return { ...placed, values: placed.values.map((value) => byPath.get(value.path) ?? value) }
}
