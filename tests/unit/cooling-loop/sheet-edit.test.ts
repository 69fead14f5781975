import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { ARCHETYPES } from '../../../shared/build-sheet/archetypes'
import { deriveBuild, findSheetValue, flattenBuild, setSheetValue } from '../../../shared/build-sheet/sheet'
import * as edit from '../../../shared/cooling-loop/edit'
import { createGenericTank } from '../../../shared/cooling-loop/generic-tank'
import { applyLoopEdit } from '../../../shared/cooling-loop/sheet-edit'
import type { BuildSheet } from '../../../shared/schemas/sheet'
import { anyLoop } from './arbitrary-loop'

const diesel = ARCHETYPES.find(({ id }) => id === 'diesel-pickup')?.build
if (!diesel) throw new Error('the diesel pickup is an archetype')
const build = diesel

function sheetWith(coolers = build.cooling.coolers): BuildSheet {
  return {
    archetype: 'diesel-pickup',
    values: flattenBuild({ ...build, cooling: { ...build.cooling, coolers } }, 'typical'),
  }
}

describe('a rearranged loop on the sheet', () => {
  const typed = {
    path: 'cooling.coolers.1.rating.heatW',
    value: 7034,
    typed: '24000 BTU/h',
    unit: 'BTU/h',
    origin: 'maker' as const,
    relativeSpread: 0.1,
  }
  const sheet = setSheetValue(sheetWith(), typed)
  const coolers = deriveBuild(sheet).cooling.coolers

  it('carries origin, spread and what was typed along with the cooler', () => {
    const moved = applyLoopEdit(sheet, edit.moveEarlier(coolers, 1), 'maker')
    expect(findSheetValue(moved, 'cooling.coolers.0.rating.heatW')).toEqual({
      ...typed,
      path: 'cooling.coolers.0.rating.heatW',
    })
    expect(findSheetValue(moved, 'cooling.coolers.1.rating.heatW')?.origin).toBe('typical')
  })

  it('keeps the origin of what is changed, and drops what was typed for it', () => {
    const measured = setSheetValue(sheet, {
      path: 'cooling.coolers.1.position',
      value: 'ahead-of-condenser',
      typed: 'in front',
      origin: 'measured',
    })
    const moved = applyLoopEdit(measured, edit.setPosition(coolers, 1, 'behind-condenser'), 'maker')
    expect(findSheetValue(moved, 'cooling.coolers.1.position')).toEqual({
      path: 'cooling.coolers.1.position',
      value: 'behind-condenser',
      origin: 'measured',
    })
  })

  it('gives a new cooler the origin it comes with', () => {
    const added = applyLoopEdit(sheet, edit.addCooler(coolers, createGenericTank(), 0), 'maker')
    expect(findSheetValue(added, 'cooling.coolers.0.rating.heatW')?.origin).toBe('maker')
    expect(findSheetValue(added, 'cooling.coolers.2.rating.heatW')?.typed).toBe('24000 BTU/h')
  })

  it('leaves every other value where it is', () => {
    const moved = applyLoopEdit(sheet, edit.removeCooler(coolers, 0), 'maker')
    const others = (of: BuildSheet) => of.values.filter(({ path }) => !path.startsWith('cooling.coolers.'))
    expect(others(moved)).toEqual(others(sheet))
  })

  it('stands for exactly the loop of the edit', () => {
    fc.assert(
      fc.property(anyLoop, fc.nat(5), fc.nat(6), (any, index, gap) => {
        const before = sheetWith(any)
        const change = edit.moveToGap(deriveBuild(before).cooling.coolers, index, gap)
        expect(deriveBuild(applyLoopEdit(before, change, 'typical')).cooling.coolers).toEqual(change.coolers)
      }),
    )
  })
})
