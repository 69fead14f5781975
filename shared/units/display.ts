/**
 * The edge where numbers are printed and read: which unit each quantity wears in each system, how it is rounded, and how
 * typed text becomes SI again. Inside, everything is SI (temperatures in °C).
 */
import * as convert from './conversions'
import {
  celsius,
  celsiusToFahrenheit,
  differenceF,
  differenceFToK,
  differenceK,
  differenceKToF,
  fahrenheit,
  fahrenheitToCelsius,
} from './temperature'

export type UnitSystem = 'us' | 'metric'

/** One unit of a quantity: its sign, how it is said, what else people type for it, and the way to SI and back. */
export interface DisplayUnit {
  readonly unit: string
  readonly spoken: string
  readonly aliases: readonly string[]
  readonly toDisplay: (si: number) => number
  readonly fromDisplay: (shown: number) => number
}

/** A quantity in both systems. `digits`: `whole` numbers, or `three` significant digits. */
export interface QuantityDisplay {
  readonly us: DisplayUnit
  readonly metric: DisplayUnit
  readonly digits: 'whole' | 'three'
}

const same = (value: number) => value

const unit = (
  sign: string,
  spoken: string,
  aliases: readonly string[] = [],
  toDisplay: (si: number) => number = same,
  fromDisplay: (shown: number) => number = same,
): DisplayUnit => ({ unit: sign, spoken, aliases, toDisplay, fromDisplay })

const both = (only: DisplayUnit, digits: 'whole' | 'three' = 'three'): QuantityDisplay => ({
  us: only,
  metric: only,
  digits,
})

const percent = unit(
  '%',
  'percent',
  ['percent', 'pct'],
  (share) => share * 100,
  (shown) => shown / 100,
)
const minutesUnit = unit(
  'min',
  'minutes',
  ['minutes', 'minute'],
  (seconds) => seconds / 60,
  (shown) => shown * 60,
)
const hoursUnit = unit(
  'h',
  'hours',
  ['hours', 'hour', 'hr', 'hrs'],
  (seconds) => seconds / 3600,
  (shown) => shown * 3600,
)

