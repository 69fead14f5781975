/** The atmosphere, and what thin air costs a naturally aspirated engine. */

/** Heat capacity of air at constant pressure [J/(kg K)]: Incropera & DeWitt, 6th ed., table A.4, 250-300 K; 0.3 %. */
export const AIR_HEAT_CAPACITY_J_KG_K = 1006
/** Specific gas constant of dry air [J/(kg K)]: ISO 2533:1975 (287.05287), rounded. */
export const AIR_GAS_CONSTANT_J_KG_K = 287.05
/** Density at which makers rate coolers: 25 °C and 101325 Pa [kg/m³]. Common practice, no source. */
export const RATING_AIR_DENSITY_KG_M3 = 1.184

/**
 * Pressure of the standard atmosphere.
 * Equation: p = 101325 (1 - 2.25577e-5 h)^5.25588, h the geopotential altitude.
 * @param altitudeM - altitude [m], valid -500 to 11,000
 * @returns pressure [Pa]
 * Source: ISO 2533:1975, troposphere layer.
 * Example (computed here): 89,875 Pa at 1000 m.
 */
export function pressureAtAltitude(altitudeM: number): number {
  return 101325 * (1 - 2.25577e-5 * altitudeM) ** 5.25588
}

/**
 * Density of dry air as an ideal gas; humidity (about -1 % at 35 °C) is left out.
 * Equation: ρ = p / (R T).
 * @param pressurePa - absolute pressure [Pa]
 * @param airC - temperature [°C]
 * @returns density [kg/m³]
 * Source: ISO 2533:1975, ideal gas.
 * Example (computed here): 1.184 kg/m³ at 101325 Pa and 25 °C.
 */
export function airDensity(pressurePa: number, airC: number): number {
  return pressurePa / (AIR_GAS_CONSTANT_J_KG_K * (airC + 273.15))
}

/**
 * Share of its sea-level torque a naturally aspirated engine keeps; never more than 1.
 * Equation: cf = 1.18 (990/p) sqrt(T/298.15) - 0.18, share = min(1, 1/cf), p in hPa, T in K.
 * @param pressurePa - absolute pressure of dry air [Pa]; the standard is meant for 900-1050 hPa, used beyond here
 * @param airC - temperature [°C]; the standard is meant for 15-35 °C, used beyond here
 * @returns share of torque, above 0 to 1
 * Source: SAE J1349 (2004), atmospheric correction for naturally aspirated spark-ignition engines.
 * Example (computed here): 0.894 at 900 hPa and 25 °C.
 */
export function naturalTorqueShare(pressurePa: number, airC: number): number {
  const correction = 1.18 * (990 / (pressurePa / 100)) * Math.sqrt((airC + 273.15) / 298.15) - 0.18
  return correction > 1 ? 1 / correction : 1
}
