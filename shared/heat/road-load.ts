import type { Surface } from '../schemas/heat-input'

/** What the road asks of the driven wheels. */

/** Standard gravity [m/s²]: 3rd General Conference on Weights and Measures, 1901; exact by convention. */
export const STANDARD_GRAVITY = 9.80665
/** Share by which turning parts make the truck harder to speed up. Common practice, no source (1.03-1.10). */
export const ROTATING_MASS_FACTOR = 1.05
/**
 * Coefficient of rolling resistance of light-truck tires by surface.
 * Source: T. D. Gillespie, Fundamentals of Vehicle Dynamics (1992), table 4.1, for pavement, medium-hard soil and sand;
 * the others are judgement between its values, spread about a third.
 */
export const ROLLING_RESISTANCE: Record<Surface, number> = {
  pavement: 0.01,
  gravel: 0.02,
  dirt: 0.035,
  rock: 0.06,
  mud: 0.15,
  sand: 0.2,
}

export interface RoadLoad {
  massKg: number
  dragAreaM2: number
  airDensityKgM3: number
  rollingResistance: number
  /** Rise over run. */
  grade: number
  headwindMps: number
}

/**
 * Force at the tires: grade, rolling, air and acceleration. Rolling resistance only while moving.
 * Equation: F = m g sinθ + Crr m g cosθ + ½ ρ CdA (v + w)|v + w| + 1.05 m a, θ = atan(grade).
 * @param load - mass [kg], drag area CdA [m²], air density ρ [kg/m³], Crr, grade, headwind w [m/s]
 * @param speed - road speed v [m/s]
 * @param acceleration - a [m/s²]
 * @returns force [N]; negative when the road drives the truck
 * Source: T. D. Gillespie, Fundamentals of Vehicle Dynamics (1992), chapter 4, equation 4-28.
 * Example (computed here): 5000 kg, 3.2 m², 1.09 kg/m³, 0.010, 6 %, 20 m/s: 4124 N.
 */
export function roadForce(load: RoadLoad, speed: number, acceleration = 0): number {
  const cosine = 1 / Math.sqrt(1 + load.grade * load.grade)
  const weight = load.massKg * STANDARD_GRAVITY
  const airSpeed = speed + load.headwindMps
  return (
    weight * load.grade * cosine +
    (speed > 0 ? load.rollingResistance * weight * cosine : 0) +
    0.5 * load.airDensityKgM3 * load.dragAreaM2 * airSpeed * Math.abs(airSpeed) +
    ROTATING_MASS_FACTOR * load.massKg * acceleration
  )
}