/** Every quantity of the program, with the SI unit its numbers come in. */
export const QUANTITIES = {
  /** °C. */
  temperature: {
    us: unit(
      '°F',
      'degrees Fahrenheit',
      ['f', 'degf', 'deg f', '° f'],
      (c) => celsiusToFahrenheit(celsius(c)),
      (f) => fahrenheitToCelsius(fahrenheit(f)),
    ),
    metric: unit('°C', 'degrees Celsius', ['c', 'degc', 'deg c', '° c']),
    digits: 'whole',
  },
  /** K: a difference, a margin, a rise. */
  temperatureRise: {
    us: unit(
      '°F',
      'degrees Fahrenheit',
      ['f'],
      (k) => differenceKToF(differenceK(k)),
      (f) => differenceFToK(differenceF(f)),
    ),
    metric: unit('°C', 'degrees Celsius', ['c', 'k']),
    digits: 'whole',
  },
  /** kg. */
  mass: {
    us: unit(
      'lb',
      'pounds',
      ['lbs', 'pound', 'pounds', '#'],
      convert.kilogramsToPounds,
      convert.poundsToKilograms,
    ),
    metric: unit('kg', 'kilograms', ['kgs', 'kilogram', 'kilograms', 'kilo', 'kilos']),
    digits: 'three',
  },
  /** m/s. */
  speed: {
    us: unit(
      'mph',
      'miles per hour',
      ['mi/h', 'miles per hour'],
      convert.metersPerSecondToMilesPerHour,
      convert.milesPerHourToMetersPerSecond,
    ),
    metric: unit(
      'km/h',
      'kilometers per hour',
      ['kmh', 'kph', 'km per hour'],
      convert.metersPerSecondToKilometersPerHour,
      convert.kilometersPerHourToMetersPerSecond,
    ),
    digits: 'three',
  },
  /** m/s: air at the face of a cooler. */
  airSpeed: {
    us: unit(
      'ft/min',
      'feet per minute',
      ['fpm', 'ft per min'],
      (metersPerSecond) => convert.metersToFeet(metersPerSecond) * 60,
      (feetPerMinute) => convert.feetToMeters(feetPerMinute) / 60,
    ),
    metric: unit('m/s', 'meters per second', ['mps']),
    digits: 'three',
  },
  /** N·m. */
  torque: {
    us: unit(
      'ft·lb',
      'foot-pounds',
      ['ft-lb', 'ft lb', 'lb-ft', 'lb·ft', 'lb ft', 'ftlb', 'lbft', 'ft-lbs', 'ft lbs'],
      convert.newtonMetersToFootPounds,
      convert.footPoundsToNewtonMeters,
    ),
    metric: unit('N·m', 'newton meters', ['nm', 'n m', 'n-m']),
    digits: 'three',
  },
  /** W: an engine. */
  power: {
    us: unit('hp', 'horsepower', ['horsepower', 'bhp'], convert.wattsToHorsepower, convert.horsepowerToWatts),
    metric: unit(
      'kW',
      'kilowatts',
      ['kilowatt', 'kilowatts'],
      (watts) => watts / 1000,
      (shown) => shown * 1000,
    ),
    digits: 'three',
  },
  /** W: heat. */
  heatRate: {
    us: unit(
      'BTU/h',
      'BTU per hour',
      ['btu/hr', 'btuh', 'btu'],
      convert.wattsToBtuPerHour,
      convert.btuPerHourToWatts,
    ),
    metric: unit(
      'kW',
      'kilowatts',
      ['kilowatt', 'kilowatts'],
      (watts) => watts / 1000,
      (shown) => shown * 1000,
    ),
    digits: 'three',
  },
  /** W/K: what a cooler carries per degree. */
  conductance: {
    us: unit(
      'BTU/h per °F',
      'BTU per hour per degree Fahrenheit',
      ['btu/h/f', 'btu/hr/f'],
      (wattsPerKelvin) => convert.wattsToBtuPerHour(differenceFToK(differenceF(1)) * wattsPerKelvin),
      (shown) => convert.btuPerHourToWatts(shown) / differenceFToK(differenceF(1)),
    ),
    metric: unit('W/K', 'watts per kelvin', ['w/c', 'w/°c']),
    digits: 'three',
  },
  /** m³/s. */
  volumeFlow: {
    us: unit(
      'gal/min',
      'gallons per minute',
      ['gpm', 'gal per min'],
      convert.cubicMetersPerSecondToGallonsPerMinute,
      convert.gallonsPerMinuteToCubicMetersPerSecond,
    ),
    metric: unit(
      'L/min',
      'liters per minute',
      ['lpm', 'l per min'],
      convert.cubicMetersPerSecondToLitersPerMinute,
      convert.litersPerMinuteToCubicMetersPerSecond,
    ),
    digits: 'three',
  },
  /** m³/s: air. */
  airFlow: {
    us: unit(
      'ft³/min',
      'cubic feet per minute',
      ['ft3/min', 'cfm'],
      (cubicMetersPerSecond) => (cubicMetersPerSecond / convert.feetToMeters(1) ** 3) * 60,
      (cubicFeetPerMinute) => (cubicFeetPerMinute * convert.feetToMeters(1) ** 3) / 60,
    ),
    metric: unit(
      'm³/h',
      'cubic meters per hour',
      ['m3/h'],
      (cubicMetersPerSecond) => cubicMetersPerSecond * 3600,
      (cubicMetersPerHour) => cubicMetersPerHour / 3600,
    ),
    digits: 'three',
  },
  /** Pa. */
  pressure: {
    us: unit('psi', 'pounds per square inch', ['psig'], convert.pascalsToPsi, convert.psiToPascals),
    metric: unit('kPa', 'kilopascals', [], convert.pascalsToKilopascals, convert.kilopascalsToPascals),
    digits: 'three',
  },
  /** m: a part, a bore, a tire. */
  length: {
    us: unit('in', 'inches', ['inch', 'inches', '"', '″'], convert.metersToInches, convert.inchesToMeters),
    metric: unit(
      'mm',
      'millimeters',
      ['millimeter'],
      convert.metersToMillimeters,
      convert.millimetersToMeters,
    ),
    digits: 'three',
  },
  /** m: a line, a rise. */
  height: {
    us: unit('ft', 'feet', ['foot', 'feet', "'", '′'], convert.metersToFeet, convert.feetToMeters),
    metric: unit('m', 'meters', ['meter', 'meters']),
    digits: 'three',
  },
  /** m: a road. */
  distance: {
    us: unit('mi', 'miles', ['mile', 'miles'], convert.metersToMiles, convert.milesToMeters),
    metric: unit('km', 'kilometers', ['kilometer'], convert.metersToKilometers, convert.kilometersToMeters),
    digits: 'three',
  },
  /** m²: the face of a cooler. */
  area: {
    us: unit(
      'in²',
      'square inches',
      ['in2', 'sq in', 'sqin'],
      convert.squareMetersToSquareInches,
      convert.squareInchesToSquareMeters,
    ),
    metric: unit(
      'cm²',
      'square centimeters',
      ['cm2', 'sq cm'],
      (squareMeters) => squareMeters * 10_000,
      (shown) => shown / 10_000,
    ),
    digits: 'three',
  },
  /** m²: drag area. */
  dragArea: {
    us: unit(
      'ft²',
      'square feet',
      ['ft2', 'sq ft', 'sqft'],
      convert.squareMetersToSquareFeet,
      convert.squareFeetToSquareMeters,
    ),
    metric: unit('m²', 'square meters', ['m2', 'sq m']),
    digits: 'three',
  },
  /** m³: fluid. */
  volume: {
    us: unit(
      'qt',
      'quarts',
      ['quart', 'quarts', 'qts'],
      convert.cubicMetersToQuarts,
      convert.quartsToCubicMeters,
    ),
    metric: unit(
      'L',
      'liters',
      ['liter', 'liters', 'litre', 'litres'],
      convert.cubicMetersToLiters,
      convert.litersToCubicMeters,
    ),
    digits: 'three',
  },
  /** Rise over run, 0.06 for 6 %. */
  grade: both(percent),
  /** A share, 0.25 for 25 %. */
  share: both(percent),
  /** rev/min: an engine or a shaft. */
  rotation: both(unit('rpm', 'revolutions per minute', ['rev/min', 'r/min'])),
  /** A ratio or a plain count. */
  number: both(unit('', '')),
  /** s, shown in minutes. */
  minutes: both(minutesUnit),
  /** s, shown in hours. */
  hours: both(hoursUnit),
  /** s, shown as they are. */
  seconds: both(unit('s', 'seconds', ['sec', 'second', 'seconds'])),
} as const satisfies Record<string, QuantityDisplay>

