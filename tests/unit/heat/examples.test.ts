import { describe, expect, it } from 'vitest'
import { airDensity, naturalTorqueShare, pressureAtAltitude } from '#shared/heat/air'
import { surfaceHeatTransfer } from '#shared/heat/balances'
import { capacityFactor, solveSpeedRatio, torqueRatio } from '#shared/heat/converter'
import { crossFlowEffectiveness, ntuForEffectiveness } from '#shared/heat/effectiveness'
import { makeTorqueCurve, torqueAt } from '#shared/heat/engine'
import { ageingFactor } from '#shared/heat/fluid-life'
import { kinematicViscosity, makeOil, oilDensity, oilHeatCapacity } from '#shared/heat/fluids'
import { churchillFrictionFactor, linePressureDrop } from '#shared/heat/friction'
import { upshiftEnergy } from '#shared/heat/operating-point'
import { pumpTorque, spinTorque, spinViscosityFactor } from '#shared/heat/parasitic-losses'
import { makePchip, pchipAt } from '#shared/heat/pchip'
import { heatAtReferencePoint } from '#shared/heat/reference-point'
import { DEFAULTS, defaultStallTorque } from '#shared/heat/resolve'
import { roadForce } from '#shared/heat/road-load'
import { findRoot } from '#shared/heat/roots'

/**
 * The examples of the doc comments. Those marked "computed here" only keep comment and code together; evidence from
 * outside is in tests/model/published and tests/model/cases.
 */

const oil = makeOil({ class: 'atf-standard' })
const rpm = Math.PI / 30

const EXAMPLES: [name: string, value: number | undefined, printed: number, digits: number][] = [
  ['kinematicViscosity', kinematicViscosity(oil, 75), 12.5, 1],
  ['oilDensity', oilDensity(oil, 100), 802.3, 1],
  ['oilHeatCapacity', oilHeatCapacity(80), 2120, 0],
  ['pressureAtAltitude', pressureAtAltitude(1000), 89_875, 0],
  ['airDensity', airDensity(101_325, 25), 1.184, 3],
  ['naturalTorqueShare', naturalTorqueShare(90_000, 25), 0.894, 3],
  [
    'roadForce',
    roadForce(
      {
        massKg: 5000,
        dragAreaM2: 3.2,
        airDensityKgM3: 1.09,
        rollingResistance: 0.01,
        grade: 0.06,
        headwindMps: 0,
      },
      20,
    ),
    4124,
    0,
  ],
  ['makePchip', pchipAt(makePchip([0, 1, 2], [0, 1, 4]), 0.5), 0.3125, 4],
  [
    'makeTorqueCurve',
    torqueAt(
      makeTorqueCurve({
        fuel: 'petrol',
        induction: 'natural',
        peakTorqueNm: 455,
        peakTorqueRpm: 3200,
        peakPowerW: 198_000,
        peakPowerRpm: 4700,
        idleRpm: 700,
        redlineRpm: 5500,
      }),
      4700 * rpm,
    ),
    402.3,
    1,
  ],
  ['pumpTorque', pumpTorque(DEFAULTS.pump, 0, 455), 2.06, 2],
  ['spinTorque', spinTorque(455, 2000 * rpm), 4.1, 1],
  ['spinViscosityFactor', spinViscosityFactor(16), 1.23, 2],
  ['capacityFactor', capacityFactor(0.6), 0.797, 3],
  ['torqueRatio', torqueRatio(0.44, 2, 0.88), 1.5, 3],
  [
    'solveSpeedRatio',
    solveSpeedRatio({ stallCapacity: 0.01, stallTorqueRatio: 2, couplingPoint: 0.88 }, 200, 100),
    0.6726,
    4,
  ],
  ['crossFlowEffectiveness', crossFlowEffectiveness(2.5, 0.6), 0.7632, 4],
  ['ntuForEffectiveness', ntuForEffectiveness(0.7632, 0.6), 2.5, 2],
  ['churchillFrictionFactor', churchillFrictionFactor(1e5, 1e-4), 0.01846, 5],
  [
    'linePressureDrop',
    linePressureDrop(
      { innerDiameterM: 0.0095, lengthM: 4.2, fittingsK: 6, roughnessM: 1e-5 },
      1.26e-4,
      810,
      9,
    ) / 1000,
    27,
    1,
  ],
  ['defaultStallTorque', defaultStallTorque(400, DEFAULTS.pump, 455), 394.9, 1],
  ['upshiftEnergy', upshiftEnergy(300, 80), 8000, 0],
  ['surfaceHeatTransfer', surfaceHeatTransfer(8), 39, 1],
  ['ageingFactor', ageingFactor(DEFAULTS.fluidLife, (195 - 32) / 1.8), 2, 3],
  ['heatAtReferencePoint', heatAtReferencePoint(oil, 100, 0.05), 3678, 0],
  ['findRoot', findRoot((x) => x ** 3 - 2, 1, 2, -1, 6, 1e-9), 1.259921, 6],
]

describe('examples of the doc comments', () => {
  it.each(EXAMPLES)('%s', (_name, value, printed, digits) => {
    expect(Math.abs((value ?? NaN) - printed)).toBeLessThanOrEqual(0.5000001 * 10 ** -digits)
  })
})
