import type { Cooling } from '../schemas/heat-input'
import { RATING_AIR_DENSITY_KG_M3 } from './air'
import { airCapacityRate, conductanceOfRating, impossibleRating, makeCoolerUnit } from './coolers'
import type { CoolerUnit } from './coolers'
import { COOLANT_HEAT_CAPACITY_J_M3_K } from './fluids'
import { LoopTable, groupCoolers } from './loop-flow'
import type { Loop } from './loop-flow'
import { DEFAULTS } from './resolve'
import type { Resolved, Site } from './resolve'

/** The cooling side of a truck, ready to run: coolers, loop, radiator, and the tables they share. */

export interface Window {
  openC: number
  fullC: number
}

export interface RadiatorUnit {
  /** Conductance at the rating [W/K]. */
  uaRatedWK: number
  ratedAirVelocityMps: number
  ratedCoolantFlowM3S: number
  /** Engine speed at that coolant flow [rad/s]. */
  pumpSpeed: number
  thermostat: Window
}

export interface CoolingSystem {
  site: Site
  cooling: Cooling
  condenserW: number
  coolers: readonly CoolerUnit[]
  loop: Loop
  bypass: Window | null
  radiator: RadiatorUnit
  coolerScale: number
  /** Loop tables by feed share. */
  tables: Map<number, LoopTable>
}

function makeRadiatorUnit(cooling: Cooling): RadiatorUnit {
  const { radiator } = cooling
  const uaRatedWK = conductanceOfRating({
    heatW: radiator.rating.heatW,
    inletDifferenceK: radiator.rating.inletDifferenceK,
    capacityRateA: radiator.rating.coolantFlowM3S * COOLANT_HEAT_CAPACITY_J_M3_K,
    capacityRateB: airCapacityRate(
      RATING_AIR_DENSITY_KG_M3,
      radiator.faceAreaM2,
      radiator.rating.airVelocityMps,
    ),
  })
  if (uaRatedWK === undefined) throw impossibleRating('build.cooling.radiator.rating')
  return {
    uaRatedWK,
    ratedAirVelocityMps: radiator.rating.airVelocityMps,
    ratedCoolantFlowM3S: radiator.rating.coolantFlowM3S,
    pumpSpeed: ((radiator.rating.pumpRpm ?? DEFAULTS.pumpRpm) * Math.PI) / 30,
    thermostat: radiator.thermostat ?? DEFAULTS.thermostat,
  }
}

/**
 * Reads the cooling side of a resolved input.
 * @param resolved - input with defaults
 * @returns the system
 * @throws AppError rating_impossible naming the cooler or the radiator
 */
export function makeCoolingSystem(resolved: Resolved): CoolingSystem {
  const { cooling } = resolved
  const coolers = resolved.coolers.map((cooler, index) =>
    makeCoolerUnit(resolved.masses.oil, cooler, `build.cooling.coolers.${index}`),
  )
  return assembleCoolingSystem(resolved, coolers, makeRadiatorUnit(cooling))
}

/** The same system with other coolers in its loop. */
export function withCoolers(
  resolved: Resolved,
  system: CoolingSystem,
  coolers: readonly CoolerUnit[],
): CoolingSystem {
  return assembleCoolingSystem(resolved, coolers, system.radiator)
}

function assembleCoolingSystem(
  resolved: Resolved,
  coolers: readonly CoolerUnit[],
  radiator: RadiatorUnit,
): CoolingSystem {
  const { cooling, calibration, masses } = resolved
  const feed = cooling.feed ?? DEFAULTS.feed
  return {
    site: resolved.site,
    cooling,
    condenserW: resolved.airConditioning ? (cooling.condenserW ?? DEFAULTS.condenserW) : 0,
    coolers,
    loop: {
      oil: masses.oil,
      line: {
        innerDiameterM: cooling.lines.innerDiameterM,
        lengthM: cooling.lines.lengthM,
        fittingsK: cooling.lines.fittingsK ?? DEFAULTS.fittingsK,
        roughnessM: cooling.lines.roughnessM ?? DEFAULTS.roughnessM,
      },
      pressureMaxPa: feed.pressureMaxPa,
      openFlowM3S: feed.openFlowM3S,
      coolers,
      groups: groupCoolers(coolers),
      flowScale: calibration.flowScale,
    },
    bypass: cooling.bypass ?? null,
    radiator,
    coolerScale: calibration.coolerScale,
    tables: new Map(),
  }
}

/** The loop table of a feed share, made once. */
export function loopTable(system: CoolingSystem, feedShare: number): LoopTable {
  let table = system.tables.get(feedShare)
  if (table === undefined) {
    table = new LoopTable(system.loop, feedShare)
    system.tables.set(feedShare, table)
  }
  return table
}
