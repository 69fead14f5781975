import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { AppError } from '../../../shared/errors'
import { parseTireCode, readTireCode } from '../../../shared/build-sheet/tire-code'

const INCH = 0.0254

describe('tire size codes', () => {
  // Diameters worked by hand from the code itself: rim × 25.4 mm + 2 × width × aspect.
  it.each([
    ['LT265/70R17', 'metric', 17 * 25.4 + 2 * 265 * 0.7],
    ['265/70R17', 'metric', 17 * 25.4 + 2 * 265 * 0.7],
    ['P245/75R16', 'metric', 16 * 25.4 + 2 * 245 * 0.75],
    ['lt 265/70 r 17', 'metric', 802.8],
    ['265/70-17', 'metric', 802.8],
    ['265/70/17', 'metric', 802.8],
    ['265 70 17', 'metric', 802.8],
    ['LT265/70R17 121/118S', 'metric', 802.8],
    ['LT265/70R17/E', 'metric', 802.8],
    ['LT265/70R17 121/118Q LRE', 'metric', 802.8],
    ['LT265/70R17 10PR', 'metric', 802.8],
    ['LT265/70R17 LOAD RANGE E', 'metric', 802.8],
    ['265/70R17C 121/118 S', 'metric', 802.8],
    ['235/80ZR17', 'metric', 17 * 25.4 + 2 * 235 * 0.8],
    ['225/70R19.5', 'metric', 19.5 * 25.4 + 2 * 225 * 0.7],
    ['33x12.50R15', 'flotation', 33 * 25.4],
    ['33X12.5-15LT', 'flotation', 33 * 25.4],
    ['33×12.50R15LT', 'flotation', 33 * 25.4],
    ['31x10,50 R15', 'flotation', 31 * 25.4],
    ['37x12.50R17LT 124Q', 'flotation', 37 * 25.4],
    ['33 in', 'height', 33 * 25.4],
    ['33"', 'height', 33 * 25.4],
    ['33”', 'height', 33 * 25.4],
    ["33''", 'height', 33 * 25.4],
    ['33.5 inches', 'height', 33.5 * 25.4],
    ['35', 'height', 35 * 25.4],
    ['838 mm', 'height', 838],
  ] as const)('reads %s', (text, notation, diameterMm) => {
    const tire = parseTireCode(text)
    expect(tire.notation).toBe(notation)
    expect(tire.diameterM).toBeCloseTo(diameterMm / 1000, 9)
  })

  it('keeps what else the code says', () => {
    const tire = parseTireCode('LT285/75R16')
    expect(tire.sectionWidthM).toBeCloseTo(0.285, 9)
    expect(tire.aspectRatio).toBeCloseTo(0.75, 9)
    expect(tire.rimDiameterM).toBeCloseTo(16 * INCH, 9)
    expect(parseTireCode('33x12.50R15').sectionWidthM).toBeCloseTo(12.5 * INCH, 9)
  })

  it('rolls a radial at 3.05 and a diagonal tire at 2.99 diameters per turn', () => {
    // ETRTO relation, from memory.
    const radial = parseTireCode('33x12.50R15')
    expect((2 * Math.PI * radial.rollingRadiusM) / radial.diameterM).toBeCloseTo(3.05, 9)
    const diagonal = parseTireCode('33X12.5-15LT')
    expect(diagonal.construction).toBe('diagonal')
    expect((2 * Math.PI * diagonal.rollingRadiusM) / diagonal.diameterM).toBeCloseTo(2.99, 9)
  })

  it('comes near the revolutions per mile that makers print', () => {
    // Common practice, no source: LT265/70R17 is sold at about 655 turns a mile, 33x12.50R15 at about 630 (both ± 2 %).
    const turns = (text: string) => 1609.344 / (2 * Math.PI * parseTireCode(text).rollingRadiusM)
    expect(Math.abs(turns('LT265/70R17') / 655 - 1)).toBeLessThan(0.02)
    expect(Math.abs(turns('33x12.50R15') / 630 - 1)).toBeLessThan(0.02)
  })

  it.each([
    ['', 'is empty'],
    ['big ones', 'is not a tire size'],
    ['7.50-16', 'type its height'],
    ['215R15', 'type its height'],
    ['265/70', 'is not a tire size'],
    ['265/7R17', 'is not a tire size'],
    ['265/20R17', 'aspect 20 %'],
    ['265/70R35', 'rim 35 in'],
    ['995/70R17', 'width 995 mm'],
    ['15x10.50R15', 'height 15 in'],
    ['16 in', '16.0 in tall'],
    ['333 in', '333.0 in tall'],
    ['22x9.50R22', 'rim (22 in)'],
    ['265/70R17'.padEnd(80, '/E'), 'too long'],
  ])('refuses “%s” and says why', (text, reason) => {
    const read = readTireCode(text)
    expect(read).toHaveProperty('problem')
    expect('problem' in read ? read.problem : '').toContain(reason)
  })

  it('names a size that would do, under the field of the fact', () => {
    expect(() => parseTireCode('round')).toThrow(AppError)
    try {
      parseTireCode('round')
    } catch (error) {
      expect((error as AppError).details.issues).toEqual([
        {
          path: 'tireCode',
          message: '“round” is not a tire size; LT265/70R17, 33x12.50R15 or 33 in would do',
        },
      ])
    }
  })

  it.each(['C', ' E', '10PR', ' 121/118S', 'LT', '/E'])('is not held up by many a “%s”', (piece) => {
    const started = performance.now()
    readTireCode(`265/70R17${piece.repeat(40).slice(0, 30)}!`)
    expect(performance.now() - started).toBeLessThan(100)
  })

  it('answers any text: a tire of a size that exists, or what is wrong', () => {
    const piece = fc.constantFrom(
      'LT',
      'P',
      '265',
      '33',
      '12.50',
      '/',
      'x',
      'R',
      '-',
      '17',
      '"',
      ' ',
      'in',
      '70',
      '.',
      ',',
    )
    const text = fc.oneof(
      fc.string({ maxLength: 60 }),
      fc.array(piece, { maxLength: 14 }).map((all) => all.join('')),
    )
    fc.assert(
      fc.property(text, (typed) => {
        const read = readTireCode(typed)
        if ('problem' in read) expect(read.problem.length).toBeGreaterThan(5)
        else {
          expect(read.tire.rollingRadiusM).toBeGreaterThan(0.24)
          expect(read.tire.rollingRadiusM).toBeLessThan(0.75)
        }
      }),
      { numRuns: 2000 },
    )
  })
})
