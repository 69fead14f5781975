import { describe, expect, it } from 'vitest'
import {
  adviseInFull,
  type AdviceCode,
  explainAtOnce,
  EXPLAIN_IDS,
  say,
  type Words,
} from '../../../shared/advice'
import { figure, joinWords, ordinal, words } from '../../../shared/advice/words'
import type { Advice } from '../../../shared/advice/types'
import { formatQuantity, type Quantity, type UnitSystem } from '../../../shared/units/display'
import { answerOf } from './answers'
import { MADE_FOR, requestFor } from './requests'

const formatIn = (system: UnitSystem) => (si: number, quantity: Quantity) =>
  formatQuantity(si, quantity, system)
const plain = (text: string) => text.replaceAll('\u00a0', ' ')

describe('a sentence with numbers', () => {
  const sentence = words`The pan peaks at ${figure(100, 'temperature')}, ${words`over ${figure(10, 'temperatureRise')} more`}.`

  it('prints in either system', () => {
    expect(plain(say(sentence, formatIn('us')))).toBe('The pan peaks at 212 °F, over 18 °F more.')
    expect(plain(say(sentence, formatIn('metric')))).toBe('The pan peaks at 100 °C, over 10 °C more.')
  })

  it('is plain data, so that it crosses into a worker', () => {
    expect(structuredClone(sentence)).toEqual(sentence)
  })

  it('counts gears and joins lists as people do', () => {
    expect([1, 2, 3, 4, 10].map(ordinal)).toEqual(['1st', '2nd', '3rd', '4th', '10th'])
    expect([[], ['a'], ['a', 'b'], ['a', 'b', 'c']].map(joinWords)).toEqual([
      '',
      'a',
      'a and b',
      'a, b and c',
    ])
  })
})

/** A number with a unit in the text itself would stand in one system only. */
const BAKED = /\d\s*(°|mph|km\/h|BTU|kW|lb|kg|psi|kPa|gal|qt|liter|feet|inch|ft\b|in\b|mi\b|km\b)/i
/** What people or makers wrote stands as they wrote it. */
const NAMES = /Tow cooler 24,000 GVW/g

const sentencesOf = ({ title, text, action, remedies }: Advice): Words[] => [
  title,
  text,
  action,
  ...remedies.map(({ label }) => label),
]

describe.each(Object.keys(MADE_FOR) as AdviceCode[])('the words of %s', (code) => {
  const all = adviseInFull(requestFor(MADE_FOR[code]))
  const sentences = all.flatMap(sentencesOf)

  it('carry their numbers as numbers', () => {
    for (const sentence of sentences)
      for (const part of sentence) {
        if (typeof part === 'string') expect(part.replace(NAMES, '')).not.toMatch(BAKED)
        else expect(Number.isFinite(part.si)).toBe(true)
      }
  })

  it.each(['us', 'metric'] as const)('read whole in %s units', (system) => {
    for (const sentence of sentences) {
      const text = say(sentence, formatIn(system))
      expect(text).not.toMatch(/undefined|null|NaN|\[object|–/)
      expect(text).not.toMatch(/ {2}|\.\.| \./)
      expect(text.trim()).toBe(text)
    }
  })

  it('differ between the systems wherever a temperature is told', () => {
    for (const { value, text } of all)
      if (value?.quantity === 'temperature')
        expect(say(text, formatIn('us'))).not.toBe(say(text, formatIn('metric')))
  })

  it('cross into a worker', () => {
    expect(structuredClone(all)).toEqual(all)
  })
})

describe('US spelling', () => {
  it.each(EXPLAIN_IDS)('holds in the explanation of %s', (id) => {
    const request = requestFor()
    const text = JSON.stringify(explainAtOnce(id, { ...request, answers: answerOf(request) }).where)
    expect(text).not.toMatch(/tyre|petrol|colour|litre/)
  })
})