export type Quantity = keyof typeof QUANTITIES

/** The unit a quantity wears in a system. */
export function displayUnit(quantity: Quantity, system: UnitSystem): DisplayUnit {
  return QUANTITIES[quantity][system]
}

/** What stands where there is no number. */
export const NO_FIGURE = '–'

/** Figure and unit do not part at the end of a line. */
const NO_BREAK_SPACE = '\u00a0'
const MINUS = '\u2212'

const roundSignificant = (value: number, digits: number): number =>
  value === 0 ? 0 : Number(value.toPrecision(digits))

/** Making a number format takes a hundred times as long as using it, and a moved slider prints hundreds of numbers. */
const DECIMAL_FORMATS = new Map<number, Intl.NumberFormat>()

function decimalFormat(decimals: number): Intl.NumberFormat {
  const known = DECIMAL_FORMATS.get(decimals)
  if (known !== undefined) return known
  const made = new Intl.NumberFormat('en-US', {
    minimumFractionDigits: decimals,
    maximumFractionDigits: decimals,
  })
  DECIMAL_FORMATS.set(decimals, made)
  return made
}

const FIELD_FORMAT = new Intl.NumberFormat('en-US', { maximumFractionDigits: 9 })

/**
 * Zeros that carry meaning stay ("4.70"), thousands are separated, and a minus is a minus, not a hyphen. Numbers from
 * 1,000 up are rounded to three significant digits too: nobody knows the heat of a truck to the fourth.
 */
function printThree(value: number): string {
  // Nothing of a truck is that small: it is what a difference leaves of 0, and no number of zeros prints it.
  const rounded = Math.abs(value) < 1e-12 ? 0 : roundSignificant(value, 3)
  const magnitude = rounded === 0 ? 0 : Math.floor(Math.log10(Math.abs(rounded)))
  const decimals = rounded === 0 ? 0 : Math.max(0, 2 - magnitude)
  return decimalFormat(decimals).format(rounded)
}

const withMinus = (text: string) => text.replace(/^-/, MINUS)

/**
 * The figure of a number already in the unit it is shown in.
 * @param value - in the shown unit
 * @param digits - `whole` numbers or `three` significant digits
 */
export function printFigure(value: number, digits: 'whole' | 'three'): string {
  if (!Number.isFinite(value)) return NO_FIGURE
  // Adding 0 turns −0, and what rounds to it, into 0.
  if (digits === 'whole') return withMinus(decimalFormat(0).format(Math.round(value) + 0))
  return withMinus(printThree(value))
}

/**
 * A number of a quantity as figure and unit apart, for answers that are set large with a small unit.
 * @param value - in SI (temperatures °C); null, undefined and what is not finite print as a dash
 */
