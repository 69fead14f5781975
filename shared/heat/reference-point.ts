import type { AirConstruction, Fluid } from '../schemas/heat-input'
import { RATING_AIR_DENSITY_KG_M3 } from './air'
import { CONSTRUCTIONS, airCapacityRate, exchangerHeat, oilCapacityRate } from './coolers'
import type { CoolerUnit } from './coolers'
import { kinematicViscosity, makeOil } from './fluids'
import type { Oil } from './fluids'
import { DEFAULTS } from './resolve'

/**
 * The one point at which coolers are compared, whatever conditions their makers used: 100 °F between oil and air inlet,
 * 2 gal/min of oil at 200 °F, air at 4 m/s and 1.184 kg/m³. Common practice of makers, rounded; no source.
 */
export const REFERENCE_POINT = {
  inletDifferenceK: 100 / 1.8,
  oilFlowM3S: 1.26e-4,
  oilInC: 93.3,
  airVelocityMps: 4,
} as const

/** Above this heat at the reference point the oil flow is the limit, not the size [W]. */
export const OIL_FLOW_LIMIT_W = 9500
/** Largest face of a single core [m²]. Judgement. */
export const LARGEST_CORE_M2 = 0.12

/**
 * Generic coolers: conductance per face area at the reference point [W/(m² K)] and pressure drop [Pa] whatever the area.
 * Source: judgement, between published ratings of each construction; spread 25 %.
 */
export const GENERIC_COOLERS: Record<AirConstruction, { uaPerAreaWM2K: number; pressureDropPa: number }> = {
  'stacked-plate': { uaPerAreaWM2K: 2900, pressureDropPa: 25_000 },
  'plate-fin': { uaPerAreaWM2K: 2500, pressureDropPa: 25_000 },
  'tube-fin': { uaPerAreaWM2K: 1500, pressureDropPa: 35_000 },
}

/** The fluid parts are compared with where none is named. */
export const REFERENCE_FLUID: Fluid = { class: 'atf-standard' }

/**
 * Heat a cooler carries at the reference point.
 * @param oil - fluid in the loop
 * @param uaWK - conductance there [W/K]
 * @param faceAreaM2 - [m²]
 * @returns heat [W]
 * Example (computed here): 100 W/K and 0.05 m² with atf-standard carry 3678 W.
 */
export function heatAtReferencePoint(oil: Oil, uaWK: number, faceAreaM2: number): number {
  return exchangerHeat(
    uaWK,
    oilCapacityRate(oil, REFERENCE_POINT.oilInC, REFERENCE_POINT.oilFlowM3S),
    airCapacityRate(RATING_AIR_DENSITY_KG_M3, faceAreaM2, REFERENCE_POINT.airVelocityMps),
    REFERENCE_POINT.inletDifferenceK,
  )
}

/** A generic cooler of a construction, place and face area, ready for the loop. */
export function genericCooler(
  oil: Oil,
  construction: AirConstruction,
  position: CoolerUnit['position'],
  faceAreaM2: number,
): CoolerUnit {
  const generic = GENERIC_COOLERS[construction]
  return {
    construction,
    position,
    inStack: position !== 'remote',
    parallelWithPrevious: false,
    law: CONSTRUCTIONS[construction],
    uaRatedWK: generic.uaPerAreaWM2K * faceAreaM2,
    airShare: CONSTRUCTIONS[construction].airShare,
    ratedOilFlowM3S: REFERENCE_POINT.oilFlowM3S,
    ratedViscosityMmSqS: kinematicViscosity(oil, REFERENCE_POINT.oilInC),
    ratedDropPa: generic.pressureDropPa,
    faceAreaM2,
    ratedAirVelocityMps: REFERENCE_POINT.airVelocityMps,
    ratedCoolantFlowM3S: 0,
    blockedFraction: 0,
    ramFraction: DEFAULTS.remoteRamFraction,
    fanFlowM3S: 0,
  }
}

/** The oil parts are compared with where none is named. */
export const referenceOil = () => makeOil(REFERENCE_FLUID)
