/**
 * Temperatures and temperature differences are separate types: 10 °C of air is 50 °F, 10 K of rise is 18 °F. A bare
 * number becomes one of them by naming it (`celsius(93.3)`), so a rise can not be passed where a reading is meant.
 */
declare const kind: unique symbol
type Branded<Kind extends string> = number & { readonly [kind]: Kind }

export type TemperatureK = Branded<'absolute temperature, K'>
export type TemperatureC = Branded<'absolute temperature, °C'>
export type TemperatureF = Branded<'absolute temperature, °F'>
export type DifferenceK = Branded<'temperature difference, K'>
export type DifferenceF = Branded<'temperature difference, °F'>

/**
 * 0 °C in kelvin [K]. Exact: definition of the Celsius temperature.
 * Source: BIPM, The International System of Units, 9th ed. (2019), section 2.3.1.
 */
export const ZERO_CELSIUS_K = 273.15

/**
 * Fahrenheit degrees per kelvin, and the Fahrenheit reading at 0 °C. Exact.
 * Source: NIST Special Publication 811 (2008), appendix B.8, "degree Fahrenheit".
 */
const FAHRENHEIT_PER_KELVIN = 1.8
const FAHRENHEIT_AT_ZERO_CELSIUS = 32

/** Names a bare number as an absolute temperature in kelvin. */
export const kelvin = (value: number) => value as TemperatureK
/** Names a bare number as an absolute temperature in °C. */
export const celsius = (value: number) => value as TemperatureC
/** Names a bare number as an absolute temperature in °F. */
export const fahrenheit = (value: number) => value as TemperatureF
/** Names a bare number as a temperature difference in kelvin (or Celsius degrees). */
export const differenceK = (value: number) => value as DifferenceK
/** Names a bare number as a temperature difference in Fahrenheit degrees. */
export const differenceF = (value: number) => value as DifferenceF

/** °C to K. */
export const celsiusToKelvin = (value: TemperatureC) => kelvin(value + ZERO_CELSIUS_K)
/** K to °C. */
export const kelvinToCelsius = (value: TemperatureK) => celsius(value - ZERO_CELSIUS_K)
/** °F to °C. */
export const fahrenheitToCelsius = (value: TemperatureF) =>
  celsius((value - FAHRENHEIT_AT_ZERO_CELSIUS) / FAHRENHEIT_PER_KELVIN)
/** °C to °F. */
export const celsiusToFahrenheit = (value: TemperatureC) =>
  fahrenheit(value * FAHRENHEIT_PER_KELVIN + FAHRENHEIT_AT_ZERO_CELSIUS)
/** °F to K. */
export const fahrenheitToKelvin = (value: TemperatureF) => celsiusToKelvin(fahrenheitToCelsius(value))
/** K to °F. */
export const kelvinToFahrenheit = (value: TemperatureK) => celsiusToFahrenheit(kelvinToCelsius(value))
/** A difference in K as Fahrenheit degrees. */
export const differenceKToF = (value: DifferenceK) => differenceF(value * FAHRENHEIT_PER_KELVIN)
/** A difference in Fahrenheit degrees as K. */
export const differenceFToK = (value: DifferenceF) => differenceK(value / FAHRENHEIT_PER_KELVIN)
