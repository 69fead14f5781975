import { describe, it } from 'vitest'
import { airDensity, pressureAtAltitude } from '#shared/heat/air'
import { expectRelative } from '../../support/published'
import { psychrolib } from '../../support/untyped-packages'

/**
 * PsychroLib, an implementation of the psychrometrics chapter of the ASHRAE Handbook of Fundamentals (2017), is the
 * witness: it shares no code with ours and takes its constants from another book.
 */
describe('air against PsychroLib', () => {
  psychrolib.SetUnitSystem(psychrolib.SI)
  const altitudes = [-400, 0, 168, 500, 1000, 1609, 2500, 3300, 4500, 6000]

  it.each(altitudes)('pressure of the standard atmosphere at %d m', (altitudeM) => {
    // ASHRAE writes the exponent as 5.2559, ISO 2533 as 5.25588.
    expectRelative(pressureAtAltitude(altitudeM), psychrolib.GetStandardAtmPressure(altitudeM), 5e-6)
  })

  it.each(altitudes)('density of dry air at %d m from -30 to 50 °C', (altitudeM) => {
    const pressure = psychrolib.GetStandardAtmPressure(altitudeM)
    for (const airC of [-30, -10, 0, 15, 25, 38, 50])
      // Gas constants 287.05 and 287.042 J/(kg K).
      expectRelative(airDensity(pressure, airC), psychrolib.GetDryAirDensity(airC, pressure), 5e-5)
  })

  it('is the density of moist air within 1.6 % up to 35 °C and 60 % humidity, and never below it', () => {
    for (const [airC, humidity] of [
      [15, 0.5],
      [25, 0.6],
      [35, 0.5],
      [35, 0.6],
    ] as const) {
      const pressure = psychrolib.GetStandardAtmPressure(300)
      const ratio = psychrolib.GetHumRatioFromRelHum(airC, humidity, pressure)
      const moist = psychrolib.GetMoistAirDensity(airC, ratio, pressure)
      // Half of 1.6 % either side of 0.8 %: the dry air of the model is the denser one.
      expectRelative(airDensity(pressure, airC) / moist, 1.008, 0.008)
    }
  })
})
