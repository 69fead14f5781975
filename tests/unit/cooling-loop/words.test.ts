import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { createGenericCooler } from '../../../shared/build-sheet/generic-cooler'
import {
  makeParallel,
  moveEarlier,
  removeCooler,
  setPosition,
  addCooler,
} from '../../../shared/cooling-loop/edit'
import { createGenericTank } from '../../../shared/cooling-loop/generic-tank'
import type { LoopReading } from '../../../shared/cooling-loop/reading'
import {
  breakLines,
  bypassWords,
  describeCooler,
  fitLine,
  sayEdit,
  stationLines,
  summarizeLoop,
} from '../../../shared/cooling-loop/words'
import type { Cooler } from '../../../shared/schemas/heat-input'
import { anyLoop } from './arbitrary-loop'

const plain = (text: string | undefined) => text?.replaceAll('\u00a0', ' ')
const front: Cooler = {
  ...createGenericCooler({ construction: 'stacked-plate', position: 'ahead-of-condenser', size: 'medium' }),
  name: 'Front cooler',
}
const remote: Cooler = {
  ...createGenericCooler({ construction: 'plate-fin', position: 'remote', size: 'small', fan: true }),
  name: 'Remote',
}
const coolers = [createGenericTank(), front, remote]
const reading: LoopReading = {
  mark: '',
  sumpC: 100,
  inletC: 110,
  returnC: 80,
  flowM3S: 1.26e-4,
  throughShare: 1,
  afterGroupC: [104, 92, 80],
  coolerHeatW: [-1000, 4000, 3000],
  air: { outsideC: 38, aheadC: 38, behindCondenserC: 43, atRadiatorC: 47, underbodyC: 53 },
}

describe('the loop in words', () => {
  it('says what the oil meets, in order', () => {
    expect(summarizeLoop(coolers)).toBe('The oil meets Radiator tank, then Front cooler, then Remote')
    expect(summarizeLoop(makeParallel(coolers, 1).coolers)).toBe(
      'The oil meets Radiator tank and Front cooler side by side, then Remote',
    )
    expect(summarizeLoop([])).toBe('No cooler: the oil comes straight back')
  })

  it('describes a cooler by kind, place, heat and oil', () => {
    expect(plain(describeCooler(coolers, 0, reading, 'us'))).toBe(
      'Radiator tank: in the radiator tank; warms the oil, 3,410 BTU/h; oil in 230 °F, out 219 °F',
    )
    expect(plain(describeCooler(coolers, 2, reading, 'metric'))).toBe(
      'Remote: plate and fin, remote, under the body, own fan; takes 3.00 kW; oil in 92 °C, out 80 °C',
    )
    expect(plain(describeCooler(makeParallel(coolers, 1).coolers, 1, null, 'us'))).toMatch(
      /^Front cooler: stacked plate, ahead of the condenser, beside Radiator tank; rated [\d,]+ BTU\/h$/,
    )
  })

  it('tells a mixture once, beside the last of its group', () => {
    const beside = makeParallel(coolers, 1).coolers
    const two = { ...reading, afterGroupC: [95, 80] }
    expect(stationLines(beside, 0, two, 'metric')[2]).toEqual([''])
    expect(plain(stationLines(beside, 1, two, 'metric')[2]?.[0])).toBe('mixed 95 °C')
    expect(plain(stationLines(beside, 2, two, 'metric')[2]?.[0])).toBe('oil out 80 °C')
  })

  it('says what a bypass does and what it does now', () => {
    const bypass = { openC: 79.4, fullC: 96.1 }
    expect(plain(bypassWords(bypass, null, 'us')[0])).toBe(
      'Bypass: straight back below 175 °F, all through the coolers from 205 °F',
    )
    expect(plain(bypassWords(bypass, { ...reading, throughShare: 0.25 }, 'us')[1])).toBe(
      'Bypass until 205 °F; now 25 %',
    )
  })

  it('says each change aloud', () => {
    expect(sayEdit(coolers, moveEarlier(coolers, 2))).toBe('Remote is second of 3 in the loop.')
    expect(sayEdit(coolers, makeParallel(coolers, 1))).toBe(
      'Front cooler is first of 2 in the loop, beside Radiator tank.',
    )
    expect(sayEdit(coolers, setPosition(coolers, 1, 'remote'))).toBe(
      'Front cooler is second of 3 in the loop, remote, under the body, no fan.',
    )
    expect(sayEdit(coolers, removeCooler(coolers, 0))).toBe(
      'Radiator tank is out of the loop. The oil meets Front cooler, then Remote.',
    )
    expect(sayEdit(coolers, addCooler(coolers, { ...front, name: 'Another' }))).toBe(
      'Another is added, fourth in the loop.',
    )
  })

  it('has words for any loop', () => {
    fc.assert(
      fc.property(anyLoop, (any) => {
        any.forEach((cooler, index) => {
          expect(describeCooler(any, index, null, 'us')).toContain(cooler.name)
          expect(stationLines(any, index, null, 'metric')).toHaveLength(3)
        })
        expect(summarizeLoop(any)).not.toMatch(/undefined|, then $/)
      }),
    )
  })
})

describe('words in a narrow place', () => {
  it('takes the longest wording that fits, and cuts only when none does', () => {
    expect(fitLine(['to-cooler line, hot', 'hot line'], 200)).toBe('to-cooler line, hot')
    expect(fitLine(['to-cooler line, hot', 'hot line'], 80)).toBe('hot line')
    expect(fitLine(['to-cooler line, hot', 'hot line'], 40)).toBe('hot…')
  })

  it('breaks a wording into the lines there are', () => {
    expect(breakLines(['one two three four', 'one'], 60, 3)).toEqual(['one two', 'three', 'four'])
    expect(breakLines(['one two three four', 'one'], 60, 2)).toEqual(['one'])
    expect(breakLines(['one two three four'], 60, 2)).toEqual(['one two', 'three'])
  })
})
