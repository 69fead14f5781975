import { describe, expect, it } from 'vitest'
import { findLabel, labelOf, valueWords } from '../../../shared/advice'
import { LABELED_PATHS } from '../../../shared/advice/labels'
import { ARCHETYPES, createArchetypeSheet } from '../../../shared/build-sheet/archetypes'
import { BuildSchema, DutySchema, LoadSchema } from '../../../shared/schemas/heat-input'
import {
  COOLING_FIELDS,
  coolerFields,
  SHEET_SECTIONS,
  type SheetFieldSpec,
} from '../../../shared/workbench/sheet-sections'

interface Node {
  shape?: Record<string, Node>
  element?: Node
  options?: readonly Node[]
  unwrap?: () => Node
}

/** Every leaf a schema knows, lists with `*`. */
function leavesOf(node: Node, path: string): string[] {
  if (node.shape)
    return Object.entries(node.shape).flatMap(([key, child]) =>
      leavesOf(child, path === '' ? key : `${path}.${key}`),
    )
  if (node.element) return leavesOf(node.element, `${path}.*`)
  // A choice of words has options too, but they are texts.
  const shapes = node.options?.filter((option) => typeof option === 'object')
  if (shapes && shapes.length > 0) return shapes.flatMap((option) => leavesOf(option, path))
  return node.unwrap ? leavesOf(node.unwrap(), path) : [path]
}

const LEAVES = [
  ...leavesOf(BuildSchema as unknown as Node, ''),
  ...leavesOf(LoadSchema as unknown as Node, 'load'),
  ...leavesOf(DutySchema as unknown as Node, 'duty'),
]

describe('the table of labels', () => {
  it('walked the schemas down to their leaves', () => {
    expect(LEAVES.length).toBeGreaterThan(100)
    expect(LEAVES).toContain('cooling.coolers.*.rating.coolantFlowM3S')
    expect(LEAVES).toContain('duty.segments.*.stopsPerKm')
  })

  it('names every leaf the model can be given, and nothing else', () => {
    expect([...new Set(LEAVES)].sort()).toEqual([...LABELED_PATHS].sort())
  })

  it('names no two values alike', () => {
    const labels = LABELED_PATHS.map((path) => labelOf(path))
    expect(labels.filter((label, index) => labels.indexOf(label) !== index)).toEqual([])
  })

  it.each(ARCHETYPES)('leaves no value of $id without words', (archetype) => {
    const sheet = createArchetypeSheet(archetype)
    for (const { path, value } of sheet.values) {
      expect(findLabel(path, sheet)?.label).not.toMatch(/[{}]|\d\.\d/)
      if (typeof value !== 'number') expect(valueWords(path, value)).not.toBe('')
    }
  })

  it('measures a value as its field does', () => {
    const fields: SheetFieldSpec[] = [
      ...Object.values(SHEET_SECTIONS).flatMap((section) => [...section.fields]),
      ...COOLING_FIELDS.flatMap((group) => [...group.fields]),
      ...coolerFields('cooling.coolers.0', 'plate-fin'),
      ...coolerFields('cooling.coolers.0', 'in-tank'),
    ]
    const numbers = fields.filter((field) => field.kind === 'number')
    expect(numbers.length).toBeGreaterThan(40)
    for (const field of numbers)
      expect([field.path, findLabel(field.path)?.quantity]).toEqual([field.path, field.quantity])
  })

  it('calls a cooler by its name, a gear by its number', () => {
    const sheet = createArchetypeSheet(ARCHETYPES[1]!)
    expect(labelOf('cooling.coolers.1.rating.heatW', sheet)).toBe('Front cooler: heat it is rated for')
    expect(labelOf('cooling.coolers.1', sheet)).toBe('Front cooler')
    expect(labelOf('cooling.coolers.4')).toBe('Cooler 5')
    expect(labelOf('transmission.gears.2.ratio')).toBe('Ratio of gear 3')
  })

  it('says words for words', () => {
    expect(valueWords('engine.fuel', 'petrol')).toBe('gasoline')
    expect(valueWords('converter.lockup.fitted', false)).toBe('no')
    expect(valueWords('duty.segments.0.surface', 'sand')).toBe('sand')
  })
})
