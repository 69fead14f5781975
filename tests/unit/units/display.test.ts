import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  fieldText,
  formatQuantity,
  formatRise,
  NO_FIGURE,
  printFigure,
  QUANTITIES,
  quantityParts,
  readQuantity,
  toShown,
} from '../../../shared/units/display'
import type { Quantity, UnitSystem } from '../../../shared/units/display'

const SYSTEMS: UnitSystem[] = ['us', 'metric']
const quantities = Object.keys(QUANTITIES) as Quantity[]
/** Spaces that do not break, as plain ones, for reading the tests. */
const plain = (text: string) => text.replaceAll('\u00a0', ' ')

describe('formatQuantity', () => {
  // Exact by definition: NIST SP 811 (2008), appendix B.8 (32 °F at 0 °C, 180 °F to 100 °C; 1 mi = 1609.344 m;
  // 1 lb = 0.45359237 kg; 1 gal = 231 in³; 1 hp = 550 ft·lbf/s; 1 Btu = 1055.05585262 J).
  it.each<[number, Quantity, string, string]>([
    [100, 'temperature', '212 °F', '100 °C'],
    [0, 'temperature', '32 °F', '0 °C'],
    [-40, 'temperature', '−40 °F', '−40 °C'],
    [100, 'temperatureRise', '180 °F', '100 °C'],
    [0.45359237 * 5400, 'mass', '5,400 lb', '2,450 kg'],
    [1609.344 / 60, 'speed', '60.0 mph', '96.6 km/h'],
    [1055.05585262 * 2, 'heatRate', '7,200 BTU/h', '2.11 kW'],
    [550 * 0.3048 * 0.45359237 * 9.80665 * 300, 'power', '300 hp', '224 kW'],
    [(2 * 231 * 0.0254 ** 3) / 60, 'volumeFlow', '2.00 gal/min', '7.57 L/min'],
    [6894.757 * 100, 'pressure', '100 psi', '689 kPa'],
    [0.0254 * 36, 'length', '36.0 in', '914 mm'],
    [0.3048 * 7200, 'height', '7,200 ft', '2,190 m'],
    [1609.344 * 11.4, 'distance', '11.4 mi', '18.3 km'],
    [0.06, 'grade', '6.00 %', '6.00 %'],
    [2150, 'rotation', '2,150 rpm', '2,150 rpm'],
    [600, 'minutes', '10.0 min', '10.0 min'],
  ])('prints %d of %s as %s and %s', (value, quantity, us, metric) => {
    expect(plain(formatQuantity(value, quantity, 'us'))).toBe(us)
    expect(plain(formatQuantity(value, quantity, 'metric'))).toBe(metric)
  })

  it('keeps figure and unit on one line', () => {
    expect(formatQuantity(100, 'temperature', 'us')).toBe('212\u00a0°F')
  })

  it('prints a dash where there is no number', () => {
    for (const nothing of [null, undefined, Number.NaN, Number.POSITIVE_INFINITY]) {
      expect(formatQuantity(nothing, 'mass', 'us')).toBe(NO_FIGURE)
      expect(quantityParts(nothing, 'mass', 'us')).toEqual({ figure: NO_FIGURE, unit: '', spokenUnit: '' })
    }
  })

  it('hands figure and unit apart', () => {
    expect(quantityParts(100, 'temperature', 'us')).toEqual({
      figure: '212',
      unit: '°F',
      spokenUnit: 'degrees Fahrenheit',
    })
  })
})

describe('printFigure', () => {
  it.each([
    [0, '0'],
    [4.7, '4.70'],
    [99.95, '100'],
    [999.6, '1,000'],
    [16_049, '16,000'],
    [0.012345, '0.0123'],
    [-1234, '−1,230'],
  ])('prints %d in three significant digits as %s', (value, text) => {
    expect(printFigure(value, 'three')).toBe(text)
  })

  it('never prints a minus before zero', () => {
    expect(printFigure(-0.4, 'whole')).toBe('0')
    expect(printFigure(-0, 'three')).toBe('0')
  })
})

