import convertUnits from 'convert-units'
import * as convert from '../units/conversions'
import type { Quantity, UnitSystem } from '../units/display'
import { displayUnit } from '../units/display'
import { differenceF, differenceFToK } from '../units/temperature'
import type { TypedUnit } from '../units/parse-quantity'

/** The units people type, and the words they use for them. */

/** Base of a quantity in the words of mathjs; empty for a number alone. */
export type Dimension =
  '' | 'kg' | 'm' | 'm^2' | 'm^3' | 's' | 'm/s' | 'm^3/s' | 'Pa' | 'W' | 'N m' | 'W/K' | 'K' | 'rad/s'

export interface UnitOfMeasure extends TypedUnit {
  dimension: Dimension
  /** One of it, in the unit of its dimension. */
  size: number
  /**
   * Lower-case words for it in plain characters. A space is any space, `/` may be "per", `~` is a space, dot, star, hyphen
   * or nothing.
   */
  words: readonly string[]
}

/** What each quantity is made of. */
export const DIMENSIONS: Record<Quantity, Dimension> = {
  temperature: 'K',
  temperatureRise: 'K',
  mass: 'kg',
  speed: 'm/s',
  airSpeed: 'm/s',
  torque: 'N m',
  power: 'W',
  heatRate: 'W',
  conductance: 'W/K',
  volumeFlow: 'm^3/s',
  airFlow: 'm^3/s',
  pressure: 'Pa',
  length: 'm',
  height: 'm',
  distance: 'm',
  area: 'm^2',
  dragArea: 'm^2',
  volume: 'm^3',
  grade: '',
  share: '',
  rotation: 'rad/s',
  number: '',
  minutes: 's',
  hours: 's',
  seconds: 's',
}

/** How a dimension is called when it is not the one that was asked for. */
export const DIMENSION_WORDS: Record<Dimension, string> = {
  '': 'a number alone',
  kg: 'a weight',
  m: 'a length',
  'm^2': 'an area',
  'm^3': 'a volume',
  s: 'a length of time',
  'm/s': 'a speed',
  'm^3/s': 'a flow',
  Pa: 'a pressure',
  W: 'a power or a heat flow',
  'N m': 'a torque',
  'W/K': 'a heat flow per degree',
  K: 'a temperature',
  'rad/s': 'a shaft speed',
}

/** What a field of the quantity needs. */
export const NEEDS: Record<Quantity, string> = {
  temperature: 'a temperature',
  temperatureRise: 'a temperature difference',
  mass: 'a weight',
  speed: 'a speed',
  airSpeed: 'an air speed',
  torque: 'a torque',
  power: 'a power',
  heatRate: 'a heat flow',
  conductance: 'a heat flow per degree',
  volumeFlow: 'a flow',
  airFlow: 'an air flow',
  pressure: 'a pressure',
  length: 'a length',
  height: 'a length',
  distance: 'a distance',
  area: 'an area',
  dragArea: 'an area',
  volume: 'a volume',
  grade: 'a grade',
  share: 'a percentage',
  rotation: 'a shaft speed',
  number: 'a number without a unit',
  minutes: 'a length of time',
  hours: 'a length of time',
  seconds: 'a length of time',
}

const unit = (sign: string, dimension: Dimension, size: number, ...words: string[]): UnitOfMeasure => ({
  sign,
  dimension,
  size,
  words: words.length === 0 ? [sign.toLowerCase()] : words,
  fromSi: (si) => si / size,
})

/** A unit the program prints in: its own conversion both ways is the exact edge, whatever is reckoned in between. */
const own = (
  quantity: Quantity,
  system: UnitSystem,
  dimension: Dimension,
  ...words: string[]
): UnitOfMeasure => {
  const { unit: sign, fromDisplay, toDisplay } = displayUnit(quantity, system)
  return { sign, dimension, size: fromDisplay(1), words, fromSi: toDisplay }
}

/** Shaft speeds are kept in rev/min, as the trade speaks of them, and reckoned with in rad/s. */
const rotation = (sign: string, rpm: number, ...words: string[]): UnitOfMeasure => ({
  ...unit(sign, 'rad/s', convert.rpmToRadiansPerSecond(rpm), ...words),
  fromSi: (keptRpm) => keptRpm / rpm,
})

/** A fixed metric conversion, which convert-units carries exactly. */
const fixed = (from: convertUnits.Unit, to: convertUnits.Unit) => convertUnits(1).from(from).to(to)

const FOOT_M3 = convert.feetToMeters(1) ** 3
const RISE_PER_F = differenceFToK(differenceF(1))
/** Standard acceleration of free fall: 9.80665 m/s², exact (3rd General Conference on Weights and Measures, 1901). */
const KILOGRAM_FORCE_N = 9.80665

