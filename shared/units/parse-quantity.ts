import { displayUnit, fieldText, formatQuantity, NO_FIGURE, type Quantity, type UnitSystem } from './display'
import { ZERO_CELSIUS_K } from './temperature'
import { LONGEST_TYPED, plainText, readPlainNumber } from './numerals'

/**
 * What a person types for a quantity, in any unit and with a little arithmetic. Plain numbers are read here, at once; for
 * units and arithmetic an evaluator is passed in, which brings a library along and is loaded at the first keystroke.
 */

/** What is asked of the text. Bounds and example in SI. */
export interface QuantityField {
  quantity: Quantity
  system: UnitSystem
  /** Both included. */
  min?: number
  max?: number
  /** A value that would do, for the message. */
  example?: number
}

/** A value as a field holds it and a sheet keeps it: in SI, with what was typed and in which unit. */
export interface TypedQuantity {
  value: number | null
  typed?: string
  unit?: string
}

export type QuantityReading =
  | {
      ok: true
      /** In SI; temperatures in °C. */
      si: number
      /** Sign of the unit it was typed in. */
      unit: string
      typed: string
      /** How it was understood: "5,750 lb = 2,608 kg". */
      echo: string
    }
  | {
      ok: false
      /** What is wrong, and a value that would do. */
      message: string
      /** The text needs the evaluator, which is not there yet. */
      waiting?: true
    }

/** A unit of measure as far as reading needs it. */
export interface TypedUnit {
  /** "gal/min". */
  sign: string
  fromSi: (si: number) => number
}

export type Evaluation =
  /** A number, or a sum of numbers, without any unit: it takes that of the field. */
  | { kind: 'bare'; value: number }
  | { kind: 'quantity'; si: number; unit: TypedUnit }
  | { kind: 'refused'; reason: string }

/** Reads units and arithmetic. */
export type EvaluateQuantity = (typed: string, quantity: Quantity, system: UnitSystem) => Evaluation

/** A value that would do for each quantity, where a field does not name one: a common one of a truck (SI, °C). */
const EXAMPLES: Record<Quantity, { us: string; metric: string }> = {
  temperature: { us: '210 °F', metric: '99 °C' },
  temperatureRise: { us: '100 °F', metric: '55 °C' },
  mass: { us: '5400 lb', metric: '2450 kg' },
  speed: { us: '45 mph', metric: '70 km/h' },
  airSpeed: { us: '790 ft/min', metric: '4 m/s' },
  torque: { us: '336 ft·lb', metric: '455 N·m' },
  power: { us: '250 hp', metric: '186 kW' },
  heatRate: { us: '16000 BTU/h', metric: '4.7 kW' },
  conductance: { us: '160 BTU/h per °F', metric: '84 W/K' },
  volumeFlow: { us: '2 gal/min', metric: '7.6 L/min' },
  airFlow: { us: '470 ft³/min', metric: '800 m³/h' },
  pressure: { us: '80 psi', metric: '550 kPa' },
  length: { us: '3/8 in', metric: '9.5 mm' },
  height: { us: '12 ft', metric: '3.6 m' },
  distance: { us: '5 mi', metric: '8 km' },
  area: { us: '78 in²', metric: '500 cm²' },
  dragArea: { us: '14 ft²', metric: '1.3 m²' },
  volume: { us: '13.5 qt', metric: '12.8 L' },
  grade: { us: '6 %', metric: '6 %' },
  share: { us: '25 %', metric: '25 %' },
  rotation: { us: '2800 rpm', metric: '2800 rpm' },
  number: { us: '4.10', metric: '4.10' },
  minutes: { us: '90 s', metric: '90 s' },
  hours: { us: '1.5 h', metric: '1.5 h' },
  seconds: { us: '20 s', metric: '20 s' },
}

/** A value that would do, as somebody would type it. */
export function exampleText({ quantity, system, example }: QuantityField): string {
  return example === undefined
    ? EXAMPLES[quantity][system]
    : formatQuantity(example, quantity, system).replace(/\.0+(?!\d)/, '')
}

const CONTROL = /\p{Cc}/u
/** A grade typed as rise over run: steeper than this, a number below 1 may as well be a gentle percentage. */
const STEEPEST_RUN = 0.3

/**
 * A number without a unit, in the unit of its field. Below 1, a share or a grade is meant as such (0.06 is 6 %).
 * @returns SI, or why it can be read two ways
 */
function readBare(value: number, quantity: Quantity, system: UnitSystem): number | { reason: string } {
  const size = Math.abs(value)
  if (quantity === 'share' && size < 1) return value
  if (quantity === 'grade' && size <= STEEPEST_RUN) return value
  if (quantity === 'grade' && size < 1)
    return {
      reason: `“${value}” can be read two ways: write ${value} % or ${Number((value * 100).toPrecision(6))} %.`,
    }
  return displayUnit(quantity, system).fromDisplay(value)
}

const group = (value: number) => value.toLocaleString('en-US', { maximumFractionDigits: 9 })
const figure = (value: number, digits: number): string => {
  if (!Number.isFinite(value)) return NO_FIGURE
  // What is left of 0 after a conversion there and back is 0; adding 0 turns −0 into 0.
  const rounded = Math.abs(value) < 1e-9 ? 0 : Number(value.toPrecision(digits)) + 0
  const small = rounded !== 0 && Math.abs(rounded) < 1e-4
  return (small ? String(rounded) : group(rounded)).replace('-', '\u2212')
}
const withUnit = (text: string, sign: string) => (sign === '' ? text : `${text}\u00a0${sign}`)

