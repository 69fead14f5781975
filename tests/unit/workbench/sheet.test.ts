import { describe, expect, it } from 'vitest'
import { ARCHETYPES, createArchetypeSheet } from '../../../shared/build-sheet/archetypes'
import { deriveBuild, setSheetValue } from '../../../shared/build-sheet/sheet'
import { findBounds } from '../../../shared/workbench/bounds'
import { addEntry, countEntries, moveEntry, removeEntry } from '../../../shared/workbench/sheet-lists'

const truck = ARCHETYPES.find(({ id }) => id === 'diesel-pickup') ?? ARCHETYPES[0]
if (truck === undefined) throw new Error('no archetype to test with')
const COOLERS = 'cooling.coolers'
const sheet = setSheetValue(createArchetypeSheet(truck), {
  path: 'cooling.coolers.1.rating.heatW',
  value: 7321,
  typed: '25,000',
  unit: 'BTU/h',
  origin: 'measured',
})
const heats = (of: typeof sheet) => deriveBuild(of).cooling.coolers.map(({ rating }) => rating.heatW)

describe('lists of the sheet', () => {
  it('moves an entry with its origins and what was typed', () => {
    const moved = moveEntry(sheet, COOLERS, 1, 0)
    expect(heats(moved)).toEqual([7321, heats(sheet)[0]])
    expect(moved.values.find(({ path }) => path === 'cooling.coolers.0.rating.heatW')).toMatchObject({
      typed: '25,000',
      origin: 'measured',
    })
    expect(moveEntry(moved, COOLERS, 0, 1).values).toEqual(sheet.values)
  })

  it('leaves the sheet as it is when there is nowhere to move to', () => {
    expect(moveEntry(sheet, COOLERS, 1, 2)).toBe(sheet)
    expect(moveEntry(sheet, COOLERS, 5, 0)).toBe(sheet)
  })

  it('removes down to an empty list and adds again', () => {
    const one = removeEntry(sheet, COOLERS, 0)
    expect(heats(one)).toEqual([7321])
    const none = removeEntry(one, COOLERS, 0)
    expect(countEntries(none, COOLERS)).toBe(0)
    expect(deriveBuild(none).cooling.coolers).toEqual([])
    const cooler = truck.build.cooling.coolers[1] ?? {}
    expect(deriveBuild(addEntry(none, COOLERS, cooler, 'maker')).cooling.coolers).toEqual([cooler])
  })
})

describe('bounds', () => {
  it('reads them from the schema of the model, through lists, options and choices', () => {
    expect(findBounds('vehicle.tyreRadiusM')).toEqual({ min: 0.15, max: 1 })
    expect(findBounds('converter.lockup.minSpeedMps')).toEqual({ min: 0, max: 80 })
    expect(findBounds('transmission.gears.2.efficiency')).toEqual({ min: 0.5, max: 1 })
    expect(findBounds('cooling.coolers.0.rating.airVelocityMps')).toEqual({ min: 0.05, max: 100 })
    expect(findBounds('cooling.underbodyRiseK')).toEqual({ min: 0, max: 150 })
    expect(findBounds('vehicle.color')).toEqual({})
  })

  it('knows the bounds of every number of every archetype', () => {
    for (const archetype of ARCHETYPES)
      for (const { path, value } of createArchetypeSheet(archetype).values) {
        if (typeof value !== 'number') continue
        const { min, max } = findBounds(path)
        expect(min, path).toBeLessThanOrEqual(value)
        expect(max, path).toBeGreaterThanOrEqual(value)
      }
  })
})
