import type { ResolvedFluidLife } from './resolve'

/** Heat ageing of the fluid: the trade's rule, counted in time. */

/** Ageing faster than 2^this per reference is not told apart: far beyond any fluid, and keeps every number finite. */
const FASTEST_DOUBLINGS = 500

/**
 * How many times faster than at the reference temperature the fluid ages.
 * Equation: 2^((max(T, T_ref) - T_ref)/halving).
 * @param life - reference temperature and halving rise
 * @param oilC - T [°C]
 * @returns factor, 1 at and below the reference
 * Source: common practice in the trade, no primary source; published wordings vary between 10 °C and 20-25 °F.
 * Example (published trade table): 195 °F against 175 °F ages twice as fast.
 */
export function ageingFactor(life: ResolvedFluidLife, oilC: number): number {
  const above = oilC - life.referenceC
  return above <= 0 ? 1 : Math.exp(Math.LN2 * Math.min(FASTEST_DOUBLINGS, above / life.halvingK))
}

/** Share of the fluid's life used per second at the reference temperature [1/s]. */
export function referenceDamageRate(life: ResolvedFluidLife): number {
  return life.referenceSpeedMps / life.referenceLifeM
}

/**
 * What a chart on a shop wall says: distance to a change at one temperature.
 * @param life - reference life [m], temperature and halving rise
 * @param oilC - temperature [°C]
 * @returns distance [m]
 * Source: as `ageingFactor`.
 */
export function wallChartDistance(life: ResolvedFluidLife, oilC: number): number {
  return life.referenceLifeM / ageingFactor(life, oilC)
}
