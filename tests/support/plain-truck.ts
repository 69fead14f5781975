import type { HeatInput } from '#shared/schemas/heat-input'

/** An invented truck with the usual parts: in-tank cooler, stack cooler, lock-up, a trailer. */
export function plainTruck(
  duty: Partial<HeatInput['duty']> & Pick<HeatInput['duty'], 'segments'>,
): HeatInput {
  return {
    build: {
      vehicle: { massKg: 2600, dragAreaM2: 1.5, tyreRadiusM: 0.39 },
      engine: {
        fuel: 'petrol',
        induction: 'natural',
        peakTorqueNm: 480,
        peakTorqueRpm: 3400,
        peakPowerW: 215_000,
        peakPowerRpm: 5000,
        idleRpm: 650,
        redlineRpm: 5600,
      },
      converter: {
        stallRpm: 2100,
        stallTorqueRatio: 2.1,
        lockup: { fitted: true, minGear: 3, minSpeedMps: 17 },
      },
      transmission: {
        gears: [
          { ratio: 3.05, efficiency: 0.96 },
          { ratio: 1.62, efficiency: 0.97 },
          { ratio: 1, efficiency: 0.99 },
          { ratio: 0.71, efficiency: 0.97 },
        ],
        fluid: { class: 'atf-low' },
        fluidVolumeM3: 0.0115,
        dryMassKg: 82,
      },
      transferCase: { highRatio: 1, lowRatio: 2.7, efficiencyHigh: 0.985, efficiencyLow: 0.965 },
      axle: { ratio: 3.7, efficiency: 0.955 },
      cooling: {
        coolers: [
          {
            name: 'in the radiator',
            construction: 'in-tank',
            position: 'radiator-tank',
            rating: {
              heatW: 6200,
              inletDifferenceK: 40,
              oilFlowM3S: 1.26e-4,
              coolantFlowM3S: 0.0019,
              pressureDropPa: 20_000,
            },
          },
          {
            name: 'in front',
            construction: 'plate-fin',
            position: 'ahead-of-condenser',
            faceAreaM2: 0.045,
            rating: {
              heatW: 3900,
              inletDifferenceK: 55.56,
              oilFlowM3S: 1.26e-4,
              airVelocityMps: 4,
              pressureDropPa: 22_000,
            },
          },
        ],
        lines: { innerDiameterM: 0.0095, lengthM: 4.5 },
        stack: { fan: { drive: 'electric', faceVelocityMps: 3.2 } },
        radiator: {
          faceAreaM2: 0.4,
          rating: { heatW: 125_000, inletDifferenceK: 60, airVelocityMps: 6, coolantFlowM3S: 0.0029 },
        },
      },
    },
    load: { cargoMassKg: 200, trailerMassKg: 2100, trailerDragAreaM2: 1.8 },
    duty: { ambientC: 35, altitudeM: 700, airConditioning: true, ...duty },
  }
}
