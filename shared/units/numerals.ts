/** Numbers as people type them: both decimal marks, thousands of several habits, fractions of an inch, odd characters. */

/** Longest text read as one quantity; also what a sheet keeps of it. */
export const LONGEST_TYPED = 60

/** Characters that stand for one another, brought to the plain one. Fractions come first: ½ beside a digit is "and a half". */
const PLAIN: readonly [RegExp, string][] = [
  [/(?<=\d)(?=[\u00bc-\u00be\u2150-\u215e])/gu, ' '],
  [/\u00ba/gu, '°'],
  [/[\u2018\u2019\u02bc\u2032\u00b4]/gu, "'"],
  [/[\u201c\u201d\u2033]/gu, '"'],
]
const PLAIN_AFTER: readonly [RegExp, string][] = [
  [/[\s\u200b\u2060\ufeff]+/gu, ' '],
  [/[\u2044\u2215\u00f7]/gu, '/'],
  [/[\u2212\u2010-\u2014\ufe63]/gu, '-'],
  [/[\u00d7\u2715\u22c5\u2219\u2022\u00b7]/gu, '*'],
  [/''/gu, '"'],
]

/**
 * The same text in the characters of a plain keyboard, trimmed, in lower case: minus, times and fraction signs, spaces of
 * every width, typographic quotes and superscripts as what they stand for.
 */
export function plainText(text: string): string {
  const before = PLAIN.reduce((result, [from, to]) => result.replace(from, to), text)
  return PLAIN_AFTER.reduce((result, [from, to]) => result.replace(from, to), before.normalize('NFKC'))
    .replace(/''/gu, '"')
    .toLowerCase()
    .trim()
}

interface Habit {
  form: RegExp
  read: (found: string) => number
}

const strip = (text: string, mark: RegExp) => Number(text.replace(mark, '').replace(',', '.'))

/**
 * How numbers are written, the first that fits. Three digits after one comma are thousands (that is how the program itself
 * prints them, in both unit systems); any other count of digits after a comma are decimals.
 */
const HABITS: readonly Habit[] = [
  {
    form: /[1-9]\d{0,2}(?:,\d{3})+(?:\.\d*)?(?![\d.,])/y,
    read: (found) => Number(found.replaceAll(',', '')),
  },
  { form: /[1-9]\d{0,2}(?:\.\d{3})+,\d+(?![\d.,])/y, read: (found) => strip(found, /\./g) },
  { form: /[1-9]\d{0,2}(?:\.\d{3}){2,}(?![\d.,])/y, read: (found) => strip(found, /\./g) },
  { form: /[1-9]\d{0,2}(?: \d{3})+(?:[.,]\d+)?(?![\d.,])/y, read: (found) => strip(found, / /g) },
  { form: /\d+,\d+(?![\d.,])/y, read: (found) => strip(found, / /g) },
  { form: /(?:\d+(?:\.\d*)?|\.\d+)(?:e[+-]?\d{1,3})?(?![\d.,])/y, read: Number },
]
/** "1 1/2" and, as on a part's label, "1-1/2": a whole and a true fraction. */
const MIXED = /(\d{1,3})[ -](\d{1,3})\/(\d{1,3})(?![\d.,])/y

export interface Numeral {
  value: number
  /** Where it ends in the text. */
  end: number
}

function matchAt(form: RegExp, text: string, at: number): RegExpExecArray | null {
  form.lastIndex = at
  return form.exec(text)
}

/**
 * The number that begins at a place of a plain text, without its sign.
 * @returns undefined where none begins, or where what begins is not a number in any habit ("1,2,3")
 */
export function findNumeral(plain: string, at = 0): Numeral | undefined {
  const mixed = matchAt(MIXED, plain, at)
  const [whole, top, bottom] = [Number(mixed?.[1]), Number(mixed?.[2]), Number(mixed?.[3])]
  if (mixed && top < bottom) return { value: whole + top / bottom, end: at + mixed[0].length }
  for (const { form, read } of HABITS) {
    const found = matchAt(form, plain, at)
    if (found) return { value: read(found[0]), end: at + found[0].length }
  }
  return undefined
}

/** The value of a text that is one number and nothing else, with or without a sign; undefined for any other. */
export function readPlainNumber(plain: string): number | undefined {
  const sign = /^[+-] ?/.exec(plain)?.[0] ?? ''
  const numeral = findNumeral(plain, sign.length)
  if (numeral === undefined || numeral.end !== plain.length || !Number.isFinite(numeral.value))
    return undefined
  return sign.startsWith('-') ? -numeral.value : numeral.value
}