/**
 * Every unit that is understood, the words of one never those of another. Factors not from `shared/units` or convert-units
 * follow from definitions: short ton 2000 lb, gallon 4 qt, pint ½ qt, fluid ounce 1/32 qt (NIST SP 811, appendix B.8);
 * metric horsepower 75 kgf·m/s (the same, "horsepower (metric)").
 */
export const UNITS: readonly UnitOfMeasure[] = [
  own('mass', 'us', 'kg', 'lb', 'lbs', 'lbm', 'pound', 'pounds', '#'),
  own('mass', 'metric', 'kg', 'kg', 'kgs', 'kilogram', 'kilograms', 'kilo', 'kilos'),
  unit('g', 'kg', fixed('g', 'kg'), 'g', 'gram', 'grams'),
  unit('t', 'kg', fixed('mt', 'kg'), 't', 'tonne', 'tonnes', 'metric ton', 'metric tons'),
  unit('ton', 'kg', convert.poundsToKilograms(2000), 'ton', 'tons', 'short ton', 'short tons'),
  unit('oz', 'kg', convert.poundsToKilograms(1 / 16), 'oz', 'ounce', 'ounces'),

  own('length', 'us', 'm', 'in', 'inch', 'inches', '"'),
  own('length', 'metric', 'm', 'mm', 'millimeter', 'millimeters', 'millimetre', 'millimetres'),
  own('height', 'us', 'm', 'ft', 'foot', 'feet', "'"),
  own('height', 'metric', 'm', 'm', 'meter', 'meters', 'metre', 'metres'),
  own('distance', 'us', 'm', 'mi', 'mile', 'miles'),
  own('distance', 'metric', 'm', 'km', 'kilometer', 'kilometers', 'kilometre', 'kilometres'),
  unit('cm', 'm', fixed('cm', 'm'), 'cm', 'centimeter', 'centimeters', 'centimetre', 'centimetres'),
  unit('yd', 'm', convert.feetToMeters(3), 'yd', 'yds', 'yard', 'yards'),

  own('area', 'us', 'm^2', 'in2', 'in^2', 'sq in', 'sq. in', 'sqin', 'square inch', 'square inches'),
  own('area', 'metric', 'm^2', 'cm2', 'cm^2', 'sq cm', 'square centimeters'),
  own('dragArea', 'us', 'm^2', 'ft2', 'ft^2', 'sq ft', 'sq. ft', 'sqft', 'square foot', 'square feet'),
  own('dragArea', 'metric', 'm^2', 'm2', 'm^2', 'sq m', 'square meter', 'square meters'),
  unit('mm²', 'm^2', fixed('mm2', 'm2'), 'mm2', 'mm^2', 'sq mm'),

  own('volume', 'us', 'm^3', 'qt', 'qts', 'quart', 'quarts'),
  own('volume', 'metric', 'm^3', 'l', 'liter', 'liters', 'litre', 'litres'),
  unit('gal', 'm^3', convert.quartsToCubicMeters(4), 'gal', 'gals', 'gallon', 'gallons'),
  unit('pt', 'm^3', convert.quartsToCubicMeters(1 / 2), 'pt', 'pts', 'pint', 'pints'),
  unit('fl oz', 'm^3', convert.quartsToCubicMeters(1 / 32), 'fl~oz', 'fl. oz', 'fluid ounce', 'fluid ounces'),
  unit('mL', 'm^3', fixed('ml', 'm3'), 'ml', 'cc', 'cm3', 'cm^3', 'milliliter', 'milliliters'),
  unit('m³', 'm^3', 1, 'm3', 'm^3', 'cubic meter', 'cubic meters'),
  unit('in³', 'm^3', convert.inchesToMeters(1) ** 3, 'in3', 'in^3', 'cu in', 'cubic inch', 'cubic inches'),
  unit('ft³', 'm^3', FOOT_M3, 'ft3', 'ft^3', 'cu ft', 'cubic foot', 'cubic feet'),

  unit('s', 's', 1, 's', 'sec', 'secs', 'second', 'seconds'),
  unit('min', 's', fixed('min', 's'), 'min', 'mins', 'minute', 'minutes'),
  unit('h', 's', fixed('h', 's'), 'h', 'hr', 'hrs', 'hour', 'hours'),

  own('speed', 'us', 'm/s', 'mph', 'mi/h', 'mi/hr', 'mile/hour', 'miles/hour'),
  own('speed', 'metric', 'm/s', 'km/h', 'km/hr', 'kmh', 'kph', 'kilometers/hour'),
  own('airSpeed', 'us', 'm/s', 'ft/min', 'fpm', 'feet/minute'),
  own('airSpeed', 'metric', 'm/s', 'm/s', 'mps', 'm/sec', 'meters/second'),
  unit('ft/s', 'm/s', convert.feetToMeters(1), 'ft/s', 'fps', 'ft/sec', 'feet/second'),

  own('volumeFlow', 'us', 'm^3/s', 'gal/min', 'gpm', 'gallons/minute', 'gallon/minute'),
  own('volumeFlow', 'metric', 'm^3/s', 'l/min', 'lpm', 'liters/minute', 'litres/minute'),
  own('airFlow', 'us', 'm^3/s', 'ft3/min', 'ft^3/min', 'cfm', 'cu ft/min', 'cubic feet/minute'),
  own('airFlow', 'metric', 'm^3/s', 'm3/h', 'm^3/h', 'm3/hr', 'cubic meters/hour'),
  unit('gal/h', 'm^3/s', convert.gallonsPerMinuteToCubicMetersPerSecond(1 / 60), 'gal/h', 'gal/hr', 'gph'),
  unit('qt/min', 'm^3/s', convert.quartsToCubicMeters(1 / 60), 'qt/min', 'qpm', 'quarts/minute'),
  unit('L/s', 'm^3/s', fixed('l/s', 'm3/s'), 'l/s', 'l/sec'),
  unit('L/h', 'm^3/s', fixed('l/h', 'm3/s'), 'l/h', 'l/hr', 'lph'),
  unit('m³/s', 'm^3/s', 1, 'm3/s', 'm^3/s'),

  own('pressure', 'us', 'Pa', 'psi', 'psig', 'lb/in2', 'lbs/in2', 'lbf/in2'),
  own('pressure', 'metric', 'Pa', 'kpa', 'kilopascal', 'kilopascals'),
  unit('bar', 'Pa', fixed('bar', 'Pa'), 'bar', 'bars'),
  unit('MPa', 'Pa', fixed('MPa', 'Pa'), 'mpa'),
  unit('Pa', 'Pa', 1, 'pa', 'pascal', 'pascals'),

  own('power', 'us', 'W', 'hp', 'bhp', 'horsepower'),
  own('power', 'metric', 'W', 'kw', 'kilowatt', 'kilowatts'),
  // Heat ratings are spoken of in BTU, meaning BTU per hour.
  own('heatRate', 'us', 'W', 'btu/h', 'btu/hr', 'btu/hour', 'btuh', 'btu'),
  unit('BTU/min', 'W', convert.btuPerHourToWatts(60), 'btu/min'),
  unit('W', 'W', 1, 'w', 'watt', 'watts'),
  unit('PS', 'W', 75 * KILOGRAM_FORCE_N, 'ps', 'metric hp', 'metric horsepower'),

  own('torque', 'us', 'N m', 'ft~lb', 'ft~lbs', 'ft~lbf', 'lb~ft', 'lbs~ft', 'lbf~ft', 'foot~pounds'),
  own('torque', 'metric', 'N m', 'n~m', 'newton meters'),
  unit('in·lb', 'N m', convert.footPoundsToNewtonMeters(1 / 12), 'in~lb', 'in~lbs', 'lb~in', 'in~lbf'),
  unit('kgf·m', 'N m', KILOGRAM_FORCE_N, 'kgf~m', 'kg~m', 'm~kg'),

  own('conductance', 'us', 'W/K', 'btu/h/f', 'btu/hr/f', 'btu/h/°f', 'btu/hr/°f'),
  own('conductance', 'metric', 'W/K', 'w/k', 'w/c', 'w/°c'),

  rotation('rpm', 1, 'rpm', 'rev/min', 'r/min', 'revs/min'),
  rotation('rev/s', 60, 'rev/s', 'rps', 'hz'),
  rotation('rad/s', convert.radiansPerSecondToRpm(1), 'rad/s'),

  unit('%', '', 0.01, '%', 'percent', 'pct', 'per cent'),
]

/** Words for a temperature, and for a difference of two. */
const FAHRENHEIT = ['°f', '° f', 'f', 'degf', 'deg f', 'fahrenheit', 'degrees f', 'degrees fahrenheit']
const CELSIUS = ['°c', '° c', 'c', 'degc', 'deg c', 'celsius', 'degrees c', 'degrees celsius']

/** Temperatures as differences: what is reckoned with. */
export const RISES: readonly UnitOfMeasure[] = [
  { ...own('temperatureRise', 'us', 'K', ...FAHRENHEIT), size: RISE_PER_F },
  own('temperatureRise', 'metric', 'K', ...CELSIUS),
  unit('K', 'K', 1, 'k', 'kelvin', 'kelvins'),
]
