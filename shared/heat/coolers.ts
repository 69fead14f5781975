import type { Cooler } from '../schemas/heat-input'
import { AppError } from '../errors'
import { AIR_HEAT_CAPACITY_J_KG_K, RATING_AIR_DENSITY_KG_M3 } from './air'
import { crossFlowEffectiveness, ntuForEffectiveness } from './effectiveness'
import { COOLANT_HEAT_CAPACITY_J_M3_K, kinematicViscosity, oilDensity, oilHeatCapacity } from './fluids'
import type { Oil } from './fluids'
import { DEFAULTS } from './resolve'

/** Oil coolers: from a maker's rating to a conductance, and how that changes with air, oil flow and viscosity. */

export type Construction = Cooler['construction']

/** Exponents of one construction. */
export interface ConstructionLaw {
  /** f: air (or coolant) side share of the thermal resistance at the rating. */
  airShare: number
  /** a: exponent of air (or coolant) flow. */
  airExponent: number
  /** m, n: exponents of oil flow and viscosity in the oil-side resistance. */
  flowExponent: number
  viscosityExponent: number
  /** Pressure drop goes with flow and viscosity to these powers. */
  dropFlowExponent: number
  dropViscosityExponent: number
}

/**
 * How each construction scales. Source: exponents of louvred and plain fins (air side, V^0.5-0.6), of laminar flow with
 * and without turbulators (oil side), after Kays & London, Compact Heat Exchangers, 3rd ed.; the split is judgement.
 */
export const CONSTRUCTIONS: Record<Construction, ConstructionLaw> = {
  'stacked-plate': law(0.55, 0.5, 0.55, 0.2, 1.5, 0.5),
  'plate-fin': law(0.55, 0.5, 0.5, 0.2, 1.4, 0.6),
  'tube-fin': law(0.45, 0.6, 0.33, 0.1, 1.1, 0.9),
  'in-tank': law(0.2, 0.8, 0.5, 0.2, 1.3, 0.7),
}

function law(
  airShare: number,
  airExponent: number,
  flowExponent: number,
  viscosityExponent: number,
  dropFlowExponent: number,
  dropViscosityExponent: number,
): ConstructionLaw {
  return {
    airShare,
    airExponent,
    flowExponent,
    viscosityExponent,
    dropFlowExponent,
    dropViscosityExponent,
  }
}

/** A cooler ready for the loop. */
export interface CoolerUnit {
  construction: Construction
  position: Cooler['position']
  /** In the radiator's air stack: its heat warms the radiator's air. */
  inStack: boolean
  parallelWithPrevious: boolean
  law: ConstructionLaw
  /** Conductance at the rating [W/K]. */
  uaRatedWK: number
  airShare: number
  ratedOilFlowM3S: number
  ratedViscosityMmSqS: number
  ratedDropPa: number
  /** Face area [m²] and rated air velocity [m/s]; 0 in a tank. */
  faceAreaM2: number
  ratedAirVelocityMps: number
  /** Rated coolant flow [m³/s]; 0 in air. */
  ratedCoolantFlowM3S: number
  blockedFraction: number
  ramFraction: number
  fanFlowM3S: number
}

/** A rating of any exchanger: heat at an inlet difference between two capacity rates. */
export interface ExchangerRating {
  heatW: number
  inletDifferenceK: number
  capacityRateA: number
  capacityRateB: number
}

/**
 * Conductance that makes an exchanger carry its rating.
 * Equation: ε = Q/(C_min ΔT); UA = NTU(ε, C_min/C_max) C_min.
 * @param rating - heat [W], inlet difference [K], both capacity rates [W/K]
 * @returns UA [W/K], or undefined where no exchanger of NTU up to 200 carries it
 * Source: Incropera et al., 6th ed., section 11.4.
 */
export function conductanceOfRating(rating: ExchangerRating): number | undefined {
  const smaller = Math.min(rating.capacityRateA, rating.capacityRateB)
  const larger = Math.max(rating.capacityRateA, rating.capacityRateB)
  const ntu = ntuForEffectiveness(rating.heatW / (smaller * rating.inletDifferenceK), smaller / larger)
  return ntu === undefined ? undefined : ntu * smaller
}

/** Heat an exchanger carries [W]: ε C_min ΔT. */
export function exchangerHeat(ua: number, rateA: number, rateB: number, inletDifferenceK: number): number {
  const smaller = Math.min(rateA, rateB)
  return crossFlowEffectiveness(ua / smaller, smaller / Math.max(rateA, rateB)) * smaller * inletDifferenceK
}

