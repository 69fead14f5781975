import type { HeatInput, Segment } from '../schemas/heat-input'
import { CASE, CONVERTER, COOLANT, COUPLED, SUMP, ThermalPoint } from './balances'
import { makeCoolingSystem } from './cooling-system'
import type { CoolingSystem } from './cooling-system'
import { operatingPoint } from './operating-point'
import type { OperatingPoint } from './operating-point'
import { resolveInput } from './resolve'
import type { Resolved, StartTemperatures } from './resolve'

/** One truck on one site with one load, ready to be driven. */
export interface Truck {
  resolved: Resolved
  system: CoolingSystem
}

export function makeTruck(input: HeatInput): Truck {
  const resolved = resolveInput(input)
  return { resolved, system: makeCoolingSystem(resolved) }
}

/** Operating points of a drive cycle, in order. */
export function operatingPoints(truck: Truck, segments: readonly Segment[]): OperatingPoint[] {
  return segments.map((segment, index) =>
    operatingPoint(truck.resolved.powertrain, segment, `duty.segments.${index}`),
  )
}

/** A thermal point of a truck, not yet set to an operating point. */
export function makeThermal(truck: Truck): ThermalPoint {
  return new ThermalPoint(undefined, truck.system, truck.resolved.masses, truck.resolved.calibration)
}

/** The coupled temperatures at a start: converter and case at the sump's. */
export function startTemperatures(start: StartTemperatures): Float64Array {
  const temperatures = new Float64Array(COUPLED)
  temperatures[SUMP] = start.sumpC
  temperatures[CONVERTER] = start.sumpC
  temperatures[CASE] = start.sumpC
  temperatures[COOLANT] = start.coolantC
  return temperatures
}

/** How long a segment lasts at the speed it is driven [s]. */
export function segmentDuration(segment: Segment, point: OperatingPoint): number {
  if (segment.kind === 'steady' && segment.distanceM !== undefined) return segment.distanceM / point.speedMps
  return segment.durationS ?? 0
}
