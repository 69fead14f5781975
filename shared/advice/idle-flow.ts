import { loopTable } from '../heat/cooling-system'
import { makeLoopState } from '../heat/loop-flow'
import { feedShareAt } from '../heat/operating-point'
import { makeTruck } from '../heat/truck'
import type { HeatInput } from '../schemas/heat-input'
import { quartsToCubicMeters } from '../units/conversions'
import { fahrenheit, fahrenheitToCelsius } from '../units/temperature'

/** The workshop's flow test, predicted: a quart from the return line at idle, timed. */

/**
 * Longest time a quart may take [s]. Sources: a maker's service bulletin asks for a quart in 20 s; a service manual calls
 * one in 30 s a liberal flow. Both were read as excerpts.
 */
export const QUART_LIMITS_S = { bulletin: 20, manual: 30 } as const
export const QUART_M3 = quartsToCubicMeters(1)
/** Oil of the test [°C]: the middle of the 185 to 200 °F a service manual requires. */
export const FLOW_TEST_OIL_C: number = fahrenheitToCelsius(fahrenheit(195))

export interface IdleFlow {
  flowM3S: number
  /** Time a quart takes. */
  quartS: number
}

/**
 * Flow of the cooler loop at idle with hot oil.
 * Equation: the flow of the loop at the feed share min(1, idle speed / saturation speed).
 * @param input - the truck; its duty does not matter
 * @returns flow [m³/s], and the time a quart takes [s]
 * @throws AppError rating_impossible, model_refuses
 */
export function predictIdleFlow(input: HeatInput): IdleFlow {
  const truck = makeTruck(input)
  const { powertrain } = truck.resolved
  const state = makeLoopState(truck.system.coolers.length)
  const share = feedShareAt(powertrain, powertrain.idleSpeed)
  loopTable(truck.system, share).read(FLOW_TEST_OIL_C, state)
  return { flowM3S: state.volumeFlow, quartS: QUART_M3 / state.volumeFlow }
}
