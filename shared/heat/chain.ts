/** Coolers along the oil and the radiator behind them, at given conductances: a linear problem. */

export interface Chain {
  /** Per cooler: 1 in the radiator's tank; 1 in the radiator's air; 1 where a new group begins. */
  readonly isTank: Uint8Array
  readonly inStack: Uint8Array
  readonly opensGroup: Uint8Array
  /** Per cooler: air inlet temperature [°C]; not used in a tank. */
  readonly airC: Float64Array
  /** Per cooler: ε C_min [W/K]. */
  readonly conductance: Float64Array
  /** Per cooler: heat from oil to its sink as a + b × radiator outlet temperature [W], [W/K]. */
  readonly heatA: Float64Array
  readonly heatB: Float64Array
  /** Capacity rates of oil through the coolers, coolant and stack air [W/K]. */
  oilRate: number
  coolantRate: number
  stackRate: number
  radiatorConductance: number
  /** Air ahead of the radiator before the coolers' heat [°C]. */
  behindCondenserC: number
  /** Answers. */
  heatCoolersW: number
  tankHeatW: number
  radiatorHeatW: number
  radiatorOutC: number
}

export function makeChain(
  isTank: Uint8Array,
  inStack: Uint8Array,
  opensGroup: Uint8Array,
  airC: Float64Array,
): Chain {
  const count = isTank.length
  return {
    isTank,
    inStack,
    opensGroup,
    airC,
    conductance: new Float64Array(count),
    heatA: new Float64Array(count),
    heatB: new Float64Array(count),
    oilRate: 0,
    coolantRate: 0,
    stackRate: 1,
    radiatorConductance: 0,
    behindCondenserC: 0,
    heatCoolersW: 0,
    tankHeatW: 0,
    radiatorHeatW: 0,
    radiatorOutC: 0,
  }
}

/**
 * Solves a chain. The oil walks through the groups with its temperature as a + b T_out, T_out the radiator's outlet,
 * which the tank coolers meet; the stack coolers warm the radiator's air; the radiator closes the ring.
 * @param chain - conductances and capacity rates; its answers are written
 * @param inletC - oil ahead of the first cooler [°C]
 * @param coolantC - coolant ahead of the radiator [°C]
 * Source: energy balance of each exchanger, Q = ε C_min (T_oil - T_sink).
 */
export function solveChain(chain: Chain, inletC: number, coolantC: number): void {
  const { isTank, inStack, opensGroup, airC, conductance, heatA, heatB } = chain
  const perRate = chain.oilRate > 0 ? 1 / chain.oilRate : 0
  let a = inletC
  let b = 0
  let groupA = 0
  let groupB = 0
  let sumA = 0
  let sumB = 0
  let stackA = 0
  let stackB = 0
  let tankA = 0
  let tankB = 0
  for (let index = 0; index < isTank.length; index++) {
    if (opensGroup[index] === 1) {
      a -= groupA * perRate
      b -= groupB * perRate
      groupA = 0
      groupB = 0
    }
    const g = conductance[index]!
    let qa = g * a
    let qb = g * b
    if (isTank[index] === 1) {
      qb -= g
      tankA += qa
      tankB += qb
    } else {
      qa -= g * airC[index]!
      if (inStack[index] === 1) {
        stackA += qa
        stackB += qb
      }
    }
    heatA[index] = qa
    heatB[index] = qb
    groupA += qa
    groupB += qb
    sumA += qa
    sumB += qb
  }
  let outC = coolantC
  if (chain.coolantRate > 0) {
    const share = chain.radiatorConductance / chain.coolantRate
    const rise = share / chain.stackRate
    // several tanks in a nearly still stack could turn the denominator over; no real truck comes near
    outC =
      (coolantC * (1 - share) + share * chain.behindCondenserC + rise * stackA) /
      Math.max(1e-3, 1 - rise * stackB)
  }
  chain.radiatorOutC = outC
  chain.heatCoolersW = sumA + sumB * outC
  chain.tankHeatW = tankA + tankB * outC
  chain.radiatorHeatW =
    chain.radiatorConductance *
    (coolantC - chain.behindCondenserC - (stackA + stackB * outC) / chain.stackRate)
}
