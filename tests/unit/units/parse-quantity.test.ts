import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { evaluateQuantity } from '../../../shared/quantities/evaluate'
import { formatQuantity, QUANTITIES, type Quantity, type UnitSystem } from '../../../shared/units/display'
import {
  echoValue,
  parseQuantity,
  quantityFieldText,
  typedText,
  type QuantityField,
} from '../../../shared/units/parse-quantity'

const SYSTEMS: readonly UnitSystem[] = ['us', 'metric']
const ALL = Object.keys(QUANTITIES) as Quantity[]
const NBSP = '\u00a0'

const read = (
  typed: string,
  quantity: Quantity,
  system: UnitSystem = 'us',
  more: Partial<QuantityField> = {},
) => parseQuantity(typed, { quantity, system, ...more }, evaluateQuantity)
const si = (typed: string, quantity: Quantity, system?: UnitSystem) => {
  const reading = read(typed, quantity, system)
  if (!reading.ok) throw new Error(reading.message)
  return reading.si
}
const message = (typed: string, quantity: Quantity, more?: Partial<QuantityField>) => {
  const reading = read(typed, quantity, 'us', more)
  return reading.ok ? `read as ${reading.si}` : reading.message
}

/** Expected values from definitions: 1 lb = 0.45359237 kg, 1 in = 0.0254 m, 1 mi = 1609.344 m, 1 US gal = 231 in³ (NIST SP 811). */
const LB = 0.45359237
const IN = 0.0254
const GAL = 231 * IN ** 3
const BTU_H = (2326 * LB) / 3600

