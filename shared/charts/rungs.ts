import type { Judgement } from '../schemas/limits'

/** A step of the ladder that is named by what to do. */
export type Rung = Judgement

/** Line weight of each rung [px]: heat is told apart by weight and word before color. */
export const RUNG_WEIGHTS: Record<Rung, number> = { fine: 1, watch: 2, 'ease-off': 3, stop: 4 }

/** A named temperature at which a rung begins [°C]. */
export interface RungLimit {
  rung: Rung
  fromC: number
  name: string
}

/**
 * The rung a temperature stands on: the hottest limit it has reached.
 * @param tempC - temperature of the place the limits belong to [°C]
 * @param limits - where each rung begins, any order
 */
export function rungAt(tempC: number, limits: readonly RungLimit[]): Rung {
  let found: Rung = 'fine'
  let foundC = -Infinity
  for (const limit of limits) {
    if (tempC >= limit.fromC && limit.fromC >= foundC) {
      found = limit.rung
      foundC = limit.fromC
    }
  }
  return found
}