export function quantityParts(
  value: number | null | undefined,
  quantity: Quantity,
  system: UnitSystem,
): { figure: string; unit: string; spokenUnit: string } {
  const { unit: sign, spoken, toDisplay } = displayUnit(quantity, system)
  if (value === null || value === undefined || !Number.isFinite(value))
    return { figure: NO_FIGURE, unit: '', spokenUnit: '' }
  return {
    figure: printFigure(toDisplay(value), QUANTITIES[quantity].digits),
    unit: sign,
    spokenUnit: spoken,
  }
}

/**
 * A number of a quantity with its unit: temperatures in whole degrees, all else in three significant digits.
 * @param value - in SI (temperatures °C); null, undefined and what is not finite print as a dash
 * @example formatQuantity(100, 'temperature', 'us') // 212 °F
 */
export function formatQuantity(
  value: number | null | undefined,
  quantity: Quantity,
  system: UnitSystem,
): string {
  const parts = quantityParts(value, quantity, system)
  return parts.unit === '' ? parts.figure : `${parts.figure}${NO_BREAK_SPACE}${parts.unit}`
}

/**
 * A temperature difference with its sign, such as a margin or the effect of a change: +18 °F, −4 °F, 0 °F.
 * @param riseK - kelvin
 */
export function formatRise(riseK: number | null | undefined, system: UnitSystem): string {
  const text = formatQuantity(riseK, 'temperatureRise', system)
  const shown = riseK === null || riseK === undefined ? 0 : toShown(riseK, 'temperatureRise', system)
  return Math.round(shown) > 0 ? `+${text}` : text
}

/** SI to the number a person sees, unrounded. */
export function toShown(value: number, quantity: Quantity, system: UnitSystem): number {
  return displayUnit(quantity, system).toDisplay(value)
}

/**
 * A number of a quantity as text for a field: up to six significant digits, so that what was typed in this unit comes back
 * as it was typed, and no unit (the field shows it beside).
 */
export function fieldText(value: number | null, quantity: Quantity, system: UnitSystem): string {
  if (value === null || !Number.isFinite(value)) return ''
  const shown = roundSignificant(toShown(value, quantity, system), 6)
  // 1e-9 absorbs what is left of 0 after a conversion there and back (0 °F is −17.78 °C).
  return FIELD_FORMAT.format(Math.abs(shown) < 1e-9 ? 0 : shown)
}

/** What typed text means: a number in SI with the unit it was typed in, nothing at all, or why it is neither. */
export type Reading =
  { kind: 'number'; value: number; unit: string } | { kind: 'empty' } | { kind: 'unreadable'; reason: string }

const FIGURE = /^([+\-\u2212]?)\s*((?:\d{1,3}(?:[, \u00a0\u202f]\d{3})+|\d+)?(?:\.\d*)?)\s*(.*)$/

/**
 * Reads what was typed in a field: figures with or without thousands separators, and with or without a unit of either
 * system ("2450 kg" is understood in a field of pounds).
 */
export function readQuantity(text: string, quantity: Quantity, system: UnitSystem): Reading {
  const typed = text.trim()
  if (typed === '') return { kind: 'empty' }
  if (/^[+\-\u2212]?\d+,\d+$/.test(typed) && !/^[+\-\u2212]?\d{1,3},\d{3}$/.test(typed))
    return { kind: 'unreadable', reason: `“${typed}” can be read two ways: write 1.5 or 1,500.` }
  const match = FIGURE.exec(typed)
  const [, sign = '', figures = '', rest = ''] = match ?? []
  if (!match || !/\d/.test(figures)) return { kind: 'unreadable', reason: `“${typed}” is not a number.` }
  const number = Number(figures.replace(/[, \u00a0\u202f]/g, '')) * (sign === '' || sign === '+' ? 1 : -1)
  const spec = QUANTITIES[quantity]
  const candidates: DisplayUnit[] = [spec[system], spec[system === 'us' ? 'metric' : 'us']]
  const wanted = rest.trim().toLowerCase()
  const found =
    wanted === ''
      ? candidates[0]
      : candidates.find((candidate) => [candidate.unit.toLowerCase(), ...candidate.aliases].includes(wanted))
  if (!found)
    return {
      kind: 'unreadable',
      reason: `“${rest.trim()}” is not a unit this field knows: ${unitsOf(candidates)} will do.`,
    }
  return { kind: 'number', value: found.fromDisplay(number), unit: found.unit }
}

function unitsOf(candidates: readonly DisplayUnit[]): string {
  const signs = [...new Set(candidates.map((candidate) => candidate.unit))].filter((sign) => sign !== '')
  return signs.length === 0 ? 'a number alone' : signs.join(' or ')
}
