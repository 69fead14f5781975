import { findRoot } from './roots'

/** ε-NTU relation of a cross-flow exchanger with both streams unmixed. */

/** Largest NTU a rating may ask for; beyond it a rating is not possible. Judgement. */
export const LARGEST_NTU = 200

/**
 * Effectiveness of a cross-flow exchanger, both streams unmixed.
 * Equation: ε = 1 - exp(NTU^0.22/Cr (exp(-Cr NTU^0.78) - 1)); Cr → 0: ε = 1 - exp(-NTU).
 * @param ntu - UA over the smaller capacity rate, 0 or more
 * @param capacityRatio - Cr, smaller over larger capacity rate, 0 to 1
 * @returns effectiveness, 0 to 1
 * Source: Incropera, DeWitt, Bergman & Lavine, Fundamentals of Heat and Mass Transfer, 6th ed., equation 11.32; Kays &
 * London, Compact Heat Exchangers. An approximation: -3.8 to +1.1 % from the exact series.
 * Example (published): NTU 2.5, Cr 0.6 gives 0.7632.
 */
export function crossFlowEffectiveness(ntu: number, capacityRatio: number): number {
  if (!(ntu > 0)) return 0
  if (capacityRatio < 1e-9) return 1 - Math.exp(-ntu)
  const slow = Math.exp(0.22 * Math.log(ntu))
  const argument = (-capacityRatio * ntu) / slow
  const decay = argument < -1e-4 ? Math.exp(argument) - 1 : Math.expm1(argument)
  return 1 - Math.exp((slow / capacityRatio) * decay)
}

/** Conductance of an exchanger and how it answers to its UA and capacity rates. */
export interface ExchangerConductance {
  /** ε C_min: heat per inlet difference [W/K]. */
  conductance: number
  overUa: number
  overRateA: number
  overRateB: number
}

/**
 * Conductance ε C_min of an exchanger and its slopes, written into `out`.
 * Equation: with E = NTU^0.22/Cr (D - 1), D = exp(-Cr NTU^0.78): ∂E/∂NTU = 0.22 E/NTU - 0.78 D, ∂E/∂Cr = -(E + D NTU)/Cr.
 * @param ua - UA [W/K], above 0
 * @param rateA - capacity rate of one side [W/K], above 0
 * @param rateB - of the other [W/K], above 0
 * @param out - is written
 */
export function exchangerConductance(
  ua: number,
  rateA: number,
  rateB: number,
  out: ExchangerConductance,
): void {
  const aIsSmaller = rateA < rateB
  const smaller = aIsSmaller ? rateA : rateB
  const larger = aIsSmaller ? rateB : rateA
  const ntu = ua / smaller
  const ratio = smaller / larger
  let effectiveness: number
  let overNtu: number
  let overRatio = 0
  if (ratio < 1e-9) {
    const rest = Math.exp(-ntu)
    effectiveness = 1 - rest
    overNtu = rest
  } else {
    const slow = Math.exp(0.22 * Math.log(ntu))
    const argument = (-ratio * ntu) / slow
    const decay = argument < -1e-4 ? Math.exp(argument) - 1 : Math.expm1(argument)
    const exponent = (slow / ratio) * decay
    const rest = Math.exp(exponent)
    effectiveness = 1 - rest
    overNtu = rest * (0.78 * (decay + 1) - (0.22 * exponent) / ntu)
    overRatio = (rest * (exponent + (decay + 1) * ntu)) / ratio
  }
  const overSmaller = effectiveness - ntu * overNtu + ratio * overRatio
  const overLarger = -ratio * ratio * overRatio
  out.conductance = smaller * effectiveness
  out.overUa = overNtu
  out.overRateA = aIsSmaller ? overSmaller : overLarger
  out.overRateB = aIsSmaller ? overLarger : overSmaller
}

/**
 * NTU that gives an effectiveness; inverse of `crossFlowEffectiveness`.
 * @param effectiveness - ε, above 0
 * @param capacityRatio - Cr, 0 to 1
 * @returns NTU, or undefined where even NTU 200 does not reach ε
 * Example (computed here): ε 0.7632, Cr 0.6 gives 2.50.
 */
export function ntuForEffectiveness(effectiveness: number, capacityRatio: number): number | undefined {
  const miss = (logNtu: number) => crossFlowEffectiveness(Math.exp(logNtu), capacityRatio) - effectiveness
  const [low, high] = [Math.log(1e-9), Math.log(LARGEST_NTU)]
  const atHigh = miss(high)
  if (!(atHigh >= 0)) return undefined
  const atLow = miss(low)
  if (atLow >= 0) return effectiveness
  // start from the balanced-flow-free estimate: most ratings lie close to it
  const guess = Math.log(-Math.log1p(-Math.min(effectiveness, 0.999999)))
  const atGuess = guess > low && guess < high ? miss(guess) : atLow
  if (atGuess === 0) return Math.exp(guess)
  const root =
    atGuess < 0
      ? findRoot(miss, Math.max(guess, low), high, atGuess, atHigh, 1e-14)
      : findRoot(miss, low, guess, atLow, atGuess, 1e-14)
  return Math.exp(root)
}
