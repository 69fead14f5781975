import * as factor from '#shared/units/conversions'
import {
  celsius,
  celsiusToFahrenheit,
  celsiusToKelvin,
  differenceF,
  differenceFToK,
  fahrenheit,
  fahrenheitToCelsius,
  kelvin,
  kelvinToCelsius,
} from '#shared/units/temperature'
import {
  expectAbsolute,
  expectRelative,
  type PublishedEntry,
  type TopicChecks,
} from '../../support/published'

type Conversion = (value: number) => number

/** Our conversion for each pair of GNU units names, and the other way; the pairs we have no need of, with the reason. */
export const OURS: Record<
  string,
  { to: Conversion; back: Conversion } | 'no such conversion in the program'
> = {
  '1 lb -> kg': { to: factor.poundsToKilograms, back: factor.kilogramsToPounds },
  '1 mph -> m/s': { to: factor.milesPerHourToMetersPerSecond, back: factor.metersPerSecondToMilesPerHour },
  '1 km/hr -> m/s': {
    to: factor.kilometersPerHourToMetersPerSecond,
    back: factor.metersPerSecondToKilometersPerHour,
  },
  '1 hp -> W': { to: factor.horsepowerToWatts, back: factor.wattsToHorsepower },
  '1 ft lbf -> N m': { to: factor.footPoundsToNewtonMeters, back: factor.newtonMetersToFootPounds },
  '1 btu/hr -> W': { to: factor.btuPerHourToWatts, back: factor.wattsToBtuPerHour },
  '1 gal/min -> m^3/s': {
    to: factor.gallonsPerMinuteToCubicMetersPerSecond,
    back: factor.cubicMetersPerSecondToGallonsPerMinute,
  },
  '1 liter/min -> m^3/s': {
    to: factor.litersPerMinuteToCubicMetersPerSecond,
    back: factor.cubicMetersPerSecondToLitersPerMinute,
  },
  '1 quart -> m^3': { to: factor.quartsToCubicMeters, back: factor.cubicMetersToQuarts },
  '1 liter -> m^3': { to: factor.litersToCubicMeters, back: factor.cubicMetersToLiters },
  '1 psi -> Pa': { to: factor.psiToPascals, back: factor.pascalsToPsi },
  '1 kPa -> Pa': { to: factor.kilopascalsToPascals, back: factor.pascalsToKilopascals },
  '1 inch -> m': { to: factor.inchesToMeters, back: factor.metersToInches },
  '1 mm -> m': { to: factor.millimetersToMeters, back: factor.metersToMillimeters },
  '1 ft -> m': { to: factor.feetToMeters, back: factor.metersToFeet },
  '1 mile -> m': { to: factor.milesToMeters, back: factor.metersToMiles },
  '1 km -> m': { to: factor.kilometersToMeters, back: factor.metersToKilometers },
  '1 ft^2 -> m^2': { to: factor.squareFeetToSquareMeters, back: factor.squareMetersToSquareFeet },
  '1 in^2 -> m^2': { to: factor.squareInchesToSquareMeters, back: factor.squareMetersToSquareInches },
  '1 degF -> K': {
    to: (value) => differenceFToK(differenceF(value)),
    back: (value) => value / differenceFToK(differenceF(1)),
  },
  '1 rpm -> radian/s': { to: factor.rpmToRadiansPerSecond, back: factor.radiansPerSecondToRpm },
  '1 cSt -> m^2/s': 'no such conversion in the program',
  '1 metrichorsepower -> W': 'no such conversion in the program',
  '1 inHg -> Pa': 'no such conversion in the program',
  '1 btu/(hr degF) -> W/K': 'no such conversion in the program',
  '1 lb/ft^3 -> kg/m^3': 'no such conversion in the program',
}

/** Every pair of an entry as `FROM -> TO` with GNU units' value. */
export function pairsOf(entry: PublishedEntry): { from: string; to: string; value: number }[] {
  const pairs = entry.inputs['convert'] as [string, string][]
  const values = entry.expected['value'] as number[]
  return pairs.map(([from, to], index) => ({ from, to, value: values[index] ?? Number.NaN }))
}

/** Our answer to a temperature question in GNU units' words, such as `tempF(175)` to `tempC`. */
export function ourTemperature(from: string, to: string): number {
  const found = /^temp([FCK])\((-?[\d.]+)\)$/.exec(from)
  const reading = Number(found?.[2])
  const asked = `${found?.[1]} to ${to === 'K' ? 'tempK' : to}`
  if (asked === 'F to tempC') return fahrenheitToCelsius(fahrenheit(reading))
  if (asked === 'C to tempF') return celsiusToFahrenheit(celsius(reading))
  if (asked === 'C to tempK') return celsiusToKelvin(celsius(reading))
  if (asked === 'K to tempC') return kelvinToCelsius(kelvin(reading))
  throw new Error(`no conversion for ${from} to ${to}`)
}

export const units: TopicChecks = {
  checks: {
    'units-1': (entry) => {
      const ours: Record<string, number> = {
        '30000 Btu/h in kW': factor.btuPerHourToWatts(30_000) / 1000,
        '1 Btu/(h F) in W/K': factor.btuPerHourToWatts(1) / differenceFToK(differenceF(1)),
        '1 US gal/min in L/min': factor.cubicMetersPerSecondToLitersPerMinute(
          factor.gallonsPerMinuteToCubicMetersPerSecond(1),
        ),
        '1 Btu/(lb F) in J/kgK':
          (factor.btuPerHourToWatts(1) * 3600) / factor.poundsToKilograms(1) / differenceFToK(differenceF(1)),
        '1 Btu/(h ft F) in W/mK':
          factor.btuPerHourToWatts(1) / factor.feetToMeters(1) / differenceFToK(differenceF(1)),
        '1 lb/ft3 in kg/m3': factor.poundsToKilograms(1) / factor.feetToMeters(1) ** 3,
        '20 psi in kPa': factor.pascalsToKilopascals(factor.psiToPascals(20)),
        '175 F in C': fahrenheitToCelsius(fahrenheit(175)),
        '1 hp in kW': factor.horsepowerToWatts(1) / 1000,
        '1 ft lbf in N m': factor.footPoundsToNewtonMeters(1),
      }
      for (const [question, wanted] of Object.entries(entry.expected))
        // Stored to six digits: half a unit of the last is 5e-6 of the smallest leading digit.
        expectRelative(ours[question] ?? Number.NaN, wanted as number, 5e-6, question)
    },
    'units-factors': (entry) => {
      for (const { from, to, value } of pairsOf(entry)) {
        const ours = OURS[`${from} -> ${to}`]
        if (ours === undefined) throw new Error(`${from} -> ${to} is in no table`)
        if (ours === 'no such conversion in the program') continue
        expectRelative(ours.to(1), value, entry.tolerance, `${from} to ${to}`)
        expectRelative(ours.back(value), 1, entry.tolerance, `${to} back to ${from}`)
        expectRelative(ours.to(37.25), 37.25 * value, entry.tolerance, `37.25 of ${from}`)
      }
    },
    'units-temperatures': (entry) => {
      for (const { from, to, value } of pairsOf(entry))
        expectAbsolute(ourTemperature(from, to), value, 1e-11, `${from} to ${to}`)
    },
  },
  notApplicable: {},
}
