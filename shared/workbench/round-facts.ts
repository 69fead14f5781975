import type { EightFacts } from '../build-sheet/facts'
import { displayUnit, type Quantity, type UnitSystem } from '../units/display'

/** Facts nobody has said yet stand in round numbers of the person's unit: nobody's truck weighs 4,938.35 lb. */
export function roundFacts(facts: EightFacts, system: UnitSystem): EightFacts {
  const us = system === 'us'
  const to = (value: number, quantity: Quantity, step: number): number => {
    const { toDisplay, fromDisplay } = displayUnit(quantity, system)
    return fromDisplay(Math.round(toDisplay(value) / step) * step)
  }
  return {
    ...facts,
    truckMassKg: to(facts.truckMassKg, 'mass', us ? 50 : 10),
    trailerMassKg: to(facts.trailerMassKg, 'mass', us ? 500 : 100),
    hill: {
      grade: facts.hill.grade,
      lengthM: to(facts.hill.lengthM, 'distance', 0.5),
      speedMps: to(facts.hill.speedMps, 'speed', 5),
    },
    ambientC: to(facts.ambientC, 'temperature', us ? 5 : 1),
    altitudeM: to(facts.altitudeM, 'height', us ? 500 : 100),
  }
}
