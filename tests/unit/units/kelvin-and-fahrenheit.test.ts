import { describe, expect, it } from 'vitest'
import { fahrenheit, fahrenheitToKelvin, kelvin, kelvinToFahrenheit } from '#shared/units/temperature'

// NIST SP 811 (2008), B.8: t/°F = 1.8 (T/K) − 459.67, exact.
describe('kelvin and degrees Fahrenheit', () => {
  it.each([
    [273.15, 32],
    [310.927777777778, 100],
    [394.261111111111, 250],
    [233.15, -40],
  ])('%d K is %d °F, both ways', (inKelvin, inFahrenheit) => {
    expect(kelvinToFahrenheit(kelvin(inKelvin))).toBeCloseTo(inFahrenheit, 9)
    expect(fahrenheitToKelvin(fahrenheit(inFahrenheit))).toBeCloseTo(inKelvin, 9)
  })
})
