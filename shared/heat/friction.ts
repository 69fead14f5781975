/** Pressure lost in a round line. */

/**
 * Darcy friction factor of a round pipe at any Reynolds number, laminar to fully rough.
 * Equation: f = 8 [(8/Re)^12 + (A + B)^-1.5]^(1/12), A = [2.457 ln(1/((7/Re)^0.9 + 0.27 e/d))]^16, B = (37530/Re)^16.
 * @param reynolds - Re, above 0
 * @param relativeRoughness - e/d, 0 to 0.05
 * @returns Darcy friction factor
 * Source: S. W. Churchill, "Friction-factor equation spans all fluid-flow regimes", Chemical Engineering 84(24), 1977,
 * 91-92.
 * Example (computed here): Re 1e5, e/d 1e-4 gives 0.01846; Colebrook gives 0.01851.
 */
export function churchillFrictionFactor(reynolds: number, relativeRoughness: number): number {
  return churchill(reynolds, relativeRoughness).factor
}

/** Friction factor and its logarithmic slope d ln f / d ln Re. */
export function churchill(reynolds: number, relativeRoughness: number): { factor: number; slope: number } {
  // in deep laminar flow B alone overflows no double, but A and B no longer matter
  if (reynolds < 1) return { factor: 64 / reynolds, slope: -1 }
  const inner = Math.exp(0.9 * Math.log(7 / reynolds))
  const argument = inner + 0.27 * relativeRoughness
  const logarithm = -Math.log(argument)
  const a = toSixteenth(2.457 * logarithm)
  const b = toSixteenth(37530 / reynolds)
  const ab = a + b
  const laminar = toTwelfth(8 / reynolds)
  const turbulent = 1 / (ab * Math.sqrt(ab))
  const sum = laminar + turbulent
  const slopeA = logarithm === 0 ? 0 : (16 * a * 0.9 * inner) / (argument * logarithm)
  const slopeSum = -12 * laminar - (1.5 * turbulent * (slopeA - 16 * b)) / ab
  return {
    factor: 8 * Math.exp(Math.log(sum) / 12),
    slope: slopeSum / (12 * sum),
  }
}

function toTwelfth(x: number): number {
  const third = x * x * x
  const sixth = third * third
  return sixth * sixth
}

function toSixteenth(x: number): number {
  const second = x * x
  const fourth = second * second
  const eighth = fourth * fourth
  return eighth * eighth
}

export interface Line {
  innerDiameterM: number
  lengthM: number
  fittingsK: number
  roughnessM: number
}

/** Pressure lost in a line and its logarithmic slope over flow. */
export function lineDrop(
  line: Line,
  volumeFlow: number,
  densityKgM3: number,
  viscosityMmSqS: number,
): { dropPa: number; slope: number } {
  const area = 0.25 * Math.PI * line.innerDiameterM * line.innerDiameterM
  const velocity = volumeFlow / area
  const reynolds = (velocity * line.innerDiameterM) / (viscosityMmSqS * 1e-6)
  const { factor, slope } = churchill(reynolds, line.roughnessM / line.innerDiameterM)
  const dynamic = 0.5 * densityKgM3 * velocity * velocity
  const friction = ((factor * line.lengthM) / line.innerDiameterM) * dynamic
  const minor = line.fittingsK * dynamic
  const dropPa = friction + minor
  return {
    dropPa,
    slope: dropPa > 0 ? (friction * (2 + slope) + 2 * minor) / dropPa : 2,
  }
}

/**
 * Pressure lost in the lines to and from the coolers.
 * Equation: Δp = (f L/d + K) ½ ρ u².
 * @param line - inner diameter d [m], length out and back L [m], fittings K, roughness [m]
 * @param volumeFlow - [m³/s], above 0
 * @param densityKgM3 - ρ [kg/m³]
 * @param viscosityMmSqS - kinematic viscosity [mm²/s]
 * @returns pressure drop [Pa]
 * Source: Darcy-Weisbach with loss coefficients, F. M. White, Fluid Mechanics, 7th ed., section 6.9.
 * Example (computed here): 9.5 mm, 4.2 m, K 6, 1.26e-4 m³/s at 810 kg/m³ and 9 mm²/s loses 27.0 kPa.
 */
export function linePressureDrop(
  line: Line,
  volumeFlow: number,
  densityKgM3: number,
  viscosityMmSqS: number,
): number {
  return lineDrop(line, volumeFlow, densityKgM3, viscosityMmSqS).dropPa
}
