import type { WarningCode } from '../heat/types'

/** What to do about each warning, in the words of the trade. */
export const WARNING_ADVICE: Record<WarningCode, string> = {
  speed_not_held:
    'Take the hill slower or in a lower gear; the temperatures shown are those of the speed it does hold.',
  coolant_hot:
    'This is the engine’s cooling, not the transmission cooler: look at radiator, fan, shroud and what stands in front of them.',
  coolant_over_limit:
    'Mend the engine’s cooling first. Beyond this the numbers stop being valid, and a hot cap must never be opened.',
  hot_line_over_limit_pan_fine:
    'A gauge in the pan would not show this. Move the sender to the to-cooler line, lock the converter, or ease off.',
  unlocked_other_gear_cooler:
    'Drop a gear or slow down until it locks; compare “drive it differently” below.',
  grade_above_validated_range: 'Take the result as a direction, not as a number; prove it on the road.',
  limited_by_oil_flow:
    'A larger core would not help. Raise the flow (line size, fittings, a check valve taken out) or add a second core.',
  rating_misfit:
    'Its ratings do not fit one another. Ask the maker for the conditions of each before relying on it.',
  bypass_hides_cooler:
    'The thermal bypass keeps part of the oil out of the cooler. Check its opening temperature before buying a core.',
  over_cooled: 'Too cold for lock-up and for the oil. Fit a thermal bypass or cover the core in winter.',
  cooler_flow_low:
    'Time a quart at the return line with hot oil before anything else: a kink, debris or a small fitting is likely.',
  coolant_heats_oil:
    'The radiator tank warms the oil here. Put the other cooler behind it, or take the tank out of the loop.',
  temperature_beyond_data:
    'The oil is colder or hotter than its data cover; expect slower warm-up than shown.',
  engine_power_exceeds_torque:
    'Power and torque of the engine contradict each other; check both on the sheet.',
}
