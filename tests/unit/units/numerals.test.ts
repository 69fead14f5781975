import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { findNumeral, plainText, readPlainNumber } from '../../../shared/units/numerals'

describe('numbers as people write them', () => {
  it.each([
    ['5400', 5400],
    ['5,400', 5400],
    ['1,234,567', 1_234_567],
    ['1,234.5', 1234.5],
    ['5 400', 5400],
    ['5\u2009400', 5400],
    ['5\u202f400,5', 5400.5],
    ['1.234,5', 1234.5],
    ['1.234.567', 1_234_567],
    ['2.450', 2.45],
    ['2,45', 2.45],
    ['0,450', 0.45],
    ['12345,678', 12_345.678],
    ['.5', 0.5],
    ['5.', 5],
    ['1.26e-4', 1.26e-4],
    ['1 1/2', 1.5],
    ['1-1/2', 1.5],
    ['1½', 1.5],
    ['6⅜', 6.375],
    ['1 1⁄2', 1.5],
    ['−40', -40],
    ['- 40', -40],
    ['+5', 5],
  ])('%s is %f', (text, value) => {
    expect(readPlainNumber(plainText(text))).toBe(value)
  })

  it.each(['', '1,2,3', '5400,', '1.2.3', '5 4', '1 2/', '3/8', 'five', '1/2/3', '--5', '5e', '1 3/2'])(
    '%s is not one number',
    (text) => {
      expect(readPlainNumber(plainText(text))).toBeUndefined()
    },
  )

  it('reads three digits after a comma as thousands and any other count as decimals', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 999 }), fc.stringMatching(/^\d{1,6}$/), (whole, digits) => {
        const expected = digits.length === 3 ? whole * 1000 + Number(digits) : Number(`${whole}.${digits}`)
        expect(readPlainNumber(`${whole},${digits}`)).toBe(expected)
      }),
    )
  })

  it('reads back what the program prints', () => {
    fc.assert(
      fc.property(fc.double({ min: -1e9, max: 1e9, noNaN: true }), (value) => {
        const printed = value.toLocaleString('en-US', { maximumFractionDigits: 9 })
        expect(readPlainNumber(plainText(printed))).toBeCloseTo(value, 8)
      }),
    )
  })

  it('ends a number where it ends, and never throws', () => {
    expect(findNumeral('5400 lb')).toEqual({ value: 5400, end: 4 })
    expect(findNumeral('11 x 6.5', 5)).toEqual({ value: 6.5, end: 8 })
    fc.assert(
      fc.property(fc.string({ unit: 'binary', maxLength: 60 }), (text) => {
        const plain = plainText(text)
        const found = findNumeral(plain)
        if (found) expect(found.end).toBeLessThanOrEqual(plain.length)
      }),
    )
  })
})

describe('plain text', () => {
  it.each([
    ['11 × 6½ in²', '11 * 6 1/2 in2'],
    ['6′ 2″', '6\' 2"'],
    ["6'' pipe", '6" pipe'],
    ['350 ft·lb', '350 ft*lb'],
    ['99 ºC', '99 °c'],
    ['99 ℃', '99 °c'],
    ['3 − 2 – 1', '3 - 2 - 1'],
    ['16\u00a0000 BTU/h', '16 000 btu/h'],
  ])('%s becomes %s', (text, plain) => {
    expect(plainText(text)).toBe(plain)
  })
})
