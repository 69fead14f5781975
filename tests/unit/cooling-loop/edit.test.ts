import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { z } from 'zod'
import { createGenericCooler } from '../../../shared/build-sheet/generic-cooler'
import * as edit from '../../../shared/cooling-loop/edit'
import { createGenericTank } from '../../../shared/cooling-loop/generic-tank'
import { AIR_POSITIONS, CoolerSchema, type Cooler } from '../../../shared/schemas/heat-input'
import { anyLoop } from './arbitrary-loop'

const LoopSchema = z.array(CoolerSchema).max(6)

/** A loop written as it is meant: "tank, a b, c" is a tank, then a and b side by side, then c. */
function loop(words: string): Cooler[] {
  return words.split(', ').flatMap((group) =>
    group.split(' ').map((name, place): Cooler => {
      const cooler =
        name === 'tank'
          ? createGenericTank()
          : createGenericCooler({ construction: 'plate-fin', position: 'ahead-of-condenser', size: 'small' })
      return { ...cooler, name, ...(place > 0 ? { parallelWithPrevious: true } : {}) }
    }),
  )
}
const words = ({ coolers }: edit.LoopEdit) =>
  edit
    .groupLoop(coolers)
    .map((members) => members.map((index) => coolers[index]?.name).join(' '))
    .join(', ')

describe('rearranging a loop', () => {
  it.each<[string, (coolers: Cooler[]) => edit.LoopEdit, string]>([
    ['a, b, c', (coolers) => edit.moveEarlier(coolers, 1), 'b, a, c'],
    ['a, b, c', (coolers) => edit.moveEarlier(coolers, 0), 'a, b, c'],
    ['a b, c', (coolers) => edit.moveEarlier(coolers, 2), 'c, a b'],
    ['a, b c', (coolers) => edit.moveEarlier(coolers, 2), 'a, c, b'],
    ['a, b c', (coolers) => edit.moveEarlier(coolers, 1), 'a, b, c'],
    ['a, b, c', (coolers) => edit.moveLater(coolers, 1), 'a, c, b'],
    ['a, b, c', (coolers) => edit.moveLater(coolers, 2), 'a, b, c'],
    ['a, b c', (coolers) => edit.moveLater(coolers, 0), 'b c, a'],
    ['a b, c', (coolers) => edit.moveLater(coolers, 0), 'b, a, c'],
    ['a, b, c', (coolers) => edit.makeParallel(coolers, 1), 'a b, c'],
    ['a b, c', (coolers) => edit.makeParallel(coolers, 2), 'a b c'],
    ['a, b', (coolers) => edit.makeParallel(coolers, 0), 'a, b'],
    ['a b c', (coolers) => edit.makeSeries(coolers, 1), 'a c, b'],
    ['a b c', (coolers) => edit.makeSeries(coolers, 0), 'a, b c'],
    ['a, b', (coolers) => edit.makeSeries(coolers, 1), 'a, b'],
    ['a, b, c', (coolers) => edit.moveToGap(coolers, 0, 3), 'b, c, a'],
    ['a, b, c', (coolers) => edit.moveToGap(coolers, 2, 0), 'c, a, b'],
    ['a, b, c', (coolers) => edit.moveToGap(coolers, 1, 1), 'a, b, c'],
    ['a, b, c', (coolers) => edit.moveToGap(coolers, 1, -1), 'a, b, c'],
    ['a, b, c', (coolers) => edit.moveBeside(coolers, 0, 2), 'b, c a'],
    ['a, b', (coolers) => edit.moveBeside(coolers, 0, 7), 'a, b'],
    ['a b, c', (coolers) => edit.removeCooler(coolers, 0), 'b, c'],
    ['a b', (coolers) => edit.removeCooler(coolers, 9), 'a b'],
    ['a b', (coolers) => edit.addCooler(coolers, { ...createGenericTank(), name: 't' }), 'a b, t'],
    ['a b', (coolers) => edit.addCooler(coolers, { ...createGenericTank(), name: 't' }, 0), 't, a b'],
  ])('%s → %3$s', (before, change, after) => {
    expect(words(change(loop(before)))).toBe(after)
  })

  it('moves a cooler to other air, and drops what belongs to a remote one only', () => {
    const remote = createGenericCooler({
      construction: 'stacked-plate',
      position: 'remote',
      size: 'medium',
      fan: true,
    })
    const moved = edit.setPosition([{ ...remote, ramFraction: 0.2 }], 0, 'behind-condenser')
    expect(moved.coolers[0]).toMatchObject({ position: 'behind-condenser', name: remote.name })
    expect(moved.coolers[0]).not.toHaveProperty('fanFlowM3S')
    expect(moved.coolers[0]).not.toHaveProperty('ramFraction')
    const tank = [createGenericTank()]
    expect(edit.setPosition(tank, 0, 'remote').coolers).toEqual(tank)
  })

  it('takes no seventh', () => {
    const full = loop('a, b, c, d, e, f')
    expect(edit.addCooler(full, createGenericTank())).toEqual({
      coolers: full,
      sources: [0, 1, 2, 3, 4, 5],
      at: null,
    })
  })

  it('offers what can be done, and nothing else', () => {
    const coolers = loop('tank, b c')
    expect(edit.listChoices(coolers, 0)).toEqual({
      earlier: false,
      later: true,
      beside: false,
      inLine: false,
      position: false,
    })
    expect(edit.listChoices(coolers, 2)).toEqual({
      earlier: true,
      later: true,
      beside: false,
      inLine: true,
      position: true,
    })
    expect(edit.listChoices(coolers, 5).later).toBe(false)
  })

  it('remembers where each came from, also over two changes', () => {
    const coolers = loop('a, b, c')
    const first = edit.moveEarlier(coolers, 2)
    expect(first).toMatchObject({ sources: [0, 2, 1], at: 1 })
    const second = edit.chainEdits(first, edit.moveEarlier(first.coolers, 1))
    expect(second).toMatchObject({ sources: [2, 0, 1], at: 0 })
    expect(edit.addCooler(coolers, createGenericTank(), 1)).toMatchObject({ sources: [0, null, 1, 2], at: 1 })
    expect(edit.removeCooler(coolers, 1)).toMatchObject({ sources: [0, 2], at: null })
  })
})

