import {
  addDependencies,
  create,
  divideDependencies,
  multiplyDependencies,
  parseDependencies,
  subtractDependencies,
  unaryMinusDependencies,
  unitDependencies,
  type MathNode,
  type Unit,
} from 'mathjs'
import { radiansPerSecondToRpm } from '../units/conversions'
import { displayUnit, type Quantity, type UnitSystem } from '../units/display'
import { plainText } from '../units/numerals'
import { exampleText, type Evaluation, type TypedUnit } from '../units/parse-quantity'
import { ZERO_CELSIUS_K } from '../units/temperature'
import { listTokens, type Token } from './tokens'
import { DIMENSION_WORDS, DIMENSIONS, NEEDS, UNITS, type Dimension, type UnitOfMeasure } from './unit-words'

/**
 * Units and arithmetic in what a person types. Our own words are turned into names without meaning, mathjs parses what is
 * left, and only its numbers, those names and the four operations are walked: no function, no other symbol, nothing of
 * mathjs' own units. (Its type declarations know the factories as a record of whatever names, hence the marks.)
 */
const math = create({
  addDependencies: addDependencies!,
  divideDependencies: divideDependencies!,
  multiplyDependencies: multiplyDependencies!,
  parseDependencies: parseDependencies!,
  subtractDependencies: subtractDependencies!,
  unaryMinusDependencies: unaryMinusDependencies!,
  unitDependencies: unitDependencies!,
})

/** A value on its way: a number, or an amount with a dimension. */
interface Amount {
  value: number | Unit
  /** Neither it nor any part of it names a unit. */
  bare: boolean
  /** The first unit that was named. */
  unit?: UnitOfMeasure
}

/** What cannot be reckoned, in words for the person who typed it. */
class Refusal extends Error {}

const isUnit = (value: number | Unit): value is Unit => typeof value !== 'number'
const measure = (size: number, dimension: Dimension): number | Unit =>
  dimension === '' ? size : math.unit(size, dimension)

function dimensionOf(value: number | Unit): Dimension | undefined {
  if (!isUnit(value)) return ''
  const all = Object.keys(DIMENSION_WORDS) as Dimension[]
  return all.find((dimension) => dimension !== '' && value.equalBase(math.unit(1, dimension)))
}
const wordsOf = (value: number | Unit) => {
  const dimension = dimensionOf(value)
  return dimension === undefined ? 'none of the quantities of a truck' : DIMENSION_WORDS[dimension]
}

/** A number beside an amount in a sum is in that amount's unit: "5400 lb + 350". */
function inUnitOf(amount: Amount, other: Amount): Amount {
  if (!amount.bare || isUnit(amount.value) || !other.unit) return amount
  const { size, dimension } = other.unit
  return { value: measure(amount.value * size, dimension), bare: false, unit: other.unit }
}

const OPERATIONS = {
  add: (a: number | Unit, b: number | Unit) => math.add(a, b),
  subtract: (a: number | Unit, b: number | Unit) => math.subtract(a, b),
  multiply: (a: number | Unit, b: number | Unit) => math.multiply(a, b),
  divide: (a: number | Unit, b: number | Unit) => math.divide(a, b),
} as const

function combine(name: keyof typeof OPERATIONS, left: Amount, right: Amount): Amount {
  const sum = name === 'add' || name === 'subtract'
  const [a, b] = sum ? [inUnitOf(left, right), inUnitOf(right, left)] : [left, right]
  // Two that are none of a truck's quantities may still be of different kinds, such as m⁴ and m⁵.
  const apart = isUnit(a.value) && isUnit(b.value) && !a.value.equalBase(b.value)
  if (sum && (apart || dimensionOf(a.value) !== dimensionOf(b.value)))
    throw new Refusal(`that adds up ${wordsOf(a.value)} and ${wordsOf(b.value)}, which do not go together.`)
  const result: unknown = OPERATIONS[name](a.value, b.value)
  if (typeof result !== 'number' && !math.isUnit(result)) throw new Refusal('that cannot be reckoned.')
  return { value: result, bare: a.bare && b.bare, unit: a.unit ?? b.unit }
}

/** Walks the tree against the list of what may be in it. */
function walk(node: MathNode, names: ReadonlyMap<string, UnitOfMeasure>): Amount {
  if (math.isParenthesisNode(node)) return walk(node.content, names)
  if (math.isConstantNode(node) && typeof node.value === 'number') return { value: node.value, bare: true }
  if (math.isSymbolNode(node)) {
    const unit = names.get(node.name)
    if (unit) return { value: measure(unit.size, unit.dimension), bare: false, unit }
  }
  if (math.isOperatorNode(node)) {
    const [left, right] = node.args.map((argument) => walk(argument, names))
    if (left && right && Object.hasOwn(OPERATIONS, node.fn))
      return combine(node.fn as keyof typeof OPERATIONS, left, right)
    if (left && !right && node.fn === 'unaryPlus') return left
    if (left && !right && node.fn === 'unaryMinus')
      return { ...left, value: isUnit(left.value) ? math.unaryMinus(left.value) : -left.value }
  }
  throw new Refusal('only numbers, units, + − × ÷ and brackets are read here.')
}

/** `6 ft 2 in`, `1 h 20 min`: amounts side by side are one amount, put in brackets and added up. */
const SIDE_BY_SIDE = /(?:n(?:\/n)?u){2,}/g

const INCH = UNITS.find(({ sign }) => sign === 'in')

/** `6' 2`: a number after feet, with no unit of its own, is inches. */
function withInches(tokens: readonly Token[]): Token[] {
  return tokens.flatMap((token, index) => {
    const [before, after] = [tokens[index - 1], tokens[index + 1]]
    const afterFeet = token.kind === 'number' && before?.kind === 'unit' && before.unit.sign === 'ft'
    const alone = after === undefined || (after.kind === 'sign' && after.sign !== '/')
    return afterFeet && alone && INCH ? [token, { kind: 'unit' as const, unit: INCH }] : [token]
  })
}