describe('what people type', () => {
  it.each<[string, Quantity, number]>([
    ['5400 lb', 'mass', 5400 * LB],
    ['5400 lbs.', 'mass', 5400 * LB],
    ['5,400#', 'mass', 5400 * LB],
    ['12k', 'mass', 12_000 * LB],
    ['2.45 t', 'mass', 2450],
    ['2,45 t', 'mass', 2450],
    ['3 tons', 'mass', 6000 * LB],
    ['5400 lb + 350 lb', 'mass', 5750 * LB],
    ['5400 + 350', 'mass', 5750 * LB],
    ['5400 lb + 350', 'mass', 5750 * LB],
    ['5400 + 350 kg', 'mass', 5750],
    ['2 × (5,400 lb − 400 lb)', 'mass', 10_000 * LB],
    ['2 t + 100 kg', 'mass', 2100],
    ['36 in', 'length', 36 * IN],
    ['3/8 in', 'length', 0.375 * IN],
    ['⅜"', 'length', 0.375 * IN],
    ['1 1/2 in', 'length', 1.5 * IN],
    ['1-1/2 in', 'length', 1.5 * IN],
    ['1½ in', 'length', 1.5 * IN],
    ['3/8 in + 1/8 in', 'length', 0.5 * IN],
    ['9,5 mm', 'length', 0.0095],
    [`6'2"`, 'height', 74 * IN],
    ["6' 2", 'height', 74 * IN],
    ['6 ft 2 1/2 in', 'height', 74.5 * IN],
    ['6ft2in', 'height', 74 * IN],
    ['2 gal/min', 'volumeFlow', (2 * GAL) / 60],
    ['2 gpm', 'volumeFlow', (2 * GAL) / 60],
    ['2 gal per min', 'volumeFlow', (2 * GAL) / 60],
    ['1 qt / 20 s', 'volumeFlow', GAL / 4 / 20],
    ['470 cfm', 'airFlow', (470 * (12 * IN) ** 3) / 60],
    ['45 mph', 'speed', (45 * 1609.344) / 3600],
    ['70 km/h', 'speed', 70 / 3.6],
    ['60 mi / 1 h', 'speed', (60 * 1609.344) / 3600],
    ['790 ft/min', 'airSpeed', (790 * 12 * IN) / 60],
    ['210 F', 'temperature', (210 - 32) / 1.8],
    ['99 °C', 'temperature', 99],
    ['93 C', 'temperature', 93],
    ['−40 °F', 'temperature', -40],
    ['373.15 K', 'temperature', 100],
    ['18 °F', 'temperatureRise', 10],
    ['10 K', 'temperatureRise', 10],
    ['212 F − 32 F', 'temperatureRise', 100],
    // Horsepower of 550 ft·lbf/s: NIST SP 811, 7.456999 E+02 W.
    ['250 hp', 'power', 250 * 550 * 12 * IN * LB * 9.80665],
    ['186 kW', 'power', 186_000],
    ['16000 BTU/h', 'heatRate', 16_000 * BTU_H],
    ['16,000 btu/hr', 'heatRate', 16_000 * BTU_H],
    ['16k btu', 'heatRate', 16_000 * BTU_H],
    ['80 psi', 'pressure', (80 * LB * 9.80665) / IN ** 2],
    ['5.5 bar', 'pressure', 550_000],
    ['13.5 qt', 'volume', (13.5 * GAL) / 4],
    ['12.8 L', 'volume', 0.0128],
    ['3 gal 1 qt', 'volume', 3.25 * GAL],
    ['11 × 6½ in', 'area', 71.5 * IN ** 2],
    ['11 in x 6.5 in', 'area', 71.5 * IN ** 2],
    ['11 x 6.5', 'area', 71.5 * IN ** 2],
    ['78 sq in', 'area', 78 * IN ** 2],
    ['14 ft²', 'dragArea', 14 * (12 * IN) ** 2],
    ['336 ft-lb', 'torque', 336 * 12 * IN * LB * 9.80665],
    ['336 lb·ft', 'torque', 336 * 12 * IN * LB * 9.80665],
    ['455 Nm', 'torque', 455],
    ['84 W/K', 'conductance', 84],
    ['6 %', 'grade', 0.06],
    ['6', 'grade', 0.06],
    ['0.06', 'grade', 0.06],
    ['6 ft / 100 ft', 'grade', 0.06],
    ['25 %', 'share', 0.25],
    ['0.25', 'share', 0.25],
    ['4.10', 'number', 4.1],
    ['4.10:1', 'number', 4.1],
    ['41/10', 'number', 4.1],
    ['98 %', 'number', 0.98],
    ['2800 rpm', 'rotation', 2800],
    ['1 h 20 min', 'hours', 4800],
    ['5 m', 'minutes', 300],
    ['20', 'seconds', 20],
  ])('%s as %s', (typed, quantity, expected) => {
    expect(Math.abs(si(typed, quantity) - expected)).toBeLessThanOrEqual(
      1e-12 * Math.max(1, Math.abs(expected)),
    )
  })

  it('takes a bare number in the person’s own unit', () => {
    expect(si('2450', 'mass', 'metric')).toBe(2450)
    expect(si('5400', 'mass', 'us')).toBeCloseTo(5400 * LB, 9)
    expect(si('100', 'temperature', 'metric')).toBe(100)
    expect(si('212', 'temperature', 'us')).toBeCloseTo(100, 9)
  })

  it('says how it was understood, and in which unit', () => {
    expect(read('5400 lb + 350 lb', 'mass')).toMatchObject({
      ok: true,
      typed: '5400 lb + 350 lb',
      unit: 'lb',
      echo: `5,750${NBSP}lb = 2,608${NBSP}kg`,
    })
    expect(read('2,45 t', 'mass')).toMatchObject({ unit: 't', echo: `2.45${NBSP}t = 5,401${NBSP}lb` })
    expect(read('2,45 t', 'mass', 'metric')).toMatchObject({ echo: `2.45${NBSP}t = 2,450${NBSP}kg` })
    expect(read('1 qt / 20 s', 'volumeFlow')).toMatchObject({ unit: 'gal/min' })
    expect(read('0.06', 'grade')).toMatchObject({ unit: '%', echo: `6${NBSP}%` })
    expect(read('99 °C', 'temperature')).toMatchObject({ echo: `99${NBSP}°C = 210${NBSP}°F` })
    expect(echoValue(0.0095, 'length', 'metric')).toBe(`9.5${NBSP}mm = 0.374${NBSP}in`)
  })
})

