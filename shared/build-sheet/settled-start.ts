import { AppError } from '../errors'
import { estimate } from '../heat'
import type { HeatInput, Start } from '../schemas/heat-input'

/** Where a warm truck stands when even its first segment cannot be driven: common practice, no source. */
const WARM_RISE_K = { sump: 45, axle: 35 }
const WARM_COOLANT_C = 92

/**
 * The temperatures a truck has settled at after driving the first segment of its drive cycle for as long as it takes.
 * Where the model refuses that segment, those of a truck that was driven warm, so that what refuses is told by the
 * answer and not here.
 *
 * @param input - build, load and duty; only the first segment counts, and a start already there is not looked at
 * @returns pan, coolant and axle oil to start from [°C]
 */
export function findSettledStart(input: Pick<HeatInput, 'build' | 'load' | 'duty'>): Start {
  const [first] = input.duty.segments
  const { ambientC } = input.duty
  const warm: Start = {
    sumpC: ambientC + WARM_RISE_K.sump,
    coolantC: Math.max(WARM_COOLANT_C, ambientC),
    axleC: ambientC + WARM_RISE_K.axle,
  }
  if (first === undefined) return warm
  try {
    const { start: _start, ...duty } = input.duty
    const answer = estimate({ ...input, duty: { ...duty, segments: [first] } })
    const settled = answer.segments[0]?.equilibrium
    if (settled === undefined || settled === null) return warm
    return {
      sumpC: startTemp(settled.sumpC, 250),
      coolantC: startTemp(settled.coolantC, 200),
      axleC: startTemp(settled.axleC, 250),
    }
  } catch (error) {
    if (error instanceof AppError) return warm
    throw error
  }
}

/** A tenth of a degree is more than anybody knows, and a start must lie within what the schema takes. */
function startTemp(tempC: number, maxC: number): number {
  return Math.min(maxC, Math.round(tempC * 10) / 10)
}
