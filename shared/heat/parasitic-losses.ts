/** What the transmission takes for itself: its pump, and the drag of clutches and churned oil. */

/** Overall efficiency of a transmission oil pump, as a share of its ideal torque. Common practice, no source. */
export const PUMP_EFFICIENCY = 0.85
/** Viscosity at which the drag is stated and at which operating points are solved [mm²/s]. */
export const REFERENCE_VISCOSITY_MM_SQ_S = 8

export interface Pump {
  displacementM3PerRev: number
  linePressureMinPa: number
  linePressureMaxPa: number
}

/**
 * Torque the pump takes; its work ends as heat in the oil.
 * Equation: D p / (2π · 0.85), p = p_min + (p_max - p_min) clamp(T_impeller / T_rated, 0, 1).
 * @param pump - displacement D [m³/rev], line pressures [Pa]
 * @param impellerTorque - T_impeller [N·m]
 * @param ratedTorque - T_rated [N·m]
 * @returns torque [N·m]
 * Source: ideal displacement pump (any hydraulics text); line pressure rising with torque is common practice, no source.
 * Example (computed here): 20 cm³/rev at 0.55 MPa takes 2.06 N·m.
 */
export function pumpTorque(pump: Pump, impellerTorque: number, ratedTorque: number): number {
  const load = Math.min(1, Math.max(0, impellerTorque / ratedTorque))
  const pressure = pump.linePressureMinPa + (pump.linePressureMaxPa - pump.linePressureMinPa) * load
  return (pump.displacementM3PerRev * pressure) / (2 * Math.PI * PUMP_EFFICIENCY)
}

/**
 * Drag torque at the turbine at the reference viscosity of 8 mm²/s.
 * Equation: 0.005 T_rated (1 + 0.4 n/1000), n the turbine speed in rev/min.
 * @param ratedTorque - T_rated [N·m]
 * @param turbineSpeed - [rad/s]
 * @returns torque [N·m]
 * Source: form after Commission Regulation (EU) 2017/2400, annex VI (torque-independent loss of automatic
 * transmissions); its size is judgement.
 * Example (computed here): 455 N·m at 2000 rev/min gives 4.10 N·m.
 */
export function spinTorque(ratedTorque: number, turbineSpeed: number): number {
  return 0.005 * ratedTorque * (1 + (0.4 / 1000) * (turbineSpeed / (Math.PI / 30)))
}

/**
 * Factor on the drag at the reference viscosity.
 * Equation: (ν / 8 mm²/s)^0.3.
 * @param viscosityMmSqS - ν [mm²/s]
 * @returns factor
 * Source: judgement; measured drag of wet clutches and bearings falls with a power of 0.2 to 0.5 of viscosity.
 * Example (computed here): 1.23 at 16 mm²/s.
 */
export function spinViscosityFactor(viscosityMmSqS: number): number {
  return (viscosityMmSqS / REFERENCE_VISCOSITY_MM_SQ_S) ** 0.3
}
