/**
 * One function per conversion, both ways, between SI and the units of the trade. Used in two places only: reading a form
 * and printing. Every factor is exact by definition unless its comment says otherwise.
 *
 * Source of the factors, unless named beside them: NIST Special Publication 811 (2008), Guide for the Use of the
 * International System of Units, appendix B.8; the yard and pound are those of the International Yard and Pound
 * Agreement of 1959 (1 yd = 0.9144 m, 1 lb = 0.45359237 kg), exact.
 */

/** International foot [m], 1959 agreement. */
const FOOT_M = 0.3048
/** International inch [m], a twelfth of a foot. */
const INCH_M = 0.0254
/** International mile [m], 5280 feet. */
const MILE_M = 1609.344
/** Avoirdupois pound [kg], 1959 agreement. */
const POUND_KG = 0.45359237
/**
 * Standard gravity [m/s²], exact by convention.
 * Source: 3rd General Conference on Weights and Measures (1901); NIST SP 811, appendix B.8.
 */
const STANDARD_GRAVITY = 9.80665
/** Pound-force [N]: the weight of a pound at standard gravity. */
const POUND_FORCE_N = POUND_KG * STANDARD_GRAVITY
/** Hour [s]. */
const HOUR_S = 3600
/** Minute [s]. */
const MINUTE_S = 60
/** Mechanical horsepower [W]: 550 ft·lbf/s. */
const HORSEPOWER_W = 550 * FOOT_M * POUND_FORCE_N
/** International-table British thermal unit [J]: 1 Btu_IT/lb = 2326 J/kg, exact (5th Conference on Steam, 1956). */
const BTU_J = 2326 * POUND_KG
/** Litre [m³]. */
const LITER_M3 = 1e-3
/** US gallon [m³]: 231 cubic inches. */
const GALLON_M3 = 231 * INCH_M ** 3
/** US liquid quart [m³], a quarter of a gallon. */
const QUART_M3 = GALLON_M3 / 4
/** Pound-force per square inch [Pa]. */
const PSI_PA = POUND_FORCE_N / INCH_M ** 2
/** One revolution per minute [rad/s]. */
const RPM_RAD_S = (2 * Math.PI) / MINUTE_S

/** lb to kg. */
export const poundsToKilograms = (pounds: number) => pounds * POUND_KG
/** kg to lb. */
export const kilogramsToPounds = (kilograms: number) => kilograms / POUND_KG

/** mph to m/s. */
export const milesPerHourToMetersPerSecond = (milesPerHour: number) => milesPerHour * (MILE_M / HOUR_S)
/** m/s to mph. */
export const metersPerSecondToMilesPerHour = (metersPerSecond: number) => metersPerSecond / (MILE_M / HOUR_S)

/** km/h to m/s. */
export const kilometersPerHourToMetersPerSecond = (kilometersPerHour: number) =>
  kilometersPerHour * (1000 / HOUR_S)
/** m/s to km/h. */
export const metersPerSecondToKilometersPerHour = (metersPerSecond: number) =>
  metersPerSecond / (1000 / HOUR_S)

/** hp to W. */
export const horsepowerToWatts = (horsepower: number) => horsepower * HORSEPOWER_W
/** W to hp. */
export const wattsToHorsepower = (watts: number) => watts / HORSEPOWER_W

/** lb·ft to N·m. */
export const footPoundsToNewtonMeters = (footPounds: number) => footPounds * (FOOT_M * POUND_FORCE_N)
/** N·m to lb·ft. */
export const newtonMetersToFootPounds = (newtonMeters: number) => newtonMeters / (FOOT_M * POUND_FORCE_N)

/** BTU/h to W. */
export const btuPerHourToWatts = (btuPerHour: number) => btuPerHour * (BTU_J / HOUR_S)
/** W to BTU/h. */
export const wattsToBtuPerHour = (watts: number) => watts / (BTU_J / HOUR_S)

/** US gal/min to m³/s. */
export const gallonsPerMinuteToCubicMetersPerSecond = (gallonsPerMinute: number) =>
  gallonsPerMinute * (GALLON_M3 / MINUTE_S)
/** m³/s to US gal/min. */
export const cubicMetersPerSecondToGallonsPerMinute = (cubicMetersPerSecond: number) =>
  cubicMetersPerSecond / (GALLON_M3 / MINUTE_S)

/** L/min to m³/s. */
export const litersPerMinuteToCubicMetersPerSecond = (litersPerMinute: number) =>
  litersPerMinute * (LITER_M3 / MINUTE_S)
/** m³/s to L/min. */
export const cubicMetersPerSecondToLitersPerMinute = (cubicMetersPerSecond: number) =>
  cubicMetersPerSecond / (LITER_M3 / MINUTE_S)

/** US qt to m³. */
export const quartsToCubicMeters = (quarts: number) => quarts * QUART_M3
/** m³ to US qt. */
export const cubicMetersToQuarts = (cubicMeters: number) => cubicMeters / QUART_M3

/** L to m³. */
export const litersToCubicMeters = (liters: number) => liters * LITER_M3
/** m³ to L. */
export const cubicMetersToLiters = (cubicMeters: number) => cubicMeters / LITER_M3

/** psi to Pa. */
export const psiToPascals = (psi: number) => psi * PSI_PA
/** Pa to psi. */
export const pascalsToPsi = (pascals: number) => pascals / PSI_PA

/** kPa to Pa. */
export const kilopascalsToPascals = (kilopascals: number) => kilopascals * 1000
/** Pa to kPa. */
export const pascalsToKilopascals = (pascals: number) => pascals / 1000

/** in to m. */
export const inchesToMeters = (inches: number) => inches * INCH_M
/** m to in. */
export const metersToInches = (meters: number) => meters / INCH_M

/** mm to m. */
export const millimetersToMeters = (millimeters: number) => millimeters * 0.001
/** m to mm. */
export const metersToMillimeters = (meters: number) => meters / 0.001

/** ft to m. */
export const feetToMeters = (feet: number) => feet * FOOT_M
/** m to ft. */
export const metersToFeet = (meters: number) => meters / FOOT_M

/** mi to m. */
export const milesToMeters = (miles: number) => miles * MILE_M
/** m to mi. */
export const metersToMiles = (meters: number) => meters / MILE_M

/** km to m. */
export const kilometersToMeters = (kilometers: number) => kilometers * 1000
/** m to km. */
export const metersToKilometers = (meters: number) => meters / 1000

/** ft² to m². */
export const squareFeetToSquareMeters = (squareFeet: number) => squareFeet * FOOT_M ** 2
/** m² to ft². */
export const squareMetersToSquareFeet = (squareMeters: number) => squareMeters / FOOT_M ** 2

/** in² to m². */
export const squareInchesToSquareMeters = (squareInches: number) => squareInches * INCH_M ** 2
/** m² to in². */
export const squareMetersToSquareInches = (squareMeters: number) => squareMeters / INCH_M ** 2

/** rev/min to rad/s. */
export const rpmToRadiansPerSecond = (rpm: number) => rpm * RPM_RAD_S
/** rad/s to rev/min. */
export const radiansPerSecondToRpm = (radiansPerSecond: number) => radiansPerSecond / RPM_RAD_S