/** Tokens as a sum mathjs can parse, each unit under a name that means nothing to it. */
function spell(tokens: readonly Token[]): { text: string; names: Map<string, UnitOfMeasure> } {
  const names = new Map<string, UnitOfMeasure>()
  const nameOf = (unit: UnitOfMeasure) => {
    const name = `unit${names.size}`
    names.set(name, unit)
    return name
  }
  const kinds = tokens
    .map((token) => (token.kind === 'number' ? 'n' : token.kind === 'sign' ? token.sign : 'u'))
    .join('')
  const opened = new Map<number, number>()
  for (const found of kinds.matchAll(SIDE_BY_SIDE)) opened.set(found.index, found.index + found[0].length)
  let text = ''
  let end = -1
  tokens.forEach((token, index) => {
    const until = opened.get(index)
    if (until !== undefined) {
      text += '('
      end = until
    } else if (index < end && token.kind === 'number' && tokens[index - 1]?.kind === 'unit') text += ' + '
    text +=
      token.kind === 'number'
        ? ` ${token.value}`
        : token.kind === 'sign'
          ? token.sign
          : ` ${nameOf(token.unit)} `
    if (index + 1 === end) text += ')'
  })
  return { text, names }
}

/** A temperature is one reading: a number and a scale. */
function readTemperature(tokens: readonly Token[], system: UnitSystem): Evaluation {
  const example = exampleText({ quantity: 'temperature', system })
  const sign = tokens[0]?.kind === 'sign' && '+-'.includes(tokens[0].sign) ? tokens[0].sign : ''
  const [number, scale, ...more] = sign === '' ? tokens : tokens.slice(1)
  const other = tokens.find((token) => token.kind === 'unit' && token.unit.dimension !== 'K')
  if (other?.kind === 'unit')
    return {
      kind: 'refused',
      reason: `that is ${DIMENSION_WORDS[other.unit.dimension]}; this field needs a temperature, such as ${example}.`,
    }
  if (number?.kind !== 'number' || more.length > 0 || (scale && scale.kind !== 'unit'))
    return {
      kind: 'refused',
      reason: `temperatures are not reckoned with: type the one reading, such as ${example}.`,
    }
  const reading = sign === '-' ? -number.value : number.value
  if (!scale) return { kind: 'bare', value: reading }
  const { si, unit } = onScale(reading, scale.unit.sign)
  return { kind: 'quantity', si, unit }
}

function onScale(reading: number, sign: string): { si: number; unit: TypedUnit } {
  if (sign === 'K') {
    return { si: reading - ZERO_CELSIUS_K, unit: { sign, fromSi: (si) => si + ZERO_CELSIUS_K } }
  }
  const scale = displayUnit('temperature', sign === '°F' ? 'us' : 'metric')
  return { si: scale.fromDisplay(reading), unit: { sign: scale.unit, fromSi: scale.toDisplay } }
}

/** Two lengths make an area, and so do a number and a length, "11 x 6.5 in": the number is in the length's unit. */
function asArea(amount: Amount, tokens: readonly Token[], quantity: Quantity): Amount {
  const times = tokens.filter((token) => token.kind === 'sign' && token.sign === '*').length
  if (DIMENSIONS[quantity] !== 'm^2' || times !== 1 || dimensionOf(amount.value) !== 'm' || !amount.unit)
    return amount
  return { ...amount, value: math.multiply(amount.value, measure(amount.unit.size, 'm')) as Unit }
}

function settle(amount: Amount, quantity: Quantity, system: UnitSystem): Evaluation {
  const { value, unit } = amount
  const wanted = DIMENSIONS[quantity]
  if (amount.bare && !isUnit(value)) return { kind: 'bare', value }
  if (dimensionOf(value) !== wanted)
    throw new Refusal(
      `that is ${wordsOf(value)}; this field needs ${NEEDS[quantity]}, such as ${exampleText({ quantity, system })}.`,
    )
  const inBase = isUnit(value) ? value.toNumber(wanted) : value
  const own = displayUnit(quantity, system)
  const ownUnit: TypedUnit = { sign: own.unit, fromSi: own.toDisplay }
  return {
    kind: 'quantity',
    si: wanted === 'rad/s' ? radiansPerSecondToRpm(inBase) : inBase,
    // A unit that only went into the reckoning ("1 qt / 20 s") is not the unit of the answer.
    unit: unit?.dimension === wanted && !(quantity === 'number' && unit.sign === '%') ? unit : ownUnit,
  }
}

/** Reads units and arithmetic; see {@link Evaluation}. Never throws for anything typed. */
export function evaluateQuantity(typed: string, quantity: Quantity, system: UnitSystem): Evaluation {
  const refused = (reason: string): Evaluation => ({ kind: 'refused', reason })
  const plain = plainText(typed)
  const tokens = listTokens(quantity === 'number' ? plain.replace(/ ?: ?1$/, '') : plain, quantity)
  if (!Array.isArray(tokens)) return refused(tokens.reason)
  if (quantity === 'temperature') return readTemperature(tokens, system)
  const unfinished = refused(`that is not finished; ${exampleText({ quantity, system })} would do.`)
  if (!tokens.some(({ kind }) => kind === 'number')) return unfinished
  const { text, names } = spell(withInches(tokens))
  try {
    return settle(asArea(walk(math.parse(text), names), tokens, quantity), quantity, system)
  } catch (error) {
    if (error instanceof Refusal) return refused(error.message)
    if (error instanceof SyntaxError) return unfinished
    throw error
  }
}
