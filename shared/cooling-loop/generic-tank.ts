import type { TankCooler } from '../schemas/heat-input'

/**
 * A cooler in the tank of the radiator when nobody can say more: what a light truck's usually carries with 40 K between
 * oil and coolant. Common practice, no source.
 */
export function createGenericTank(): TankCooler {
  return {
    name: 'Radiator tank',
    construction: 'in-tank',
    position: 'radiator-tank',
    rating: {
      heatW: 6000,
      inletDifferenceK: 40,
      oilFlowM3S: 1.26e-4,
      coolantFlowM3S: 0.0018,
      pressureDropPa: 16_000,
      oilInC: 93.3,
    },
  }
}
