import { expect } from 'vitest'
import { CASE, COOLANT, CONVERTER, SUMP } from '#shared/heat/balances'
import { integrate } from '#shared/heat/integrator'
import { DEFAULTS } from '#shared/heat/resolve'
import {
  cubicMetersPerSecondToGallonsPerMinute,
  cubicMetersPerSecondToLitersPerMinute,
  quartsToCubicMeters,
} from '#shared/units/conversions'
import {
  expectAbsolute,
  expectDeviation,
  expectRelative,
  expected,
  expecteds,
  input,
  inputs,
  type PublishedEntry,
  type TopicChecks,
} from '../../support/published'

/** Heat to the coolant over engine power: textbook engines are old and small, the model's ratio is of modern ones. */
function coolantHeat(modelRatio: number, measuredDeviation: number) {
  return (entry: PublishedEntry) => {
    const ratio = input(entry, 'coolant_fraction_of_fuel') / input(entry, 'brake_eff')
    expectRelative(ratio, expected(entry, 'Q_coolant_over_brake'), entry.tolerance, 'ratio of the book')
    expectDeviation(modelRatio, ratio, measuredDeviation, 'ratio of the model')
  }
}

const PLATE =
  'a plate correlation: the model has one fitted line for case and axle, whose bounds docs/sources.md derives'

export const cooling: TopicChecks = {
  checks: {
    'face-vel': (entry) => {
      // Dynamic pressure against core, condenser, grille and exit: the default share lies between open and crowded.
      inputs(entry, 'K_total').forEach((loss, index) =>
        expectRelative(
          Math.sqrt(input(entry, 'delta_Cp') / loss),
          expecteds(entry, 'Vface_over_Vveh')[index] ?? NaN,
          // Stored to six digits.
          3e-6,
          `K ${loss}`,
        ),
      )
      expect(DEFAULTS.stackRamFraction).toBeLessThanOrEqual(Math.max(...expecteds(entry, 'Vface_over_Vveh')))
      expect(DEFAULTS.stackRamFraction).toBeGreaterThanOrEqual(
        Math.min(...expecteds(entry, 'Vface_over_Vveh')),
      )
    },
    'flow-qt': (entry) =>
      inputs(entry, 'seconds').forEach((seconds, index) => {
        const flow = quartsToCubicMeters(input(entry, 'quarts')) / seconds
        expectRelative(
          cubicMetersPerSecondToLitersPerMinute(flow),
          expecteds(entry, 'L_min')[index] ?? NaN,
          3e-6,
          `a quart in ${seconds} s`,
        )
        expectRelative(
          cubicMetersPerSecondToGallonsPerMinute(flow),
          expecteds(entry, 'gpm')[index] ?? NaN,
          1e-9,
          `a quart in ${seconds} s`,
        )
      }),
    'eng-rajput-ci': coolantHeat(DEFAULTS.coolantHeatRatio.diesel, -0.3036),
    'eng-mathur-ci': coolantHeat(DEFAULTS.coolantHeatRatio.diesel, -0.225),
    'eng-mathur-si': coolantHeat(DEFAULTS.coolantHeatRatio.petrol, -0.1767),
    // Fluid and metal of a lumped gearbox, linear, so that the exact answer is a matrix exponential: a test of our
    // integrator, with the other two temperatures at rest.
    'ode-2node': (entry) => {
      const [fluid, metal] = [input(entry, 'C_fluid'), input(entry, 'C_metal')]
      const ambient = input(entry, 'T_a_C')
      const rates = (temperatures: Float64Array, out: Float64Array) => {
        const toMetal = input(entry, 'UA_fluid_metal') * (temperatures[SUMP]! - temperatures[CASE]!)
        out[SUMP] =
          (input(entry, 'Q_W') - toMetal - input(entry, 'UA_cooler') * (temperatures[SUMP]! - ambient)) /
          fluid
        out[CASE] = (toMetal - input(entry, 'UA_case') * (temperatures[CASE]! - ambient)) / metal
        out[CONVERTER] = 0
        out[COOLANT] = 0
      }
      const after = (durationS: number, tolerance: number) => {
        const temperatures = new Float64Array(4).fill(ambient)
        integrate(rates, temperatures, durationS, () => {}, tolerance)
        return temperatures
      }
      const tight = after(input(entry, 't_s'), 1e-6)
      expectAbsolute(tight[SUMP]!, expected(entry, 'T_fluid_C'), 1e-4, 'fluid')
      expectAbsolute(tight[CASE]!, expected(entry, 'T_metal_C'), 1e-4, 'metal')
      const asUsed = after(input(entry, 't_s'), 0.01)
      expectAbsolute(asUsed[SUMP]!, expected(entry, 'T_fluid_C'), 0.02, 'fluid at the step tolerance in use')
      expectAbsolute(asUsed[CASE]!, expected(entry, 'T_metal_C'), 0.02, 'metal at the step tolerance in use')
      const end = after(40 * Math.max(...expecteds(entry, 'tau_s')), 0.01)
      expectAbsolute(end[SUMP]!, expected(entry, 'T_fluid_inf_C'), 0.002, 'fluid in the end')
      expectAbsolute(end[CASE]!, expected(entry, 'T_metal_inf_C'), 0.002, 'metal in the end')
    },
  },
  notApplicable: {
    'nc-vert': PLATE,
    'fc-lam': PLATE,
    'fc-alt-turb': PLATE,
    'flow-table':
      "flow at the unknown supply pressure of a maker's flow-test machine: only its rise with temperature is common",
  },
}