/** The other unit in which a value is said back: the field's own where it was typed in another, else the other system's. */
function otherUnit(sign: string, quantity: Quantity, system: UnitSystem): TypedUnit | undefined {
  const own = displayUnit(quantity, system)
  const other = displayUnit(quantity, system === 'us' ? 'metric' : 'us')
  const said = own.unit === sign ? other : own
  return said.unit === sign ? undefined : { sign: said.unit, fromSi: said.toDisplay }
}

/** How a value was understood: in the unit it was typed in, and in the one beside it. */
function echoOf(si: number, unit: TypedUnit, quantity: Quantity, system: UnitSystem): string {
  const typed = withUnit(figure(unit.fromSi(si), 6), unit.sign)
  const other = otherUnit(unit.sign, quantity, system)
  if (other === undefined) return typed
  const value = other.fromSi(si)
  const said = quantity === 'temperature' ? figure(Math.round(value), 15) : figure(value, 4)
  return `${typed} = ${withUnit(said, other.sign)}`
}

/** The same for a value that nobody typed just now. */
export function echoValue(si: number, quantity: Quantity, system: UnitSystem): string {
  const { unit, toDisplay } = displayUnit(quantity, system)
  return echoOf(si, { sign: unit, fromSi: toDisplay }, quantity, system)
}

function outOfRange(si: number, field: QuantityField): string | undefined {
  const { min, max, quantity, system } = field
  const say = (bound: number) => formatQuantity(bound, quantity, system)
  if (quantity === 'temperature' && si < -ZERO_CELSIUS_K)
    return `nothing is colder than ${say(-ZERO_CELSIUS_K)}; ${exampleText(field)} would do.`
  if (min !== undefined && si < min) return `must be at least ${say(min)}; ${exampleText(field)} would do.`
  if (max !== undefined && si > max) return `must be at most ${say(max)}; ${exampleText(field)} would do.`
  return undefined
}

/** A value printed for a field of its own unit, so that reading it again gives the value. */
export function quantityFieldText(si: number | null, quantity: Quantity, system: UnitSystem): string {
  const text = fieldText(si, quantity, system)
  if (si === null || text === '') return text
  const shown = readPlainNumber(plainText(text)) ?? Number.NaN
  const { fromDisplay, unit } = displayUnit(quantity, system)
  // A tenth of a percent would be read as a share: it carries its sign.
  return readBare(shown, quantity, system) === fromDisplay(shown) ? text : withUnit(text, unit)
}

/** Whether a text names a unit of its own; one that does not is in the unit of its field. */
export function namesUnit(typed: string): boolean {
  return /[\p{L}°%"'#\u2032\u2033]/u.test(typed)
}

/**
 * What was typed as it reads in another unit system: text that names its unit stands as it is, a bare number gets the unit
 * it was meant in. Nothing that was typed is lost.
 */
export function typedText(
  typed: string,
  unit: string | undefined,
  quantity: Quantity,
  system: UnitSystem,
): string {
  const own = displayUnit(quantity, system).unit
  if (unit === undefined || unit === own || namesUnit(typed)) return typed
  return `${typed} ${unit}`
}

/**
 * Reads what a person types for a quantity.
 *
 * @param typed - as typed, up to 60 characters: `5400 lb`, `2,45 t`, `3/8 in`, `5400 lb + 350 lb`, `1 qt / 20 s`
 * @param field - which quantity, the person's units (a number alone is in those), bounds, a value that would do
 * @param evaluate - reads units and arithmetic; without it only numbers alone are understood and all else is `waiting`
 * @returns the value in SI with its unit, what was typed and how it was understood; or what is wrong. Never throws
 *
 * Example, computed here: `5400 lb + 350 lb` is 2608.16 kg, "5,750 lb = 2,608 kg".
 */
export function parseQuantity(
  typed: string,
  field: QuantityField,
  evaluate?: EvaluateQuantity,
): QuantityReading {
  const { quantity, system } = field
  const would = `${exampleText(field)} would do.`
  const refuse = (reason: string): QuantityReading => ({ ok: false, message: reason })
  const text = typed.trim()
  if (text === '') return refuse(`nothing is typed yet; ${would}`)
  if (text.length > LONGEST_TYPED) return refuse(`that is longer than ${LONGEST_TYPED} characters; ${would}`)
  if (CONTROL.test(text) || !text.isWellFormed())
    return refuse(`that holds characters nobody types; ${would}`)

  const alone = readPlainNumber(plainText(text))
  const evaluation: Evaluation | undefined =
    alone === undefined ? evaluate?.(text, quantity, system) : { kind: 'bare', value: alone }
  if (evaluation === undefined)
    return { ok: false, waiting: true, message: `units and sums are being made ready; ${would}` }
  if (evaluation.kind === 'refused') return refuse(evaluation.reason)

  const own = displayUnit(quantity, system)
  const unit: TypedUnit =
    evaluation.kind === 'bare' ? { sign: own.unit, fromSi: own.toDisplay } : evaluation.unit
  const si = evaluation.kind === 'bare' ? readBare(evaluation.value, quantity, system) : evaluation.si
  if (typeof si !== 'number') return refuse(si.reason)
  if (!Number.isFinite(si)) return refuse(`that does not come out as a number; ${would}`)
  const range = outOfRange(si, field)
  if (range !== undefined) return refuse(range)
  return { ok: true, si, unit: unit.sign, typed: text, echo: echoOf(si, unit, quantity, system) }
}
