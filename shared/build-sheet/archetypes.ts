import type { Build } from '../schemas/heat-input'
import type { BuildSheet } from '../schemas/sheet'
import { flattenBuild } from './sheet'

/**
 * Three invented trucks to start from, each whole. No value belongs to a make: every one was chosen inside what is
 * usual for its kind (drag area, ratios, efficiencies, converter, volumes, cooling pack), common practice, no source.
 */

export const ARCHETYPE_IDS = ['classic-4x4', 'diesel-pickup', 'midsize-4x4'] as const
export type ArchetypeId = (typeof ARCHETYPE_IDS)[number]

export interface Archetype {
  id: ArchetypeId
  name: string
  /** Two plain sentences for somebody on the phone. */
  words: string
  stockTireCode: string
  stockAxleRatio: number
  weights: {
    /** Empty, full tanks. */
    curbKg: number
    /** With two people and gear: what the archetype's sheet carries. */
    loadedKg: number
    /** What the truck itself may weigh. */
    grossKg: number
    /** Heaviest trailer such a truck is usually asked to pull. */
    trailerKg: number
  }
  build: Build
}

/** Rolling radius of the stock tire, as `parseTireCode` gives it. */
const STOCK_RADIUS_M = { 'classic-4x4': 0.3822, 'diesel-pickup': 0.4088, 'midsize-4x4': 0.3897 }

const CLASSIC_4X4: Archetype = {
  id: 'classic-4x4',
  name: 'Classic short-wheelbase 4×4',
  words:
    'An old, square, short 4×4 with a gasoline V8 and a four-speed automatic with overdrive. Cooled by the radiator tank alone, as it left the works.',
  stockTireCode: '31x10.50R15',
  stockAxleRatio: 3.73,
  weights: { curbKg: 2010, loadedKg: 2240, grossKg: 2720, trailerKg: 2270 },
  build: {
    vehicle: { massKg: 2240, dragAreaM2: 1.36, tyreRadiusM: STOCK_RADIUS_M['classic-4x4'] },
    engine: {
      fuel: 'petrol',
      induction: 'natural',
      peakTorqueNm: 390,
      peakTorqueRpm: 2800,
      peakPowerW: 142_000,
      peakPowerRpm: 4200,
      idleRpm: 650,
      redlineRpm: 4900,
      coolantHeatRatio: 0.95,
    },
    converter: {
      stallRpm: 1850,
      stallTorqueRatio: 2.1,
      couplingPoint: 0.88,
      heatCapacityJK: 12_000,
      oilShare: 0.35,
      lockup: { fitted: true, minGear: 3, minSpeedMps: 17, slipRpm: 0 },
    },
    transmission: {
      gears: [
        { ratio: 2.78, efficiency: 0.955 },
        { ratio: 1.56, efficiency: 0.965 },
        { ratio: 1, efficiency: 0.985 },
        { ratio: 0.7, efficiency: 0.965 },
      ],
      fluid: { class: 'atf-standard' },
      fluidVolumeM3: 0.0108,
      dryMassKg: 70,
      caseAreaM2: 0.7,
      shiftStyle: 'tow',
      pump: { displacementM3PerRev: 20e-6, linePressureMinPa: 0.55e6, linePressureMaxPa: 1.5e6 },
    },
    transferCase: {
      highRatio: 1,
      lowRatio: 2.68,
      efficiencyHigh: 0.985,
      efficiencyLow: 0.955,
      surfaceM2: 0.4,
      heatCapacityJK: 25_000,
    },
    axle: { ratio: 3.73, efficiency: 0.96, surfaceM2: 1.1, heatCapacityJK: 45_000 },
    cooling: {
      coolers: [
        {
          name: 'Radiator tank',
          construction: 'in-tank',
          position: 'radiator-tank',
          rating: {
            heatW: 5600,
            inletDifferenceK: 40,
            oilFlowM3S: 0.000126,
            coolantFlowM3S: 0.0017,
            pressureDropPa: 16_000,
            oilInC: 93.3,
          },
        },
      ],
      lines: { innerDiameterM: 0.0079, lengthM: 3.6, fittingsK: 6, roughnessM: 1e-5 },
      feed: { pressureMaxPa: 200_000, saturationRpm: 1500, openFlowM3S: 1.6e-4 },
      stack: { ramFraction: 0.18, blockedFraction: 0, fan: { drive: 'engine', faceVelocityMps: 3.4 } },
      radiator: {
        faceAreaM2: 0.37,
        rating: {
          heatW: 108_000,
          inletDifferenceK: 60,
          airVelocityMps: 6,
          coolantFlowM3S: 0.0027,
          pumpRpm: 3000,
        },
        thermostat: { openC: 88, fullC: 98 },
      },
      condenserW: 6000,
      underbodyRiseK: 15,
      coolantHeatCapacityJK: 130_000,
    },
  },
}