describe('what cannot be read', () => {
  it.each<[string, Quantity, string]>([
    ['', 'mass', 'nothing is typed yet; 5400 lb would do.'],
    ['36 in', 'mass', 'that is a length; this field needs a weight, such as 5400 lb.'],
    ['5400 lb', 'length', 'that is a weight; this field needs a length, such as 3/8 in.'],
    ['6 lb', 'temperature', 'that is a weight; this field needs a temperature, such as 210 °F.'],
    ['200 F', 'mass', 'that is a temperature; this field needs a weight, such as 5400 lb.'],
    ['4 lb', 'number', 'that is a weight; this field needs a number without a unit, such as 4.10.'],
    ['5400 lb + 3 in', 'mass', 'that adds up a weight and a length, which do not go together.'],
    ['5400 stone', 'mass', '“stone” is not a unit this field knows; lb or kg will do.'],
    ['1,2,3', 'mass', '“1,2,3” is not a number; write 1.5 or 1,500.'],
    ['0.5', 'grade', '“0.5” can be read two ways: write 0.5 % or 50 %.'],
    [
      '200 F + 10 F',
      'temperature',
      'temperatures are not reckoned with: type the one reading, such as 210 °F.',
    ],
    ['200 + 10', 'temperature', 'temperatures are not reckoned with: type the one reading, such as 210 °F.'],
    ['-500 F', 'temperature', `nothing is colder than −460${NBSP}°F; 210 °F would do.`],
    ['5400 lb +', 'mass', 'that is not finished; 5400 lb would do.'],
    ['(5400 lb', 'mass', 'that is not finished; 5400 lb would do.'],
    ['lb', 'mass', 'that is not finished; 5400 lb would do.'],
    ['5400 lb / 0', 'mass', 'that does not come out as a number; 5400 lb would do.'],
    ['1'.repeat(61), 'mass', 'that is longer than 60 characters; 5400 lb would do.'],
    ['54\u000000', 'mass', 'that holds characters nobody types; 5400 lb would do.'],
  ])('%s as %s', (typed, quantity, expected) => {
    expect(message(typed, quantity)).toBe(expected)
  })

  it('names the bound and a value that would do', () => {
    expect(message('90 lb', 'mass', { min: 200, max: 100_000, example: 2350 })).toBe(
      `must be at least 441${NBSP}lb; 5,180${NBSP}lb would do.`,
    )
    expect(message('2,450 t', 'mass', { min: 200, max: 100_000 })).toBe(
      `must be at most 220,000${NBSP}lb; 5400 lb would do.`,
    )
  })

  it.each([
    'sqrt(4) lb',
    'import(1)',
    'cos(0)',
    'e',
    'pi',
    'i',
    '5!',
    '2^8',
    '[1,2]',
    '1:3',
    'a=5',
    '5;6',
    '"x"',
    '5 % 3 lb',
    'true',
    'constructor',
    '__proto__ lb',
    'unit0',
    'x.constructor',
    '5 to lb',
    'f(x)=x',
  ])('%s runs nothing', (typed) => {
    expect(read(typed, 'mass')).toMatchObject({ ok: false })
  })
})

