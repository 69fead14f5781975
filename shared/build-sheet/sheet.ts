import type { z } from 'zod'
import { AppError, type ErrorIssue } from '../errors'
import { BuildSchema, type Build } from '../schemas/heat-input'
import type { BuildSheet, Origin, SheetValue } from '../schemas/sheet'

/**
 * The build sheet is the model's `build` as a flat list of leaves, so that each can say where it comes from. Here the two
 * are turned into each other; a sheet is never changed in place.
 */

type Leaf = SheetValue['value']

/** Lists that may be empty: without an entry they leave no leaf behind, yet the model wants the list. */
const LISTS_THAT_MAY_BE_EMPTY = ['cooling.coolers']

const INHERITED_NAMES = new Set(['__proto__', 'constructor', 'prototype'])

function isLeaf(node: unknown): node is Leaf {
  return typeof node === 'number' || typeof node === 'string' || typeof node === 'boolean'
}

/** Walks a branch of the build down to its leaves, arrays by index; absent optional fields leave nothing. */
export function flattenBranch(branch: unknown, origin: Origin, prefix = ''): SheetValue[] {
  if (branch === undefined) return []
  if (isLeaf(branch)) return [{ path: prefix, value: branch, origin }]
  if (branch === null || typeof branch !== 'object')
    throw new AppError('bad_input', {
      issues: [{ path: prefix, message: 'must be a number, a text, true or false' }],
    })
  return Object.entries(branch).flatMap(([key, child]) =>
    flattenBranch(child, origin, prefix === '' ? key : `${prefix}.${key}`),
  )
}

/** The leaves of a whole build, all of one origin. */
export function flattenBuild(build: Build, origin: Origin): SheetValue[] {
  return flattenBranch(build, origin)
}

interface Branch {
  [key: string]: Branch | Leaf
}

function plant(root: Branch, path: string, value: Leaf): void {
  const parts = path.split('.')
  const last = parts.pop() ?? ''
  let node = root
  for (const part of parts) {
    const next = node[part] ?? {}
    if (isLeaf(next)) throw misplaced(path, `${path} lies under a value, not under a group of values`)
    node[part] = next
    node = next
  }
  if (last === '' || node[last] !== undefined)
    throw misplaced(path, `${path} is on the sheet twice, or is a group of values`)
  node[last] = value
}

function misplaced(path: string, message: string): AppError {
  return new AppError('bad_input', { issues: [{ path, message }] })
}

/** Turns groups whose keys are 0, 1, 2 … into lists. */
function ripen(node: Branch | Leaf, path: string): unknown {
  if (isLeaf(node)) return node
  const keys = Object.keys(node)
  if (keys.length > 0 && keys.every((key) => /^\d+$/.test(key))) {
    return keys
      .map(Number)
      .sort((a, b) => a - b)
      .map((index, place) => {
        if (index !== place)
          throw misplaced(
            `${path}.${place}`,
            `${path}.${place} is missing: lists count 0, 1, 2 without a gap`,
          )
        return ripen(node[index] as Branch | Leaf, `${path}.${index}`)
      })
  }
  return Object.fromEntries(
    keys.map((key) => [key, ripen(node[key] as Branch | Leaf, path === '' ? key : `${path}.${key}`)]),
  )
}

/**
 * The inverse of {@link flattenBranch}: leaves to nested objects and lists, unchecked.
 * @throws bad_input naming the path that is given twice, lies under another value, or leaves a gap in a list
 */
export function unflattenValues(values: readonly Pick<SheetValue, 'path' | 'value'>[]): unknown {
  const root: Branch = Object.create(null) as Branch
  for (const { path, value } of values) {
    if (path.split('.').some((part) => INHERITED_NAMES.has(part)))
      throw misplaced(path, `${path} is not a place on the sheet; vehicle.massKg would be one`)
    plant(root, path, value)
  }
  return ripen(root, '')
}

/** zod's issues as the program's: dotted paths, one sentence each. */
export function listIssues(error: z.ZodError, prefix = ''): ErrorIssue[] {
  return error.issues.flatMap((issue) => {
    const path = [prefix, ...issue.path.map(String)].filter((part) => part !== '').join('.')
    if (issue.code !== 'unrecognized_keys') return [{ path, message: issue.message }]
    return issue.keys.map((key) => ({
      path: path === '' ? key : `${path}.${key}`,
      message: 'is not known here; take it out or mend its name',
    }))
  })
}

/**
 * The model's `build` that a sheet stands for, checked against the schema.
 * @param sheet - all leaves of a build
 * @returns the build, exactly as far as the sheet fills it (the model supplies its own defaults for what is left out)
 * @throws bad_input whose issues carry the sheet's own paths, such as `vehicle.massKg`
 */
export function deriveBuild(sheet: BuildSheet): Build {
  const parsed = BuildSchema.safeParse(withEmptyLists(unflattenValues(sheet.values)))
  if (!parsed.success) throw new AppError('bad_input', { issues: listIssues(parsed.error) })
  return parsed.data
}

function withEmptyLists(branch: unknown): unknown {
  for (const path of LISTS_THAT_MAY_BE_EMPTY) {
    const parts = path.split('.')
    const last = parts.pop() ?? ''
    let node = branch as Record<string, unknown> | undefined
    for (const part of parts) node = node?.[part] as Record<string, unknown> | undefined
    if (node !== undefined && typeof node === 'object' && node[last] === undefined) node[last] = []
  }
  return branch
}

/** The value at a path, or undefined. */
export function findSheetValue(sheet: BuildSheet, path: string): SheetValue | undefined {
  return sheet.values.find((value) => value.path === path)
}

/** A new sheet with one value replaced, or added at the end when its path was not there. */
export function setSheetValue(sheet: BuildSheet, value: SheetValue): BuildSheet {
  const index = sheet.values.findIndex(({ path }) => path === value.path)
  const values = index < 0 ? [...sheet.values, value] : sheet.values.with(index, value)
  return { ...sheet, values }
}

/** A new sheet without a value or a whole group (`cooling.bypass`, `cooling.coolers.1` leaves a gap: use the group). */
export function removeSheetBranch(sheet: BuildSheet, path: string): BuildSheet {
  return {
    ...sheet,
    values: sheet.values.filter((value) => value.path !== path && !value.path.startsWith(`${path}.`)),
  }
}

/** A new sheet with a whole group replaced (`cooling.coolers`, `transmission.fluid`), every leaf of one origin. */
export function setSheetBranch(sheet: BuildSheet, path: string, branch: unknown, origin: Origin): BuildSheet {
  const at = sheet.values.findIndex((value) => value.path === path || value.path.startsWith(`${path}.`))
  const rest = removeSheetBranch(sheet, path).values
  const leaves = flattenBranch(branch, origin, path)
  const place = at < 0 ? rest.length : at
  return { ...sheet, values: [...rest.slice(0, place), ...leaves, ...rest.slice(place)] }
}

/** What nobody measured or looked up for this truck: the values that still come from the archetype. */
export function listTypicalValues(sheet: BuildSheet): SheetValue[] {
  return sheet.values.filter(({ origin }) => origin === 'typical')
}
