import { all, create, type MathJsInstance, type Unit } from 'mathjs'
import { describe, expect, it } from 'vitest'
import { evaluateQuantity } from '../../../shared/quantities/evaluate'
import { DIMENSIONS, RISES, UNITS } from '../../../shared/quantities/unit-words'
import { QUANTITIES, type Quantity } from '../../../shared/units/display'

const math = create(all!) as MathJsInstance

/** Each unit in mathjs' own words, an outside witness; null where it has none. */
const WITNESS: Record<string, string | null> = {
  lb: 'lbm',
  kg: 'kg',
  g: 'g',
  t: 'tonne',
  ton: 'ton',
  oz: 'oz',
  in: 'in',
  mm: 'mm',
  ft: 'ft',
  m: 'm',
  mi: 'mi',
  km: 'km',
  cm: 'cm',
  yd: 'yd',
  'in²': 'in^2',
  'cm²': 'cm^2',
  'ft²': 'ft^2',
  'm²': 'm^2',
  'mm²': 'mm^2',
  qt: 'quart',
  L: 'liter',
  gal: 'gallon',
  pt: 'pint',
  'fl oz': 'floz',
  mL: 'ml',
  'm³': 'm^3',
  'in³': 'in^3',
  'ft³': 'ft^3',
  s: 's',
  min: 'minute',
  h: 'hour',
  mph: 'mi/hour',
  'km/h': 'km/hour',
  'ft/min': 'ft/minute',
  'm/s': 'm/s',
  'ft/s': 'ft/s',
  'gal/min': 'gallon/minute',
  'L/min': 'liter/minute',
  'ft³/min': 'ft^3/minute',
  'm³/h': 'm^3/hour',
  'gal/h': 'gallon/hour',
  'qt/min': 'quart/minute',
  'L/s': 'liter/s',
  'L/h': 'liter/hour',
  'm³/s': 'm^3/s',
  psi: 'psi',
  kPa: 'kPa',
  bar: 'bar',
  MPa: 'MPa',
  Pa: 'Pa',
  hp: 'hp',
  kW: 'kW',
  'BTU/h': 'BTU/hour',
  'BTU/min': 'BTU/minute',
  W: 'W',
  // Metric horsepower: mathjs has none; 75 kgf·m/s is 735.49875 W (NIST SP 811, B.8: 7.354988 E+02; value from memory).
  PS: null,
  'ft·lb': 'ft lbf',
  'N·m': 'N m',
  'in·lb': 'in lbf',
  'kgf·m': 'kgf m',
  'BTU/h per °F': 'BTU/hour/degF',
  'W/K': 'W/K',
  rpm: 'cycle/minute',
  'rev/s': 'cycle/s',
  'rad/s': 'rad/s',
  '%': null,
}

describe('the units people type', () => {
  it('all have a witness, or a reason for none', () => {
    expect(UNITS.map(({ sign }) => sign).filter((sign) => !(sign in WITNESS))).toEqual([])
  })

  it.each(UNITS.filter(({ sign }) => typeof WITNESS[sign] === 'string'))(
    '$sign is as large as mathjs says',
    ({ sign, size, dimension }) => {
      const witness = (math.unit(1, WITNESS[sign] ?? '') as Unit).toNumber(dimension)
      // mathjs states some factors to ten digits, such as horsepower and psi.
      expect(Math.abs(size / witness - 1)).toBeLessThan(2e-9)
    },
  )

  it('prints back from SI what it made of one', () => {
    for (const unit of UNITS) {
      const si = unit.dimension === 'rad/s' ? unit.size * (30 / Math.PI) : unit.size
      expect(unit.fromSi(si)).toBeCloseTo(1, 12)
    }
    expect(RISES.map(({ size }) => size)).toEqual([5 / 9, 1, 1])
  })

  it('has no word that means two units', () => {
    const words = [...UNITS, ...RISES].flatMap((unit) => unit.words)
    expect(words.filter((word, index) => words.indexOf(word) !== index)).toEqual([])
  })

  it('is understood by every one of its words', () => {
    const quantities = Object.keys(DIMENSIONS) as Quantity[]
    for (const unit of [...UNITS, ...RISES]) {
      const quantity = quantities.find(
        (name) => DIMENSIONS[name] === unit.dimension && name !== 'temperature' && name !== 'minutes',
      )
      if (!quantity) throw new Error(unit.dimension)
      const expected = unit.dimension === 'rad/s' ? unit.size * (30 / Math.PI) : unit.size
      for (const word of unit.words) {
        const typed = `3 ${word.replaceAll('~', '-')}`
        const read = evaluateQuantity(typed, quantity, 'us')
        expect(read, typed).toMatchObject({ kind: 'quantity' })
        if (read.kind === 'quantity') expect(read.si / expected, typed).toBeCloseTo(3, 12)
      }
    }
  })

  it('knows every alias of the fields that only read one unit', () => {
    for (const [quantity, { us, metric }] of Object.entries(QUANTITIES))
      for (const { unit, aliases, fromDisplay } of [us, metric])
        for (const word of [unit, ...aliases].filter((text) => text !== '')) {
          const read = evaluateQuantity(`7 ${word}`, quantity as Quantity, 'us')
          expect(read, `7 ${word} as ${quantity}`).toMatchObject({ kind: 'quantity' })
          if (read.kind === 'quantity') expect(read.si).toBeCloseTo(fromDisplay(7), 9)
        }
  })
})
