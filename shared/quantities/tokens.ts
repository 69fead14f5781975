import { displayUnit, type Quantity } from '../units/display'
import { findNumeral } from '../units/numerals'
import { DIMENSIONS, RISES, UNITS, type UnitOfMeasure } from './unit-words'

/** Cuts what was typed into numbers, units and signs of arithmetic; anything else is named and refused. */

export type Token =
  { kind: 'number'; value: number } | { kind: 'unit'; unit: UnitOfMeasure } | { kind: 'sign'; sign: string }

const ESCAPE = /[.*+?^${}()|[\]\\]/g

/** A word as a pattern: see {@link UnitOfMeasure.words}. */
function patternOf(word: string): string {
  const source = word
    .replace(ESCAPE, '\\$&')
    .replaceAll('~', '[ *.-]*')
    .replaceAll('/', ' ?(?:/|per\\b) ?')
    .replace(/(?<![?\]]) (?!\?)/g, ' +')
  // A word ends where no letter follows; one that ends in a digit, where neither does.
  return /[a-z]$/.test(word) ? `${source}(?![a-z])\\.?` : /\d$/.test(word) ? `${source}(?![\\da-z])` : source
}

interface Word {
  form: RegExp
  unit: UnitOfMeasure
}

const WORDS: readonly Word[] = [...UNITS, ...RISES]
  .flatMap((unit) => unit.words.map((word) => ({ word, unit })))
  .sort((a, b) => b.word.length - a.word.length)
  .map(({ word, unit }) => ({ form: new RegExp(patternOf(word), 'y'), unit }))

const MINUTE = UNITS.find(({ sign }) => sign === 'min')
const SIGNS = '+-*/()'
const SIGN_WORD = /(?:per|by|x)(?![a-z])/y
const THOUSAND = /k(?![a-z])/y

function matchAt(form: RegExp, text: string, at: number): string | undefined {
  form.lastIndex = at
  return form.exec(text)?.[0]
}

function findUnit(plain: string, at: number, quantity: Quantity) {
  for (const { form, unit } of WORDS) {
    const found = matchAt(form, plain, at)
    if (found === undefined) continue
    // "5 m" is five minutes where a length of time is asked for.
    const minutes = unit.sign === 'm' && DIMENSIONS[quantity] === 's'
    return { unit: minutes && MINUTE ? MINUTE : unit, end: at + found.length }
  }
  return undefined
}

function unknownWord(plain: string, at: number, quantity: Quantity): string {
  const rest = plain.slice(at)
  const word = (/^(?:[\d.,]+|[^\s\d+*/()-]+)/.exec(rest)?.[0] ?? rest.charAt(0)).slice(0, 20)
  const signs = [...new Set([displayUnit(quantity, 'us').unit, displayUnit(quantity, 'metric').unit])].filter(
    (sign) => sign !== '',
  )
  const known = signs.length === 0 ? 'a number alone' : signs.join(' or ')
  return /[\d.,]/.test(word.charAt(0))
    ? `“${word}” is not a number; write 1.5 or 1,500.`
    : `“${word}” is not a unit this field knows; ${known} will do.`
}

/**
 * The tokens of a plain text.
 * @returns the tokens, or what cannot be read
 */
export function listTokens(plain: string, quantity: Quantity): Token[] | { reason: string } {
  const tokens: Token[] = []
  let at = 0
  while (at < plain.length) {
    const character = plain.charAt(at)
    if (character === ' ') {
      at += 1
      continue
    }
    const numeral = findNumeral(plain, at)
    if (numeral) {
      const thousand = DIMENSIONS[quantity] === 'K' ? undefined : matchAt(THOUSAND, plain, numeral.end)
      tokens.push({ kind: 'number', value: numeral.value * (thousand === undefined ? 1 : 1000) })
      at = numeral.end + (thousand?.length ?? 0)
      continue
    }
    const found = findUnit(plain, at, quantity)
    if (found) {
      tokens.push({ kind: 'unit', unit: found.unit })
      at = found.end
      continue
    }
    const word = matchAt(SIGN_WORD, plain, at)
    if (word === undefined && !SIGNS.includes(character)) return { reason: unknownWord(plain, at, quantity) }
    tokens.push({ kind: 'sign', sign: word === undefined ? character : word === 'per' ? '/' : '*' })
    at += word?.length ?? 1
  }
  return tokens
}
