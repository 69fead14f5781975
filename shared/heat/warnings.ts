import type { HeatInput, Segment } from '../schemas/heat-input'
import { openShare } from './circuit'
import type { CoolerUnit } from './coolers'
import { oilSideFactor } from './coolers'
import { kinematicViscosity } from './fluids'
import type { Oil } from './fluids'
import { operatingPoint } from './operating-point'
import { OIL_FLOW_LIMIT_W, REFERENCE_POINT, heatAtReferencePoint } from './reference-point'
import type { Powertrain } from './resolve'
import type { Truck } from './truck'
import type { Estimate, SegmentResult, Warning, WarningCode } from './types'

/** Every doubt the model can raise about its own answer, in one place. */

/** Limits of the warnings. Sources beside each; shops set their own limits elsewhere. */
const LIMITS = {
  /** Coolant [°C]: common practice, no source; a 15 psi cap boils half glycol near 129 °C. */
  coolantHotC: 115,
  coolantLimitC: 125,
  /** Hot line 250 °F sustained, pan 220 °F [°C]: a heavy-duty service manual and a trade article; others are 20 °F lower. */
  hotLineC: 121.1,
  panC: 104.4,
  /** Steepest grade anything here was compared with [rise over run]. */
  grade: 0.25,
  /** Pan 150 °F [°C]: below it lock-up may be withheld. Common practice, no source. */
  overCooledC: 65.6,
  /** Half a gallon a minute [m³/s], the least a workshop flow test accepts warm. */
  coolerFlowM3S: 3.15e-5,
  warmOilC: 18,
  /** Oil property lines [°C]: data sheets end near 150. */
  hottestOilC: 200,
  coldestOilC: -40,
  bypassShare: 0.5,
  /** Heat from coolant to oil worth a word [W]. */
  tankHeatW: -50,
  /** Another shift style must save this share to be worth a word. */
  saving: 0.05,
  /** Torque at peak power over peak torque. */
  torqueRatio: 1.02,
} as const

/** Every code, with what it means in general; the message of a warning says what it means here. */
export const WARNING_MEANINGS: Record<WarningCode, string> = {
  speed_not_held: 'The truck cannot hold the speed asked for.',
  coolant_hot: 'The engine coolant runs hot.',
  coolant_over_limit: 'The engine coolant is beyond what a cooling system holds.',
  hot_line_over_limit_pan_fine: 'The pan gauge looks fine while the hot line is over its limit.',
  unlocked_other_gear_cooler: 'Another shift style runs cooler here.',
  grade_above_validated_range: 'The grade is steeper than anything the model was compared with.',
  limited_by_oil_flow: 'This cooler is limited by oil flow, not by its size.',
  rating_misfit: 'A rating does not fit the others of the same part.',
  bypass_hides_cooler: 'The bypass keeps most of the oil from the coolers.',
  over_cooled: 'The fluid never gets warm.',
  cooler_flow_low: 'Little oil flows through the coolers.',
  coolant_heats_oil: 'The radiator tank warms the oil.',
  temperature_beyond_data: 'A temperature is beyond what is known of the oil.',
  engine_power_exceeds_torque: 'Peak power and peak torque do not belong to one engine.',
}

/** All warning codes. */
export function listWarningCodes(): readonly WarningCode[] {
  return Object.keys(WARNING_MEANINGS) as WarningCode[]
}

export function limitedByOilFlowWarning(value: number, limit: number, at: string): Warning {
  return {
    code: 'limited_by_oil_flow',
    message: 'Limited by oil flow, not by size: a larger core of this kind adds little.',
    value,
    limit,
    ...(at === '' ? {} : { at }),
  }
}

export function misfitWarning(value: number, limit: number, at: string): Warning {
  return {
    code: 'rating_misfit',
    message:
      'This rating is more than 10 % off what the other ratings of the part say; check its conditions.',
    value,
    limit,
    at,
  }
}

type Answer = Omit<Estimate, 'warnings'>