const DIESEL_PICKUP: Archetype = {
  id: 'diesel-pickup',
  name: 'Heavy diesel pickup',
  words:
    'A four-door, three-quarter to one-ton pickup with a turbocharged diesel and a heavy six-speed automatic. The oil goes through the radiator tank and then a front cooler.',
  stockTireCode: 'LT275/70R18',
  stockAxleRatio: 3.73,
  weights: { curbKg: 3360, loadedKg: 3620, grossKg: 4990, trailerKg: 6350 },
  build: {
    vehicle: { massKg: 3620, dragAreaM2: 1.66, tyreRadiusM: STOCK_RADIUS_M['diesel-pickup'] },
    engine: {
      fuel: 'diesel',
      induction: 'forced',
      peakTorqueNm: 1080,
      peakTorqueRpm: 1700,
      peakPowerW: 275_000,
      peakPowerRpm: 2900,
      idleRpm: 650,
      redlineRpm: 3500,
      coolantHeatRatio: 0.65,
    },
    converter: {
      stallRpm: 2000,
      stallTorqueRatio: 1.8,
      couplingPoint: 0.88,
      heatCapacityJK: 18_000,
      oilShare: 0.35,
      lockup: { fitted: true, minGear: 2, minSpeedMps: 7, slipRpm: 0 },
    },
    transmission: {
      gears: [
        { ratio: 3.2, efficiency: 0.955 },
        { ratio: 1.86, efficiency: 0.965 },
        { ratio: 1.42, efficiency: 0.97 },
        { ratio: 1, efficiency: 0.988 },
        { ratio: 0.73, efficiency: 0.97 },
        { ratio: 0.62, efficiency: 0.965 },
      ],
      fluid: { class: 'atf-low' },
      fluidVolumeM3: 0.0145,
      dryMassKg: 148,
      caseAreaM2: 0.95,
      shiftStyle: 'tow',
      pump: { displacementM3PerRev: 25e-6, linePressureMinPa: 0.6e6, linePressureMaxPa: 1.8e6 },
    },
    transferCase: {
      highRatio: 1,
      lowRatio: 2.7,
      efficiencyHigh: 0.985,
      efficiencyLow: 0.955,
      surfaceM2: 0.45,
      heatCapacityJK: 30_000,
    },
    axle: { ratio: 3.73, efficiency: 0.96, surfaceM2: 1.4, heatCapacityJK: 70_000 },
    cooling: {
      coolers: [
        {
          name: 'Radiator tank',
          construction: 'in-tank',
          position: 'radiator-tank',
          rating: {
            heatW: 5900,
            inletDifferenceK: 40,
            oilFlowM3S: 0.000126,
            coolantFlowM3S: 0.0028,
            pressureDropPa: 15_000,
            oilInC: 93.3,
          },
        },
        {
          name: 'Front cooler',
          construction: 'stacked-plate',
          position: 'ahead-of-condenser',
          faceAreaM2: 0.058,
          blockedFraction: 0,
          airShare: 0.55,
          rating: {
            heatW: 4750,
            inletDifferenceK: 55.56,
            oilFlowM3S: 0.000126,
            airVelocityMps: 4,
            pressureDropPa: 24_000,
            oilInC: 93.3,
          },
        },
      ],
      lines: { innerDiameterM: 0.0111, lengthM: 5.4, fittingsK: 8, roughnessM: 1e-5 },
      feed: { pressureMaxPa: 250_000, saturationRpm: 1400, openFlowM3S: 2.1e-4 },
      stack: { ramFraction: 0.18, blockedFraction: 0, fan: { drive: 'engine', faceVelocityMps: 4.8 } },
      radiator: {
        faceAreaM2: 0.53,
        rating: {
          heatW: 168_000,
          inletDifferenceK: 60,
          airVelocityMps: 6,
          coolantFlowM3S: 0.0046,
          pumpRpm: 2600,
        },
        thermostat: { openC: 86, fullC: 97 },
      },
      condenserW: 7000,
      underbodyRiseK: 15,
      coolantHeatCapacityJK: 210_000,
    },
  },
}

