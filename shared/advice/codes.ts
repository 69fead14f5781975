import { WARNING_MEANINGS } from '../heat'
import type { WarningCode } from '../heat/types'
import type { Quantity } from '../units/display'

/** Every code of advice, in one place. Those of the model's warnings keep their name and their meaning. */

/** What the workbench adds to the model's own warnings. */
const OWN_MEANINGS = {
  rating_impossible: 'A rating is more than its air and oil can carry.',
  rating_lacks_conditions: 'A heat rating stands without the conditions it holds at.',
  weight_class_rating: 'A weight class stands where a heat rating is needed.',
  cannot_climb: 'The truck cannot drive this.',
  no_cooler_fixes_this: 'No cooler fixes this: lock it, drop a gear, slow down.',
  cooler_needed: 'Over its limit, and another cooler would hold it.',
  no_cooler_needed: 'No cooler needed.',
  front_cores_heat_coolant: 'The coolers in front heat the engine’s coolant.',
  heat_up_pan_down: 'More heat is made, and the pan gets cooler.',
  lockup_unproven: 'Much depends on lock-up, and nobody has seen it lock.',
  lockup_contradicted: 'Lock-up was seen, yet something on the sheet prevents it.',
} as const

export type AdviceCode = WarningCode | keyof typeof OWN_MEANINGS

/** Every code with what it means in general. */
export const ADVICE_MEANINGS: Record<AdviceCode, string> = { ...WARNING_MEANINGS, ...OWN_MEANINGS }

/** Every code, the order in which equally urgent advice is read: what forbids an answer first, what is good news last. */
export const ADVICE_ORDER: readonly AdviceCode[] = [
  'rating_impossible',
  'cannot_climb',
  'weight_class_rating',
  'rating_lacks_conditions',
  'engine_power_exceeds_torque',
  'lockup_contradicted',
  'coolant_over_limit',
  'coolant_hot',
  'no_cooler_fixes_this',
  'cooler_needed',
  'lockup_unproven',
  'unlocked_other_gear_cooler',
  'hot_line_over_limit_pan_fine',
  'cooler_flow_low',
  'speed_not_held',
  'front_cores_heat_coolant',
  'coolant_heats_oil',
  'bypass_hides_cooler',
  'over_cooled',
  'heat_up_pan_down',
  'rating_misfit',
  'limited_by_oil_flow',
  'temperature_beyond_data',
  'grade_above_validated_range',
  'no_cooler_needed',
]

/** What value and limit of a model's warning are numbers of. */
export const WARNING_QUANTITIES: Record<WarningCode, Quantity> = {
  speed_not_held: 'speed',
  coolant_hot: 'temperature',
  coolant_over_limit: 'temperature',
  hot_line_over_limit_pan_fine: 'temperature',
  unlocked_other_gear_cooler: 'heatRate',
  grade_above_validated_range: 'grade',
  limited_by_oil_flow: 'heatRate',
  rating_misfit: 'share',
  bypass_hides_cooler: 'share',
  over_cooled: 'temperature',
  cooler_flow_low: 'volumeFlow',
  coolant_heats_oil: 'heatRate',
  temperature_beyond_data: 'temperature',
  engine_power_exceeds_torque: 'torque',
}