function segmentWarnings(segment: Segment, result: SegmentResult, at: string): Warning[] {
  const warnings: Warning[] = []
  if (segment.kind === 'steady' && !result.speedHeld)
    warnings.push({
      code: 'speed_not_held',
      message: 'No gear holds this speed; the fastest one that is held was used.',
      value: result.speedMps,
      limit: segment.speedMps,
      at,
    })
  const grade = 'grade' in segment ? (segment.grade ?? 0) : 0
  if (Math.abs(grade) > LIMITS.grade)
    warnings.push({
      code: 'grade_above_validated_range',
      message:
        'This grade is steeper than anything the model was compared with; take the answer as a direction.',
      value: grade,
      limit: LIMITS.grade,
      at,
    })
  const { coolerFlowM3S, sumpC } = result.end
  if (coolerFlowM3S < LIMITS.coolerFlowM3S && sumpC > LIMITS.warmOilC)
    warnings.push({
      code: 'cooler_flow_low',
      message:
        'Less than half a gallon a minute reaches the coolers: look at line size, fittings and debris.',
      value: coolerFlowM3S,
      limit: LIMITS.coolerFlowM3S,
      at,
    })
  return warnings
}

/** A steady, unlocked stretch under the economy style that the tow style would drive cooler. */
function shiftStyleWarning(
  powertrain: Powertrain,
  segment: Segment,
  result: SegmentResult,
  at: string,
): Warning[] {
  if (!powertrain.economy || segment.kind !== 'steady' || result.locked || !result.speedHeld) return []
  const tow = operatingPoint({ ...powertrain, economy: false }, segment, at)
  const eco = operatingPoint(powertrain, segment, at)
  const heat = (point: typeof tow) => point.converterW + point.gearW + point.spinW + point.pumpW
  if (heat(tow) > (1 - LIMITS.saving) * heat(eco)) return []
  return [
    {
      code: 'unlocked_other_gear_cooler',
      message: `Unlocked in gear ${eco.gear}; the tow style would take gear ${tow.gear}${tow.locked ? ', locked,' : ''} and make less heat.`,
      value: heat(eco),
      limit: heat(tow),
      at,
    },
  ]
}

function coolantWarnings(answer: Answer): Warning[] {
  const { coolantC } = answer.series
  let hottest = -Infinity
  for (const value of coolantC) if (value > hottest) hottest = value
  if (hottest > LIMITS.coolantLimitC)
    return [
      {
        code: 'coolant_over_limit',
        message:
          'The engine itself overheats on this drive: its coolant would boil. Slow down or improve the radiator first.',
        value: hottest,
        limit: LIMITS.coolantLimitC,
      },
    ]
  if (hottest > LIMITS.coolantHotC)
    return [
      {
        code: 'coolant_hot',
        message:
          'The engine coolant runs hot on this drive; a radiator-tank cooler then gives heat instead of taking it.',
        value: hottest,
        limit: LIMITS.coolantHotC,
      },
    ]
  return []
}

function fluidWarnings(truck: Truck, answer: Answer): Warning[] {
  const warnings: Warning[] = []
  if (answer.peakCoolerInletC > LIMITS.hotLineC && answer.peakSumpC <= LIMITS.panC)
    warnings.push({
      code: 'hot_line_over_limit_pan_fine',
      message:
        'The pan stays fine while the hot line from the converter goes over its limit: a pan gauge would not show it.',
      value: answer.peakCoolerInletC,
      limit: LIMITS.hotLineC,
    })
  const rests = answer.segments.flatMap(({ equilibrium }) => equilibrium?.sumpC ?? [])
  const warmest = Math.max(...rests)
  if (rests.length > 0 && warmest < LIMITS.overCooledC)
    warnings.push({
      code: 'over_cooled',
      message:
        'The pan never gets warm however long this drive lasts: lock-up may be withheld; look at a bypass.',
      value: warmest,
      limit: LIMITS.overCooledC,
    })
  const hottest = Math.max(answer.peakSumpC, answer.peakCoolerInletC)
  const coldest = truck.resolved.start.sumpC
  if (hottest > LIMITS.hottestOilC || coldest < LIMITS.coldestOilC)
    warnings.push({
      code: 'temperature_beyond_data',
      message: 'A temperature lies beyond what is known of the oil; take the answer as a direction.',
      value: hottest > LIMITS.hottestOilC ? hottest : coldest,
      limit: hottest > LIMITS.hottestOilC ? LIMITS.hottestOilC : LIMITS.coldestOilC,
    })
  return warnings
}

