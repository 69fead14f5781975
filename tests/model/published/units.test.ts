import convert from 'convert-units'
import { evaluate } from 'mathjs'
import { describe, expect, it } from 'vitest'
import * as factor from '#shared/units/conversions'
import * as temperature from '#shared/units/temperature'
import { gnuUnits } from '../../support/gnu-units'
import { expectAbsolute, expectRelative, getPublished } from '../../support/published'
import { OURS, ourTemperature, pairsOf } from './units.checks'

/**
 * Every conversion of the program against three witnesses that share no code with it or with each other: mathjs,
 * convert-units, and GNU units where that program is installed (its stored answers are checked everywhere).
 */

type Ours = (value: number) => number
const { celsius, fahrenheit } = temperature

/** Our function, its opposite, mathjs' words, convert-units' words (null where that package has no such unit). */
const CONVERSIONS: [Ours, Ours, string, string, [string, string] | null][] = [
  [factor.poundsToKilograms, factor.kilogramsToPounds, 'lbm', 'kg', ['lb', 'kg']],
  [factor.milesPerHourToMetersPerSecond, factor.metersPerSecondToMilesPerHour, 'mi/h', 'm/s', ['m/h', 'm/s']],
  [
    factor.kilometersPerHourToMetersPerSecond,
    factor.metersPerSecondToKilometersPerHour,
    'km/h',
    'm/s',
    ['km/h', 'm/s'],
  ],
  [factor.horsepowerToWatts, factor.wattsToHorsepower, 'hp', 'W', null],
  [factor.footPoundsToNewtonMeters, factor.newtonMetersToFootPounds, 'ft lbf', 'N m', null],
  [factor.btuPerHourToWatts, factor.wattsToBtuPerHour, 'BTU/h', 'W', null],
  [
    factor.gallonsPerMinuteToCubicMetersPerSecond,
    factor.cubicMetersPerSecondToGallonsPerMinute,
    'gal/minute',
    'm^3/s',
    ['gal/min', 'm3/s'],
  ],
  [
    factor.litersPerMinuteToCubicMetersPerSecond,
    factor.cubicMetersPerSecondToLitersPerMinute,
    'l/minute',
    'm^3/s',
    ['l/min', 'm3/s'],
  ],
  [factor.quartsToCubicMeters, factor.cubicMetersToQuarts, 'qt', 'm^3', ['qt', 'm3']],
  [factor.litersToCubicMeters, factor.cubicMetersToLiters, 'l', 'm^3', ['l', 'm3']],
  [factor.psiToPascals, factor.pascalsToPsi, 'psi', 'Pa', ['psi', 'Pa']],
  [factor.kilopascalsToPascals, factor.pascalsToKilopascals, 'kPa', 'Pa', ['kPa', 'Pa']],
  [factor.inchesToMeters, factor.metersToInches, 'in', 'm', ['in', 'm']],
  [factor.millimetersToMeters, factor.metersToMillimeters, 'mm', 'm', ['mm', 'm']],
  [factor.feetToMeters, factor.metersToFeet, 'ft', 'm', ['ft', 'm']],
  [factor.milesToMeters, factor.metersToMiles, 'mi', 'm', ['mi', 'm']],
  [factor.kilometersToMeters, factor.metersToKilometers, 'km', 'm', ['km', 'm']],
  [factor.squareFeetToSquareMeters, factor.squareMetersToSquareFeet, 'sqft', 'm^2', ['ft2', 'm2']],
  [factor.squareInchesToSquareMeters, factor.squareMetersToSquareInches, 'sqin', 'm^2', ['in2', 'm2']],
  [factor.rpmToRadiansPerSecond, factor.radiansPerSecondToRpm, 'cycle/minute', 'rad/s', null],
]

const VALUES = [0, 1, 0.0317, 42, 1234.5, 8.2e5]

const mathjsConverts = (value: number, from: string, to: string) =>
  Number(evaluate(`number(${value} ${from}, ${to})`))

describe('conversions against mathjs and convert-units', () => {
  it.each(CONVERSIONS)('%o', (to, back, from, into, other) => {
    for (const value of VALUES) {
      // mathjs carries hp and psi to ten digits.
      expectRelative(to(value), mathjsConverts(value, from, into), 1e-10, `${from} to ${into}, mathjs`)
      expectRelative(back(to(value)), value, 1e-14, `${into} back to ${from}`)
      if (other !== null) {
        const [one, two] = other as [convert.Unit, convert.Unit]
        // convert-units carries six to eight digits: a pound of 0.453592 kg, areas through the US survey foot.
        expectRelative(to(value), convert(value).from(one).to(two), 1e-6, `${from} to ${into}, convert-units`)
      }
    }
  })

  it('has a row for every function of the module', () => {
    const rows = new Set<unknown>(CONVERSIONS.flatMap(([to, back]) => [to, back]))
    const missing = Object.entries(factor)
      .filter(([, value]) => typeof value === 'function' && !rows.has(value))
      .map(([name]) => name)
    expect(missing).toEqual([])
  })

  it('converts temperatures as convert-units does, and differences without the offset', () => {
    for (const value of [-40, 0, 32, 79.444, 175, 250]) {
      expectAbsolute(
        temperature.fahrenheitToCelsius(fahrenheit(value)),
        convert(value).from('F').to('C'),
        1e-9,
      )
      expectAbsolute(temperature.celsiusToFahrenheit(celsius(value)), convert(value).from('C').to('F'), 1e-9)
      expectAbsolute(temperature.celsiusToKelvin(celsius(value)), convert(value).from('C').to('K'), 1e-9)
      expectAbsolute(
        temperature.fahrenheitToKelvin(fahrenheit(value)),
        Number(evaluate(`number(${value} degF, K)`)),
        1e-9,
      )
      expectAbsolute(
        temperature.differenceKToF(temperature.differenceK(value)),
        temperature.celsiusToFahrenheit(celsius(value)) - temperature.celsiusToFahrenheit(celsius(0)),
        1e-9,
      )
    }
  })
})

describe('conversions against GNU units itself', () => {
  it.runIf(gnuUnits.available)('gives the stored answers, and ours', () => {
    for (const { from, to, value } of pairsOf(getPublished('units-factors'))) {
      const live = gnuUnits.convert(from, to)
      expectRelative(live, value, 1e-12, `stored ${from} to ${to}`)
      const ours = OURS[`${from} -> ${to}`]
      if (typeof ours === 'object') expectRelative(ours.to(1), live, 1e-12, `${from} to ${to}`)
    }
    for (const { from, to, value } of pairsOf(getPublished('units-temperatures'))) {
      const live = gnuUnits.convert(from, to)
      expectAbsolute(live, value, 1e-11, `stored ${from} to ${to}`)
      expectAbsolute(ourTemperature(from, to), live, 1e-11, `${from} to ${to}`)
    }
  })
})