describe('formatRise', () => {
  it('carries its sign, and none at zero', () => {
    expect(plain(formatRise(10, 'us'))).toBe('+18 °F')
    expect(plain(formatRise(-10, 'metric'))).toBe('−10 °C')
    expect(plain(formatRise(0.2, 'us'))).toBe('0 °F')
    expect(formatRise(null, 'us')).toBe(NO_FIGURE)
  })
})

describe('every quantity', () => {
  it.each(quantities.flatMap((quantity) => SYSTEMS.map((system) => ({ quantity, system }))))(
    'goes there and back: $quantity in $system',
    ({ quantity, system }) => {
      fc.assert(
        fc.property(fc.double({ min: -1e6, max: 1e6, noNaN: true }), (value) => {
          const back = QUANTITIES[quantity][system].fromDisplay(toShown(value, quantity, system))
          expect(Math.abs(back - value)).toBeLessThanOrEqual(1e-9 * Math.max(1, Math.abs(value)))
        }),
        { numRuns: 50 },
      )
    },
  )

  it.each(quantities.flatMap((quantity) => SYSTEMS.map((system) => ({ quantity, system }))))(
    'comes back from a field as it was typed: $quantity in $system',
    ({ quantity, system }) => {
      fc.assert(
        fc.property(
          fc.integer({ min: 1, max: 999_999 }),
          fc.integer({ min: 0, max: 3 }),
          (digits, decimals) => {
            const typed = (digits / 10 ** decimals).toLocaleString('en-US', { maximumFractionDigits: 3 })
            const reading = readQuantity(typed, quantity, system)
            if (reading.kind !== 'number') throw new Error(`not read: ${typed}`)
            expect(fieldText(reading.value, quantity, system)).toBe(typed)
          },
        ),
        { numRuns: 50 },
      )
    },
  )

  it('has names for its units that no other unit of its own answers to', () => {
    for (const quantity of quantities) {
      const { us, metric } = QUANTITIES[quantity]
      if (us.unit === metric.unit) continue
      const ofUs = new Set([us.unit.toLowerCase(), ...us.aliases])
      expect([metric.unit.toLowerCase(), ...metric.aliases].filter((name) => ofUs.has(name))).toEqual([])
    }
  })
})

describe('readQuantity', () => {
  const read = (text: string, quantity: Quantity = 'mass', system: UnitSystem = 'us') =>
    readQuantity(text, quantity, system)

  it.each([
    ['5400', 5400 * 0.45359237, 'lb'],
    ['5,400', 5400 * 0.45359237, 'lb'],
    ['5 400 lbs', 5400 * 0.45359237, 'lb'],
    [' 5400.5 LB ', 5400.5 * 0.45359237, 'lb'],
    ['2450 kg', 2450, 'kg'],
    ['.5', 0.5 * 0.45359237, 'lb'],
  ])('reads %s', (text, kilograms, unit) => {
    const reading = read(text)
    expect(reading).toMatchObject({ kind: 'number', unit })
    if (reading.kind === 'number') expect(reading.value).toBeCloseTo(kilograms, 9)
  })

  it('reads negative temperatures with either minus', () => {
    for (const text of ['-40', '\u221240', '-40 °F', '−40 C']) {
      const reading = read(text, 'temperature')
      if (reading.kind !== 'number') throw new Error(`not read: ${text}`)
      expect(reading.value).toBeCloseTo(-40, 9)
    }
  })

  it('tells nothing from nonsense', () => {
    expect(read('   ')).toEqual({ kind: 'empty' })
    expect(read('heavy')).toEqual({ kind: 'unreadable', reason: '“heavy” is not a number.' })
    expect(read('1.2.3').kind).toBe('unreadable')
    expect(read('-').kind).toBe('unreadable')
  })

  it('asks which, where a comma can be read two ways', () => {
    expect(read('1,5')).toEqual({
      kind: 'unreadable',
      reason: '“1,5” can be read two ways: write 1.5 or 1,500.',
    })
  })

  it('names the units that will do', () => {
    expect(read('5400 stone')).toEqual({
      kind: 'unreadable',
      reason: '“stone” is not a unit this field knows: lb or kg will do.',
    })
    expect(read('3 apples', 'number')).toMatchObject({ reason: expect.stringContaining('a number alone') })
  })
})
