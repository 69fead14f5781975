import type { Cooling } from '../schemas/heat-input'
import { airCapacityRate } from './coolers'
import type { CoolerUnit } from './coolers'

import type { Site } from './resolve'
import { DEFAULTS } from './resolve'

/** Air through the stack and through remote coolers: how fast, and how warm. */

/** Slowest air through any face, by natural draught [m/s]. Judgement. */
export const NATURAL_DRAUGHT_MPS = 0.3
/** What a stack cooler's face takes off the stack's air speed, per its share of the radiator's face. Judgement. */
const STACK_COOLER_RESISTANCE = 0.15
/** Recirculation and hot ground at standstill [K], gone at this road speed [m/s]. Judgement. */
const RECIRCULATION_K = 8
const RECIRCULATION_SPEED_MPS = 8
/** Engine speed at which an engine-driven fan reaches its stated velocity [rad/s]. Judgement. */
const FAN_FULL_SPEED = (2500 * Math.PI) / 30

export interface AirSide {
  /** Stack face velocity after blocked shares, coolers and the natural-draught floor [m/s]. */
  faceVelocityMps: number
  /** Air ahead of the stack [°C]. */
  stackInC: number
  /** Air behind the condenser, before the coolers' heat [°C]. */
  behindCondenserC: number
  /** ρ A V cp through the radiator's face [W/K]. */
  stackCapacityRate: number
  /** Per cooler: face velocity [m/s] and air inlet temperature [°C]; meaningless in a tank. */
  coolerVelocityMps: Float64Array
  coolerAirC: Float64Array
}

/** Ram air and fan together: cube root of the sum of cubes. */
function mixedVelocity(ram: number, fan: number): number {
  return ram === 0 ? fan : fan === 0 ? ram : Math.cbrt(ram * ram * ram + fan * fan * fan)
}

/**
 * Velocity at the radiator's face.
 * Equation: max(0.3, ((ram max(0, v + w))³ + V_fan³)^(1/3) (1 - blocked) Π(1 - 0.15 A_i/A_rad)).
 * @param cooling - stack, fan, radiator
 * @param coolers - units; those of the stack slow its air
 * @param airSpeed - max(0, v + w) [m/s]
 * @param engineSpeed - [rad/s]
 * @returns velocity [m/s], 0.3 at least
 * Source: ram and fan pressures add at equal resistance, so do cubes of velocity times flow (judgement).
 */
export function stackFaceVelocity(
  cooling: Cooling,
  coolers: readonly CoolerUnit[],
  airSpeed: number,
  engineSpeed: number,
): number {
  const { stack, radiator } = cooling
  const fanShare = stack.fan.drive === 'engine' ? Math.min(1, engineSpeed / FAN_FULL_SPEED) : 1
  let velocity =
    mixedVelocity(
      (stack.ramFraction ?? DEFAULTS.stackRamFraction) * airSpeed,
      stack.fan.faceVelocityMps * fanShare,
    ) *
    (1 - (stack.blockedFraction ?? 0))
  for (const cooler of coolers)
    if (cooler.inStack)
      velocity *= Math.max(0, 1 - (STACK_COOLER_RESISTANCE * cooler.faceAreaM2) / radiator.faceAreaM2)
  return Math.max(NATURAL_DRAUGHT_MPS, velocity)
}

/** Velocity at one air cooler's face [m/s]. */
function coolerFaceVelocity(cooler: CoolerUnit, stackVelocity: number, airSpeed: number): number {
  const open = cooler.inStack
    ? stackVelocity
    : mixedVelocity(cooler.ramFraction * airSpeed, cooler.fanFlowM3S / cooler.faceAreaM2)
  return Math.max(NATURAL_DRAUGHT_MPS, open * (1 - cooler.blockedFraction))
}

export function emptyAirSide(coolerCount: number): AirSide {
  return {
    faceVelocityMps: 0,
    stackInC: 0,
    behindCondenserC: 0,
    stackCapacityRate: 0,
    coolerVelocityMps: new Float64Array(coolerCount),
    coolerAirC: new Float64Array(coolerCount),
  }
}

/**
 * Air velocities and temperatures at one operating point, written into `air`.
 * @param air - is written
 * @param site - ambient, density, under-body temperature
 * @param cooling - stack, fan, radiator
 * @param coolers - units
 * @param condenserW - heat of the condenser, 0 without air conditioning [W]
 * @param airSpeed - max(0, v + w) [m/s]
 * @param engineSpeed - [rad/s]
 */
export function updateAirSide(
  air: AirSide,
  site: Site,
  cooling: Cooling,
  coolers: readonly CoolerUnit[],
  condenserW: number,
  airSpeed: number,
  engineSpeed: number,
): void {
  const velocity = stackFaceVelocity(cooling, coolers, airSpeed, engineSpeed)
  air.faceVelocityMps = velocity
  air.stackInC = site.ambientC + RECIRCULATION_K * Math.max(0, 1 - airSpeed / RECIRCULATION_SPEED_MPS)
  air.stackCapacityRate = airCapacityRate(site.airDensityKgM3, cooling.radiator.faceAreaM2, velocity)
  air.behindCondenserC = air.stackInC + condenserW / air.stackCapacityRate
  for (let index = 0; index < coolers.length; index++) {
    const cooler = coolers[index]!
    air.coolerVelocityMps[index] = coolerFaceVelocity(cooler, velocity, airSpeed)
    air.coolerAirC[index] =
      cooler.position === 'remote'
        ? site.underbodyC
        : cooler.position === 'behind-condenser'
          ? air.behindCondenserC
          : air.stackInC
  }
}
