import type { Engine } from '../schemas/heat-input'
import { makePchip, pchipAt } from './pchip'
import type { Pchip } from './pchip'

/** Full-throttle torque over engine speed. */

const RAD_S_PER_RPM = Math.PI / 30

/**
 * Full-throttle, sea-level torque curve of an engine, rev/min to N·m.
 * Equation: monotone cubic through the given curve, or through (idle, 0.65 Tmax), (peak-torque speed, Tmax),
 * (peak-power speed, P/ω), (redline, 0.85 P/ω). Where two of these fall on one speed, the lower-speed meaning counts.
 * @param engine - of the build
 * @returns the curve, for `torqueAt`
 * Source: common practice, no source (the four-point shape is judgement; the interpolation is named in `pchip.ts`).
 * Example (computed here): 455 N·m at 3200 and 198 kW at 4700 rev/min give 402.3 N·m at 4700.
 */
export function makeTorqueCurve(engine: Engine): Pchip {
  if (engine.curve !== undefined)
    return makePchip(
      engine.curve.map((point) => point.rpm),
      engine.curve.map((point) => point.torqueNm),
    )
  const atPower = engine.peakPowerW / (engine.peakPowerRpm * RAD_S_PER_RPM)
  const points = [
    [engine.idleRpm, 0.65 * engine.peakTorqueNm],
    [engine.peakTorqueRpm, engine.peakTorqueNm],
    [engine.peakPowerRpm, atPower],
    [engine.redlineRpm, 0.85 * atPower],
  ] as const
  const rising = points.filter(([rpm], index) => index === 0 || rpm > points[index - 1]![0])
  return makePchip(
    rising.map(([rpm]) => rpm),
    rising.map(([, torque]) => torque),
  )
}

/** Torque [N·m] at a shaft speed [rad/s]; held constant outside the curve. */
export function torqueAt(curve: Pchip, shaftSpeed: number): number {
  return pchipAt(curve, shaftSpeed / RAD_S_PER_RPM)
}