/** What the coolers do at the end of the hottest segment. */
function coolerWarnings(truck: Truck, answer: Answer): Warning[] {
  const warnings: Warning[] = []
  const { system } = truck
  let hottestIndex = 0
  answer.segments.forEach((result, index) => {
    if (result.end.sumpC > answer.segments[hottestIndex]!.end.sumpC) hottestIndex = index
  })
  const { end } = answer.segments[hottestIndex]!
  const at = `duty.segments.${hottestIndex}`
  if (system.bypass !== null && system.coolers.length > 0) {
    const share = openShare(system.bypass, end.coolerInletC)
    if (share < LIMITS.bypassShare && end.sumpC > system.bypass.openC)
      warnings.push({
        code: 'bypass_hides_cooler',
        message: 'The bypass lets less than half of the oil through the coolers where the pan is hottest.',
        value: share,
        limit: LIMITS.bypassShare,
        at,
      })
  }
  const tank = system.coolers.findIndex(
    (cooler, index) => cooler.position === 'radiator-tank' && end.coolerHeatW[index]! < LIMITS.tankHeatW,
  )
  if (tank >= 0)
    warnings.push({
      code: 'coolant_heats_oil',
      message:
        'The radiator tank gives heat to the oil where the pan is hottest: the coolant is the warmer of the two.',
      value: end.coolerHeatW[tank]!,
      limit: 0,
      at,
    })
  system.coolers.forEach((cooler, index) => {
    if (cooler.position === 'radiator-tank') return
    const heatW = heatAtReferencePoint(
      truck.resolved.masses.oil,
      conductanceAtReference(truck.resolved.masses.oil, cooler),
      cooler.faceAreaM2,
    )
    if (heatW > OIL_FLOW_LIMIT_W)
      warnings.push(limitedByOilFlowWarning(heatW, OIL_FLOW_LIMIT_W, `build.cooling.coolers.${index}`))
  })
  return warnings
}

/** Conductance of an air cooler moved to the reference point [W/K]. */
function conductanceAtReference(oil: Oil, cooler: CoolerUnit): number {
  const air = (REFERENCE_POINT.airVelocityMps / cooler.ratedAirVelocityMps) ** -cooler.law.airExponent
  const viscosity = kinematicViscosity(oil, REFERENCE_POINT.oilInC)
  const oilSide = oilSideFactor(cooler, REFERENCE_POINT.oilFlowM3S, viscosity)
  return cooler.uaRatedWK / (cooler.airShare * air + (1 - cooler.airShare) * oilSide)
}

function engineWarnings(input: HeatInput): Warning[] {
  const { engine } = input.build
  if (engine.curve !== undefined) return []
  const atPower = engine.peakPowerW / ((engine.peakPowerRpm * Math.PI) / 30)
  if (atPower <= LIMITS.torqueRatio * engine.peakTorqueNm) return []
  return [
    {
      code: 'engine_power_exceeds_torque',
      message:
        'Peak power at its speed takes more torque than the peak torque given: one of the two belongs to another engine.',
      value: atPower,
      limit: engine.peakTorqueNm,
      at: 'build.engine.peakPowerW',
    },
  ]
}

/**
 * Collects every doubt about an answer that follows from it without much computing.
 * @param input - as typed
 * @param truck - made from it
 * @param answer - computed from both
 * @returns warnings, worst-placed segment first within each kind
 */
export function collectWarnings(input: HeatInput, truck: Truck, answer: Answer): Warning[] {
  const warnings = engineWarnings(input)
  input.duty.segments.forEach((segment, index) => {
    const result = answer.segments[index]!
    const at = `duty.segments.${index}`
    warnings.push(...segmentWarnings(segment, result, at))
    warnings.push(...shiftStyleWarning(truck.resolved.powertrain, segment, result, at))
  })
  warnings.push(...fluidWarnings(truck, answer), ...coolantWarnings(answer), ...coolerWarnings(truck, answer))
  return warnings
}
