import { ageingFactor, referenceDamageRate, wallChartDistance } from '#shared/heat/fluid-life'
import { DEFAULTS } from '#shared/heat/resolve'
import { metersToMiles, milesPerHourToMetersPerSecond, milesToMeters } from '#shared/units/conversions'
import { fahrenheit, fahrenheitToCelsius } from '#shared/units/temperature'
import {
  expectAbsolute,
  expectDeviation,
  expectRelative,
  expected,
  expecteds,
  inputs,
  type TopicChecks,
} from '../../support/published'

const life = DEFAULTS.fluidLife
const celsiusOf = (readingF: number) => fahrenheitToCelsius(fahrenheit(readingF))
const at = (list: number[], index: number) => list[index] ?? Number.NaN
/** The model writes 175 °F as 79.444 °C and 20 °F as 11.111 K: over 140 °F that is 0.0001 of a halving. */
const ROUNDED_CONSTANTS = 1e-4

const NO_ARRHENIUS =
  'the model ages fluid by the trade rule of a fixed halving step, not by an activation energy'

export const fluidLife: TopicChecks = {
  checks: {
    // The printed table rounds the rule down: by 10 % at 212 °F, by 4 % at 235, 275, 295 and 315 °F.
    'life-table': (entry) => {
      const deviations = [0, 0, 0.1096, 0.0417, 0, 0.0417, 0.0417, 0.0417]
      inputs(entry, 'T_F').forEach((oilF, index) => {
        const miles = metersToMiles(wallChartDistance(life, celsiusOf(oilF)))
        expectRelative(
          miles,
          at(expecteds(entry, 'rule_miles'), index),
          ROUNDED_CONSTANTS,
          `rule at ${oilF} °F`,
        )
        expectDeviation(
          miles,
          at(expecteds(entry, 'miles'), index),
          at(deviations, index),
          `table at ${oilF} °F`,
        )
      })
    },
    'life-rule': (entry) => {
      inputs(entry, 'T_F').forEach((oilF, index) =>
        expectRelative(
          metersToMiles(wallChartDistance(life, celsiusOf(oilF))),
          at(expecteds(entry, 'rule_miles'), index),
          ROUNDED_CONSTANTS,
          `rule at ${oilF} °F`,
        ),
      )
      for (const oilF of [-40, 32, 120, 174.9])
        expectRelative(
          metersToMiles(wallChartDistance(life, celsiusOf(oilF))),
          at(expecteds(entry, 'rule_miles'), 0),
          1e-9,
          `no longer at ${oilF} °F`,
        )
    },
    // Only the rule's column is ours; the Arrhenius column beside it shows how far the two part.
    'life-arr': (entry) => {
      const reference = ageingFactor(life, celsiusOf(200))
      inputs(entry, 'T_F').forEach((oilF, index) =>
        expectRelative(
          ageingFactor(life, celsiusOf(oilF)) / reference,
          at(expecteds(entry, 'rule_rel'), index),
          ROUNDED_CONSTANTS,
          `ageing at ${oilF} °F against 200 °F`,
        ),
      )
    },
    // Miles at a speed are hours: at the rule's own speed the model's count in time is the trade's count in distance.
    'life-mix': (entry) => {
      const hoursAt = entry.inputs['hours_at_F'] as Record<string, number>
      const pace = milesPerHourToMetersPerSecond(entry.inputs['miles_per_h'] as number)
      const lifeAtPace = { ...life, referenceSpeedMps: pace }
      let used = 0
      for (const [oilF, hours] of Object.entries(hoursAt))
        used += hours * 3600 * referenceDamageRate(lifeAtPace) * ageingFactor(life, celsiusOf(Number(oilF)))
      expectRelative(used, expected(entry, 'life_used'), ROUNDED_CONSTANTS, 'share of life used')
      expectAbsolute(life.referenceLifeM, milesToMeters(100_000), 1e-6, 'reference life')
    },
  },
  notApplicable: { 'life-Ea': NO_ARRHENIUS, 'life-10C': NO_ARRHENIUS },
}