describe('for any text', () => {
  const anyQuantity = fc.constantFrom(...ALL)
  const anySystem = fc.constantFrom(...SYSTEMS)
  const piece = fc.constantFrom(
    ...['5', '400', '1/2', '3/8', '.5', '1e9', ' ', ' ', '+', '-', '*', '/', '(', ')', '%', 'x', 'per', ','],
    ...[
      'lb',
      'kg',
      't',
      'in',
      'ft',
      "'",
      '"',
      'min',
      'h',
      's',
      'gal',
      'qt',
      'hp',
      'BTU/h',
      'psi',
      'F',
      '°C',
      'K',
    ],
    ...['rpm', 'ft·lb', '½', '−', '⁄', '×', '²', 'k', '.'],
  )

  it('refuses a sum of two things that are no quantities of a truck and differ', () => {
    expect(read("qt'-K5qt", 'number').ok).toBe(false)
  })

  it('gives a finite number or a sentence, and never throws', () => {
    const text = fc.oneof(
      fc.array(piece, { maxLength: 14 }).map((pieces) => pieces.join('')),
      fc.string({ unit: 'binary', maxLength: 70 }),
      fc.string({ maxLength: 70 }),
    )
    fc.assert(
      fc.property(text, anyQuantity, anySystem, (typed, quantity, system) => {
        const reading = read(typed, quantity, system)
        if (reading.ok) {
          expect(Number.isFinite(reading.si)).toBe(true)
          expect(reading.unit.length).toBeLessThanOrEqual(20)
          expect(reading.typed.length).toBeLessThanOrEqual(60)
          expect(reading.echo).not.toMatch(/NaN|Infinity|undefined|–/)
        } else expect(reading.message).toMatch(/^\S.*[.\d]$/s)
      }),
      { numRuns: 3000 },
    )
  })

  it('reads the same value when bare numbers are read before the evaluator is there and after', () => {
    const typed = fc.double({ min: -1e6, max: 1e6, noNaN: true }).map((value) => value.toPrecision(6))
    fc.assert(
      fc.property(typed, anyQuantity, anySystem, (text, quantity, system) => {
        expect(parseQuantity(text, { quantity, system })).toEqual(read(text, quantity, system))
      }),
    )
  })

  it('waits, and says so, for what only the evaluator can read', () => {
    expect(parseQuantity('5400 lb', { quantity: 'mass', system: 'us' })).toMatchObject({
      ok: false,
      waiting: true,
    })
  })
})

describe('what the program prints', () => {
  const quantity = fc.constantFrom(...ALL)
  const system = fc.constantFrom(...SYSTEMS)
  const shown = fc.oneof(
    fc.integer({ min: -459, max: 100_000 }),
    fc.double({ min: -459, max: 1e6, noNaN: true }),
    fc.double({ min: 1e-4, max: 2, noNaN: true }),
  )

  it('is read back as itself, with its unit, in both systems', () => {
    fc.assert(
      fc.property(quantity, system, system, shown, (asked, printedIn, readIn, number) => {
        const value = QUANTITIES[asked][printedIn].fromDisplay(number)
        fc.pre(asked !== 'temperature' || value >= -273.15)
        const printed = formatQuantity(value, asked, printedIn)
        const reading = read(printed, asked, asked === 'number' ? printedIn : readIn)
        expect(reading.ok ? formatQuantity(reading.si, asked, printedIn) : reading.message).toBe(printed)
      }),
      { numRuns: 2000 },
    )
  })

  it('in a field is read back as itself, unit or none', () => {
    fc.assert(
      fc.property(quantity, system, shown, (asked, units, number) => {
        const value = QUANTITIES[asked][units].fromDisplay(number)
        fc.pre(asked !== 'temperature' || value >= -273.15)
        const text = quantityFieldText(value, asked, units)
        const reading = read(text, asked, units)
        expect(reading.ok ? quantityFieldText(reading.si, asked, units) : reading.message).toBe(text)
      }),
      { numRuns: 2000 },
    )
  })

  it('carries its sign where a bare number would be read otherwise', () => {
    expect(quantityFieldText(0.0006, 'grade', 'us')).toBe(`0.06${NBSP}%`)
    expect(quantityFieldText(0.06, 'grade', 'us')).toBe('6')
    expect(quantityFieldText(null, 'grade', 'us')).toBe('')
  })
})

describe('what was typed, in other units', () => {
  it('stands as typed, with its unit when it had none of its own', () => {
    expect(typedText('5400', 'lb', 'mass', 'us')).toBe('5400')
    expect(typedText('5400', 'lb', 'mass', 'metric')).toBe('5400 lb')
    expect(typedText('5400 + 350', 'lb', 'mass', 'metric')).toBe('5400 + 350 lb')
    expect(typedText('2.45 t', 't', 'mass', 'us')).toBe('2.45 t')
    expect(typedText('3/8"', 'in', 'length', 'metric')).toBe('3/8"')
  })

  it('still means the same', () => {
    for (const typed of ['5400', '5400 + 350', '2 × 2700', '5 400,5', '5400 − 1/2'])
      expect(si(typedText(typed, 'lb', 'mass', 'metric'), 'mass', 'metric')).toBeCloseTo(
        si(typed, 'mass', 'us'),
        9,
      )
  })
})