/** Capacity rate of an oil flow [W/K]. */
export function oilCapacityRate(oil: Oil, oilC: number, volumeFlow: number): number {
  return oilDensity(oil, oilC) * volumeFlow * oilHeatCapacity(oilC)
}

/** Capacity rate of air through a face [W/K]. */
export function airCapacityRate(densityKgM3: number, faceAreaM2: number, velocityMps: number): number {
  return densityKgM3 * faceAreaM2 * velocityMps * AIR_HEAT_CAPACITY_J_KG_K
}

export function impossibleRating(path: string): AppError {
  return new AppError('rating_impossible', {
    issues: [
      {
        path,
        message:
          'more heat than this oil and air flow can carry at this inlet difference; check heatW, inletDifferenceK and both flows',
      },
    ],
  })
}

/**
 * Reads a cooler of the input: conductance from its rating, laws of its construction.
 * @param oil - the fluid in the loop
 * @param cooler - of the input
 * @param path - where it stands in the input, for the error
 * @returns the unit
 * @throws AppError rating_impossible when no exchanger carries the rating
 */
export function makeCoolerUnit(oil: Oil, cooler: Cooler, path: string): CoolerUnit {
  const oilInC = cooler.rating.oilInC ?? DEFAULTS.ratingOilInC
  const inTank = cooler.construction === 'in-tank'
  const uaRatedWK = conductanceOfRating({
    heatW: cooler.rating.heatW,
    inletDifferenceK: cooler.rating.inletDifferenceK,
    capacityRateA: oilCapacityRate(oil, oilInC, cooler.rating.oilFlowM3S),
    capacityRateB: inTank
      ? cooler.rating.coolantFlowM3S * COOLANT_HEAT_CAPACITY_J_M3_K
      : airCapacityRate(RATING_AIR_DENSITY_KG_M3, cooler.faceAreaM2, cooler.rating.airVelocityMps),
  })
  if (uaRatedWK === undefined) throw impossibleRating(`${path}.rating`)
  const constructionLaw = CONSTRUCTIONS[cooler.construction]
  return {
    construction: cooler.construction,
    position: cooler.position,
    inStack: !inTank && cooler.position !== 'remote',
    parallelWithPrevious: cooler.parallelWithPrevious ?? false,
    law: constructionLaw,
    uaRatedWK,
    airShare: inTank ? constructionLaw.airShare : (cooler.airShare ?? constructionLaw.airShare),
    ratedOilFlowM3S: cooler.rating.oilFlowM3S,
    ratedViscosityMmSqS: kinematicViscosity(oil, oilInC),
    ratedDropPa: cooler.rating.pressureDropPa,
    faceAreaM2: inTank ? 0 : cooler.faceAreaM2,
    ratedAirVelocityMps: inTank ? 0 : cooler.rating.airVelocityMps,
    ratedCoolantFlowM3S: inTank ? cooler.rating.coolantFlowM3S : 0,
    blockedFraction: inTank ? 0 : (cooler.blockedFraction ?? 0),
    ramFraction: inTank ? 0 : (cooler.ramFraction ?? DEFAULTS.remoteRamFraction),
    fanFlowM3S: inTank ? 0 : (cooler.fanFlowM3S ?? 0),
  }
}

/**
 * Oil-side resistance relative to the rating.
 * Equation: (q_r/q)^m (ν/ν_r)^n.
 * @param unit - cooler
 * @param volumeFlow - q through this cooler [m³/s], above 0
 * @param viscosityMmSqS - ν of the sump [mm²/s]
 * @returns factor, 1 at the rating
 */
export function oilSideFactor(unit: CoolerUnit, volumeFlow: number, viscosityMmSqS: number): number {
  return Math.exp(
    unit.law.flowExponent * Math.log(unit.ratedOilFlowM3S / volumeFlow) +
      unit.law.viscosityExponent * Math.log(viscosityMmSqS / unit.ratedViscosityMmSqS),
  )
}

/**
 * Pressure lost in one cooler.
 * Equation: Δp = Δp_r (q/q_r)^p (ν/ν_r)^r.
 * @param unit - cooler
 * @param volumeFlow - q through this cooler [m³/s]
 * @param viscosityMmSqS - ν [mm²/s]
 * @returns pressure drop [Pa]
 * Source: judgement between fully laminar (1, 1) and turbulent (1.75, 0.25).
 */
export function coolerPressureDrop(unit: CoolerUnit, volumeFlow: number, viscosityMmSqS: number): number {
  return (
    unit.ratedDropPa *
    (volumeFlow / unit.ratedOilFlowM3S) ** unit.law.dropFlowExponent *
    (viscosityMmSqS / unit.ratedViscosityMmSqS) ** unit.law.dropViscosityExponent
  )
}