const MIDSIZE_4X4: Archetype = {
  id: 'midsize-4x4',
  name: 'Mid-size 4×4 V6',
  words:
    'A five-seat 4×4 wagon with a gasoline V6 and a five-speed automatic. The radiator tank is followed by the small tube cooler that comes with a tow package.',
  stockTireCode: '265/70R17',
  stockAxleRatio: 3.73,
  weights: { curbKg: 2010, loadedKg: 2220, grossKg: 2630, trailerKg: 2270 },
  build: {
    vehicle: { massKg: 2220, dragAreaM2: 1.12, tyreRadiusM: STOCK_RADIUS_M['midsize-4x4'] },
    engine: {
      fuel: 'petrol',
      induction: 'natural',
      peakTorqueNm: 372,
      peakTorqueRpm: 3900,
      peakPowerW: 184_000,
      peakPowerRpm: 5300,
      idleRpm: 670,
      redlineRpm: 5900,
      coolantHeatRatio: 0.95,
    },
    converter: {
      stallRpm: 2150,
      stallTorqueRatio: 1.95,
      couplingPoint: 0.88,
      heatCapacityJK: 11_000,
      oilShare: 0.35,
      lockup: { fitted: true, minGear: 3, minSpeedMps: 14, slipRpm: 30 },
    },
    transmission: {
      gears: [
        { ratio: 3.54, efficiency: 0.955 },
        { ratio: 2.06, efficiency: 0.965 },
        { ratio: 1.41, efficiency: 0.97 },
        { ratio: 1, efficiency: 0.985 },
        { ratio: 0.72, efficiency: 0.965 },
      ],
      fluid: { class: 'atf-low' },
      fluidVolumeM3: 0.0106,
      dryMassKg: 82,
      caseAreaM2: 0.72,
      shiftStyle: 'tow',
      pump: { displacementM3PerRev: 18e-6, linePressureMinPa: 0.5e6, linePressureMaxPa: 1.5e6 },
    },
    transferCase: {
      highRatio: 1,
      lowRatio: 2.57,
      efficiencyHigh: 0.985,
      efficiencyLow: 0.955,
      surfaceM2: 0.38,
      heatCapacityJK: 22_000,
    },
    axle: { ratio: 3.73, efficiency: 0.962, surfaceM2: 1, heatCapacityJK: 40_000 },
    cooling: {
      coolers: [
        {
          name: 'Radiator tank',
          construction: 'in-tank',
          position: 'radiator-tank',
          rating: {
            heatW: 4500,
            inletDifferenceK: 40,
            oilFlowM3S: 0.000126,
            coolantFlowM3S: 0.0017,
            pressureDropPa: 17_000,
            oilInC: 93.3,
          },
        },
        {
          name: 'Tow-package cooler',
          construction: 'tube-fin',
          position: 'ahead-of-condenser',
          faceAreaM2: 0.036,
          blockedFraction: 0,
          airShare: 0.45,
          rating: {
            heatW: 2150,
            inletDifferenceK: 55.56,
            oilFlowM3S: 0.000126,
            airVelocityMps: 4,
            pressureDropPa: 34_000,
            oilInC: 93.3,
          },
        },
      ],
      lines: { innerDiameterM: 0.0095, lengthM: 4.2, fittingsK: 6, roughnessM: 1e-5 },
      feed: { pressureMaxPa: 200_000, saturationRpm: 1500, openFlowM3S: 1.6e-4 },
      stack: { ramFraction: 0.18, blockedFraction: 0, fan: { drive: 'electric', faceVelocityMps: 2.8 } },
      radiator: {
        faceAreaM2: 0.36,
        rating: {
          heatW: 118_000,
          inletDifferenceK: 60,
          airVelocityMps: 6,
          coolantFlowM3S: 0.0028,
          pumpRpm: 3000,
        },
        thermostat: { openC: 86, fullC: 97 },
      },
      condenserW: 5500,
      underbodyRiseK: 15,
      coolantHeatCapacityJK: 130_000,
    },
  },
}

export const ARCHETYPES: readonly Archetype[] = [CLASSIC_4X4, DIESEL_PICKUP, MIDSIZE_4X4]

/** The archetype of an id; undefined for any other text. */
export function findArchetype(id: string): Archetype | undefined {
  return ARCHETYPES.find((archetype) => archetype.id === id)
}

/** A whole sheet of an archetype, every value typical. */
export function createArchetypeSheet(archetype: Archetype): BuildSheet {
  return { archetype: archetype.id, values: flattenBuild(archetype.build, 'typical') }
}
