import type { Fluid, FluidClass } from '../schemas/heat-input'

/** Properties of the transmission oil and of the coolant. Temperatures in °C. */

export interface Oil {
  /** Constants of the viscosity line. */
  readonly viscosityA: number
  readonly viscosityB: number
  readonly density15KgM3: number
}

/**
 * Typical fluids: kinematic viscosity at 40 and 100 °C [mm²/s] and density at 15 °C [kg/m³].
 * Source: common practice, no source (mid-values of published data sheets of each viscosity class; spread about 6 %).
 */
export const FLUIDS: Record<FluidClass, readonly [kv40: number, kv100: number, density15: number]> = {
  'atf-standard': [35, 7.3, 855],
  'atf-low': [29.6, 5.9, 850],
  'atf-ultra-low': [24, 5.2, 845],
}

/** Below this the viscosity line is not trusted; the viscosity is held at its value here [°C]. Judgement. */
export const COLDEST_VISCOSITY_C = -40
/** Above this no oil property is known; density, heat capacity and viscosity are held at their values here [°C]. */
export const HOTTEST_PROPERTY_C = 600

/**
 * Coolant, half ethylene glycol and half water by volume, near 90 °C: density [kg/m³] and heat capacity [J/(kg K)].
 * Source: rounded from ASHRAE Handbook Fundamentals, physical properties of secondary coolants; 2 % over 60-110 °C.
 */
export const COOLANT_DENSITY_KG_M3 = 1035
export const COOLANT_HEAT_CAPACITY_J_KG_K = 3600
export const COOLANT_HEAT_CAPACITY_J_M3_K = COOLANT_DENSITY_KG_M3 * COOLANT_HEAT_CAPACITY_J_KG_K

const doubleLog = (viscosityMmSqS: number) => Math.log10(Math.log10(viscosityMmSqS + 0.7))
const log40 = Math.log10(40 + 273.15)
const log100 = Math.log10(100 + 273.15)

/**
 * The oil a build names: a class, or the three numbers of a data sheet.
 * @param fluid - class, or kinematic viscosities at 40 and 100 °C and density at 15 °C
 * @returns constants for the property functions below
 */
export function makeOil(fluid: Fluid): Oil {
  const [kv40, kv100, density15KgM3] =
    fluid.class !== undefined
      ? FLUIDS[fluid.class]
      : [fluid.kv40MmSqS ?? NaN, fluid.kv100MmSqS ?? NaN, fluid.density15KgM3 ?? NaN]
  const viscosityB = (doubleLog(kv40) - doubleLog(kv100)) / (log100 - log40)
  return {
    viscosityA: doubleLog(kv40) + viscosityB * log40,
    viscosityB,
    density15KgM3,
  }
}

/** The viscosity line of `kinematicViscosity` without its cold floor, for tables that must be smooth across it. */
export function viscosityLine(oil: Oil, oilC: number): number {
  const tempK = Math.min(oilC, HOTTEST_PROPERTY_C) + 273.15
  return 10 ** (10 ** (oil.viscosityA - oil.viscosityB * Math.log10(tempK))) - 0.7
}

/**
 * Kinematic viscosity of an oil between and beyond its two data-sheet points.
 * Equation: log10 log10(ν + 0.7) = A - B log10 T, ν in mm²/s, T in kelvin.
 * @param oil - from `makeOil`
 * @param oilC - temperature [°C], valid -40 to 150; below -40 held at the value of -40
 * @returns kinematic viscosity [mm²/s]
 * Source: ASTM D341-20e1, equation 1 in its short form, exact to 1e-4 above 2 mm²/s.
 * Example (computed here): atf-standard, 35 mm²/s at 40 and 7.3 at 100 °C, has 12.5 mm²/s at 75 °C.
 */
export function kinematicViscosity(oil: Oil, oilC: number): number {
  return viscosityLine(oil, Math.max(oilC, COLDEST_VISCOSITY_C))
}

/**
 * Density of an oil.
 * Equation: ρ = ρ15 - 0.62 (T - 15).
 * @param oil - from `makeOil`
 * @param oilC - temperature [°C], valid -40 to 200
 * @returns density [kg/m³]
 * Source: slope of engine-oil tables, -0.60 to -0.65 kg/(m³ K): Incropera & DeWitt, Fundamentals of Heat and Mass
 * Transfer, 6th ed., table A.5.
 * Example (computed here): 855 kg/m³ at 15 °C is 802.3 kg/m³ at 100 °C.
 */
export function oilDensity(oil: Oil, oilC: number): number {
  return oil.density15KgM3 - 0.62 * (Math.min(oilC, HOTTEST_PROPERTY_C) - 15)
}

/**
 * Heat capacity of a mineral or hydrocracked oil.
 * Equation: cp = 1800 + 4.0 T, T in °C.
 * @param oilC - temperature [°C], valid -40 to 200
 * @returns heat capacity [J/(kg K)]
 * Source: linear fit to engine-oil tables (2131 J/(kg K) at 80 °C): Incropera & DeWitt, 6th ed., table A.5; within 2 %.
 * Example (computed here): 2120 J/(kg K) at 80 °C.
 */
export function oilHeatCapacity(oilC: number): number {
  return 1800 + 4 * Math.min(oilC, HOTTEST_PROPERTY_C)
}
