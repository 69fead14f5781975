import type { Quantity } from '../units/display'

/** A number that a sentence carries: its unit is chosen where it is read, not where it is written. */
export interface Figure {
  quantity: Quantity
  si: number
}

/** A sentence whose numbers are still numbers. Plain data: it crosses into and out of a worker. */
export type Words = readonly (string | Figure)[]

/** How a reader prints a number: with figure and unit in the system this person uses. */
export type Format = (si: number, quantity: Quantity) => string

/**
 * Writes a sentence with numbers in it.
 * @example words`The pan peaks at ${figure(118, 'temperature')}.`
 */
export function words(texts: TemplateStringsArray, ...values: readonly (string | Figure | Words)[]): Words {
  return texts.flatMap((text, index) => {
    const value = values[index]
    const after = value === undefined ? [] : isWords(value) ? value : [value]
    return [text, ...after].filter((part) => part !== '')
  })
}

function isWords(value: string | Figure | Words): value is Words {
  return Array.isArray(value)
}

export const figure = (si: number, quantity: Quantity): Figure => ({ si, quantity })
export const temperature = (tempC: number): Figure => figure(tempC, 'temperature')
export const rise = (riseK: number): Figure => figure(riseK, 'temperatureRise')
export const speed = (speedMps: number): Figure => figure(speedMps, 'speed')
export const heat = (heatW: number): Figure => figure(heatW, 'heatRate')

/** A sentence as a person reads it. */
export function say(sentence: Words, format: Format): string {
  return sentence.map((part) => (typeof part === 'string' ? part : format(part.si, part.quantity))).join('')
}

const ORDINALS = ['', '1st', '2nd', '3rd']
/** A gear as it is called: "3rd". */
export const ordinal = (count: number): string => ORDINALS[count] ?? `${count}th`

/** "a", "a and b", "a, b and c". */
export const joinWords = (parts: readonly string[]): string =>
  parts.length < 2 ? (parts[0] ?? '') : `${parts.slice(0, -1).join(', ')} and ${parts.at(-1) ?? ''}`
