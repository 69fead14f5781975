import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { ARCHETYPES, createArchetypeSheet } from '../../../shared/build-sheet/archetypes'
import {
  deriveBuild,
  findSheetValue,
  flattenBranch,
  flattenBuild,
  listTypicalValues,
  removeSheetBranch,
  setSheetBranch,
  setSheetValue,
  unflattenValues,
} from '../../../shared/build-sheet/sheet'
import { AppError, type ErrorIssue } from '../../../shared/errors'
import { BuildSheetSchema, type BuildSheet } from '../../../shared/schemas/sheet'

function issuesOf(act: () => unknown): ErrorIssue[] {
  try {
    act()
  } catch (error) {
    if (error instanceof AppError) return error.details.issues ?? []
    throw error
  }
  throw new Error('did not refuse')
}

const sheetOf = (index: number): BuildSheet => {
  const archetype = ARCHETYPES[index]
  if (archetype === undefined) throw new Error('no such archetype')
  return createArchetypeSheet(archetype)
}

describe('leaves of a build', () => {
  it.each(ARCHETYPES.map((archetype) => [archetype.id, archetype] as const))(
    'of %s turn back into the same build',
    (_id, archetype) => {
      const sheet = createArchetypeSheet(archetype)
      expect(BuildSheetSchema.safeParse(sheet).success).toBe(true)
      expect(deriveBuild(sheet)).toEqual(archetype.build)
    },
  )

  it('have the paths of the contract', () => {
    const paths = flattenBuild(ARCHETYPES[0]!.build, 'typical').map(({ path }) => path)
    expect(paths).toEqual(
      expect.arrayContaining([
        'vehicle.massKg',
        'transmission.gears.2.ratio',
        'cooling.coolers.0.rating.heatW',
        'converter.lockup.fitted',
      ]),
    )
    expect(new Set(paths).size).toBe(paths.length)
  })

  it('come back in any order, for any nesting of groups and lists', () => {
    const leaf = fc.oneof(fc.double({ noNaN: true, noDefaultInfinity: true }), fc.string(), fc.boolean())
    const name = fc
      .stringMatching(/^[a-z][A-Za-z0-9]{0,6}$/)
      .filter((key) => !['constructor', 'prototype'].includes(key))
    const { tree } = fc.letrec((tie) => ({
      tree: fc.oneof(
        { maxDepth: 3 },
        leaf,
        fc.dictionary(name, tie('tree'), { minKeys: 1, maxKeys: 3 }),
        fc.array(tie('tree'), { minLength: 1, maxLength: 12 }),
      ),
    }))
    fc.assert(
      fc.property(
        fc.dictionary(name, tree, { minKeys: 1, maxKeys: 4 }),
        fc.infiniteStream(fc.nat()),
        (branch, order) => {
          const leaves = flattenBranch(branch, 'typical')
          const shuffled = leaves
            .map((value) => ({ value, key: order.next().value ?? 0 }))
            .sort((a, b) => a.key - b.key)
            .map(({ value }) => value)
          expect(unflattenValues(shuffled)).toEqual(structuredClone(branch))
        },
      ),
      { numRuns: 200 },
    )
  })

  it('leave nothing of what is left out', () => {
    expect(flattenBranch({ a: undefined, b: { c: 1 } }, 'maker')).toEqual([
      { path: 'b.c', value: 1, origin: 'maker' },
    ])
  })
})

describe('a sheet that does not hang together', () => {
  it('names the value the model refuses by its path on the sheet', () => {
    const sheet = setSheetValue(sheetOf(0), { path: 'vehicle.massKg', value: -3, origin: 'measured' })
    const [issue] = issuesOf(() => deriveBuild(sheet))
    expect(issue?.path).toBe('vehicle.massKg')
    expect(issue?.message).toContain('2350 kg is 5180 lb')
  })

  it('names a value that is missing, and one that is not known', () => {
    expect(issuesOf(() => deriveBuild(removeSheetBranch(sheetOf(0), 'axle.ratio')))[0]?.path).toBe(
      'axle.ratio',
    )
    const odd = setSheetValue(sheetOf(0), { path: 'axle.colour', value: 'red', origin: 'measured' })
    expect(issuesOf(() => deriveBuild(odd))).toEqual([
      { path: 'axle.colour', message: 'is not known here; take it out or mend its name' },
    ])
  })

  it('names a gap in a list', () => {
    const sheet = removeSheetBranch(sheetOf(0), 'transmission.gears.1')
    expect(issuesOf(() => deriveBuild(sheet))[0]?.path).toBe('transmission.gears.1')
  })

  it.each([
    [['a.b', 'a.b'], 'a.b'],
    [['a', 'a.b'], 'a.b'],
    [['a.b', 'a'], 'a'],
  ])('refuses %j', (paths, path) => {
    const values = paths.map((one) => ({ path: one, value: 1 }))
    expect(issuesOf(() => unflattenValues(values))[0]?.path).toBe(path)
  })

  it('refuses names that reach past it', () => {
    for (const path of ['__proto__.polluted', 'constructor.name', 'a.prototype.b'])
      expect(issuesOf(() => unflattenValues([{ path, value: 1 }]))[0]?.path).toBe(path)
    expect(({} as Record<string, unknown>).polluted).toBeUndefined()
  })
})

describe('changing a sheet', () => {
  it('gives a new one and leaves the old', () => {
    const before = sheetOf(1)
    const copy = structuredClone(before)
    const after = setSheetValue(before, { path: 'axle.ratio', value: 4.3, typed: '4.30', origin: 'measured' })
    expect(before).toEqual(copy)
    expect(deriveBuild(after).axle.ratio).toBe(4.3)
    expect(findSheetValue(after, 'axle.ratio')).toEqual({
      path: 'axle.ratio',
      value: 4.3,
      typed: '4.30',
      origin: 'measured',
    })
    expect(after.values.map(({ path }) => path)).toEqual(before.values.map(({ path }) => path))
  })

  it('adds what was not there', () => {
    const after = setSheetBranch(sheetOf(0), 'cooling.bypass', { openC: 71, fullC: 82 }, 'maker')
    expect(deriveBuild(after).cooling.bypass).toEqual({ openC: 71, fullC: 82 })
    expect(deriveBuild(removeSheetBranch(after, 'cooling.bypass')).cooling.bypass).toBeUndefined()
  })

  it('takes every cooler away and puts one back', () => {
    const none = removeSheetBranch(sheetOf(0), 'cooling.coolers')
    expect(deriveBuild(none).cooling.coolers).toEqual([])
    const coolers = ARCHETYPES[1]!.build.cooling.coolers
    expect(deriveBuild(setSheetBranch(none, 'cooling.coolers', coolers, 'maker')).cooling.coolers).toEqual(
      coolers,
    )
  })

  it('does not take a group for another whose name begins the same', () => {
    const sheet = setSheetValue(sheetOf(0), { path: 'axleExtra', value: 1, origin: 'typical' })
    expect(findSheetValue(removeSheetBranch(sheet, 'axle'), 'axleExtra')).toBeDefined()
  })

  it('knows what is still typical', () => {
    const sheet = sheetOf(2)
    expect(listTypicalValues(sheet)).toHaveLength(sheet.values.length)
    const measured = setSheetValue(sheet, { path: 'vehicle.massKg', value: 2400, origin: 'measured' })
    expect(listTypicalValues(measured).map(({ path }) => path)).not.toContain('vehicle.massKg')
    expect(listTypicalValues(measured)).toHaveLength(sheet.values.length - 1)
  })
})