describe('for any loop and any change', () => {
  const index = fc.integer({ min: -1, max: 7 })
  const operation = fc.oneof(
    fc.record({ name: fc.constant('earlier' as const), index }),
    fc.record({ name: fc.constant('later' as const), index }),
    fc.record({ name: fc.constant('parallel' as const), index }),
    fc.record({ name: fc.constant('series' as const), index }),
    fc.record({ name: fc.constant('remove' as const), index }),
    fc.record({ name: fc.constant('position' as const), index, position: fc.constantFrom(...AIR_POSITIONS) }),
    fc.record({ name: fc.constant('gap' as const), index, at: fc.integer({ min: -1, max: 8 }) }),
    fc.record({ name: fc.constant('beside' as const), index, at: fc.integer({ min: -1, max: 8 }) }),
    fc.record({
      name: fc.constant('add' as const),
      at: fc.option(fc.integer({ min: -2, max: 9 }), { nil: undefined }),
    }),
  )
  type Operation = typeof operation extends fc.Arbitrary<infer T> ? T : never
  function apply(coolers: readonly Cooler[], change: Operation): edit.LoopEdit {
    switch (change.name) {
      case 'earlier':
        return edit.moveEarlier(coolers, change.index)
      case 'later':
        return edit.moveLater(coolers, change.index)
      case 'parallel':
        return edit.makeParallel(coolers, change.index)
      case 'series':
        return edit.makeSeries(coolers, change.index)
      case 'remove':
        return edit.removeCooler(coolers, change.index)
      case 'position':
        return edit.setPosition(coolers, change.index, change.position)
      case 'gap':
        return edit.moveToGap(coolers, change.index, change.at)
      case 'beside':
        return edit.moveBeside(coolers, change.index, change.at)
      case 'add':
        return edit.addCooler(coolers, { ...createGenericTank(), name: 'new' }, change.at)
    }
  }
  const names = (coolers: readonly Cooler[]) => coolers.map(({ name }) => name).sort()

  it('gives a loop the schema takes, loses and doubles none, and says truly where each came from', () => {
    fc.assert(
      fc.property(anyLoop, fc.array(operation, { maxLength: 12 }), (start, changes) => {
        let coolers: readonly Cooler[] = start
        for (const change of changes) {
          const frozen = structuredClone(coolers)
          const result = apply(coolers, change)
          expect(coolers).toEqual(frozen)
          expect(LoopSchema.safeParse(result.coolers).success).toBe(true)
          expect(result.sources).toHaveLength(result.coolers.length)
          result.sources.forEach((source, at) => {
            if (source !== null) expect(result.coolers[at]?.name).toBe(coolers[source]?.name)
          })
          const added = result.sources.filter((source) => source === null).length
          const gone = coolers.length - (result.coolers.length - added)
          if (change.name !== 'add' && change.name !== 'remove')
            expect(names(result.coolers)).toEqual(names(coolers))
          expect(added).toBeLessThanOrEqual(change.name === 'add' ? 1 : 0)
          expect(gone).toBeLessThanOrEqual(change.name === 'remove' ? 1 : 0)
          if (result.at !== null) expect(result.at).toBeLessThan(result.coolers.length)
          coolers = result.coolers
        }
      }),
      { numRuns: 400 },
    )
  })

  it('moves a lone cooler back where it was by the opposite move', () => {
    fc.assert(
      fc.property(anyLoop, fc.nat(5), (coolers, index) => {
        fc.pre(index < coolers.length)
        const choices = edit.listChoices(coolers, index)
        fc.pre(choices.earlier && !choices.inLine)
        const moved = edit.moveEarlier(coolers, index)
        const back = edit.moveLater(moved.coolers, moved.at ?? 0)
        expect(words(back)).toBe(words(edit.moveToGap(coolers, -1, 0)))
      }),
    )
  })

  it('changes nothing where it offers nothing, and something where it does', () => {
    fc.assert(
      fc.property(anyLoop, fc.nat(5), (coolers, index) => {
        fc.pre(index < coolers.length)
        const choices = edit.listChoices(coolers, index)
        const now = words(edit.moveToGap(coolers, -1, 0))
        expect(words(edit.moveEarlier(coolers, index)) !== now).toBe(choices.earlier)
        expect(words(edit.moveLater(coolers, index)) !== now).toBe(choices.later)
        if (choices.inLine) expect(words(edit.makeSeries(coolers, index))).not.toBe(now)
        if (choices.beside) expect(words(edit.makeParallel(coolers, index))).not.toBe(now)
      }),
    )
  })
})
