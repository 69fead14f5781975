import fc from 'fast-check'
import { HeatInputSchema, type HeatInput } from '#shared/schemas/heat-input'
import { arbitraryInput, evenly } from './arbitrary-truck'
import { changedAt, placesWhere, type Path } from './paths'

/**
 * Inputs nobody would own: a plausible truck with one to three of its numbers moved as far as the schema lets them go, by
 * a factor of up to 10,000 or to an end of what the schema takes for that place.
 */

const isNumber = (value: unknown) => typeof value === 'number'

/** The farthest value on the way from `from` to `to` that the schema still takes, by halving. */
function farthest(input: HeatInput, path: Path, from: number, to: number): HeatInput {
  let best = input
  let [low, high] = [0, 1]
  for (let step = 0; step < 12; step++) {
    const share = step === 0 ? 1 : (low + high) / 2
    // Along a geometric path where the sign allows, so that small numbers are reached too.
    const value = from > 0 && to > 0 ? from * (to / from) ** share : from + (to - from) * share
    const tried = changedAt(input, path, () => value)
    if (HeatInputSchema.safeParse(tried).success) {
      best = tried
      if (share === 1) break
      low = share
    } else high = share
  }
  return best
}

const move = fc.record({
  place: fc.nat(),
  logFactor: evenly(-9, 9),
  way: fc.constantFrom('factor' as const, 'factor' as const, 'negative' as const, 'zero' as const),
})

export function arbitraryExtreme(): fc.Arbitrary<HeatInput> {
  return fc
    .tuple(arbitraryInput({ maxSegments: 2 }), fc.array(move, { minLength: 1, maxLength: 3 }))
    .map(([input, moves]) =>
      moves.reduce((moved, { place, logFactor, way }) => {
        const numbers = placesWhere(moved, isNumber)
        const path = numbers[place % numbers.length]
        if (path === undefined) return moved
        const old = path.reduce<unknown>(
          (value, key) => (value as Record<string, unknown>)[key],
          moved,
        ) as number
        const target =
          way === 'zero' ? 0 : (way === 'negative' ? -1 : 1) * (old === 0 ? 1 : old) * Math.exp(logFactor)
        return farthest(moved, path, old, target)
      }, input),
    )
}
