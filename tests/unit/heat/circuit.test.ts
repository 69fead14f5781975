import { describe, expect, it } from 'vitest'
import { CASE, CONVERTER, COOLANT, SUMP } from '#shared/heat/balances'
import { kinematicViscosity } from '#shared/heat/fluids'
import { LoopTable, SharedLoopTables, makeLoopState, solveLoopState } from '#shared/heat/loop-flow'
import { makeThermal, makeTruck, operatingPoints } from '#shared/heat/truck'
import type { Cooler, HeatInput } from '#shared/schemas/heat-input'
import { plainTruck } from '../../support/plain-truck'

const climb = { kind: 'steady', speedMps: 18, grade: 0.05, durationS: 600 } as const

/** The plain truck with other coolers or a bypass. */
function truckWith(change: (cooling: HeatInput['build']['cooling']) => void): HeatInput {
  const input = plainTruck({ segments: [climb], airConditioning: true })
  change(input.build.cooling)
  return input
}

const remote: Cooler = {
  name: 'under the bed',
  construction: 'tube-fin',
  position: 'remote',
  faceAreaM2: 0.06,
  fanFlowM3S: 0.2,
  rating: {
    heatW: 3000,
    inletDifferenceK: 55.56,
    oilFlowM3S: 1.26e-4,
    airVelocityMps: 4,
    pressureDropPa: 30_000,
  },
}

const TRUCKS: Record<string, HeatInput> = {
  'tank and stack in series': truckWith(() => undefined),
  'tank and stack in parallel': truckWith(({ coolers }) => {
    const second = coolers[1]
    if (second !== undefined) second.parallelWithPrevious = true
  }),
  'a remote cooler behind a bypass': truckWith((cooling) => {
    cooling.coolers.push(remote)
    cooling.bypass = { openC: 70, fullC: 95 }
  }),
  'no cooler at all': truckWith((cooling) => {
    cooling.coolers.length = 0
  }),
}

/** Sump, converter, case, coolant: thermostat shut, half open, wide open; bypass likewise; cold and hot. */
const STATES = [
  [-30, 20, -30, -10],
  [40, 68, 38, 80],
  [75, 84, 70, 91.3],
  [95, 130, 88, 93.7],
  [120, 160, 112, 112],
]

describe.each(Object.entries(TRUCKS))('the circuit with %s', (_name, input) => {
  const truck = makeTruck(input)
  const [point] = operatingPoints(truck, input.duty.segments)
  const thermal = makeThermal(truck)
  if (point !== undefined) thermal.set(point)

  it.each(STATES)('has the slopes of its own rates at %d, %d, %d, %d °C', (...state) => {
    const at = Float64Array.from(state)
    const rates = new Float64Array(4)
    const slopes = new Float64Array(16)
    thermal.rates(at, rates)
    thermal.jacobian(at, rates, slopes)
    const [above, below] = [new Float64Array(4), new Float64Array(4)]
    for (let column = 0; column < 4; column++) {
      const step = 1e-3
      const moved = Float64Array.from(state)
      moved[column] = (state[column] ?? NaN) + step
      thermal.rates(moved, above)
      moved[column] = (state[column] ?? NaN) - step
      thermal.rates(moved, below)
      for (let row = 0; row < 4; row++) {
        const difference = ((above[row] ?? NaN) - (below[row] ?? NaN)) / (2 * step)
        expect(slopes[row * 4 + column]).toBeCloseTo(difference, 5)
      }
    }
  })

  it.each(STATES)('gives off what it takes at %d, %d, %d, %d °C', (...state) => {
    const at = thermal.stateAt(state, 60, 60)
    const oilRate =
      (thermal.masses.oil.density15KgM3 - 0.62 * (at.sumpC - 15)) * at.coolerFlowM3S * (1800 + 4 * at.sumpC)
    expect(at.coolerHeatW.reduce((sum, heat) => sum + heat, 0)).toBeCloseTo(at.heatCoolersW, 6)
    expect(oilRate * (at.coolerInletC - at.coolerReturnC)).toBeCloseTo(at.heatCoolersW, 4)
  })

  it('answers the same however it was asked before', () => {
    const [first, second] = [new Float64Array(4), new Float64Array(4)]
    for (const state of STATES) {
      const at = Float64Array.from(state)
      thermal.rates(at, first)
      thermal.rates(Float64Array.from([61, 62, 63, 94]), second)
      thermal.rates(at, second)
      expect(second).toEqual(first)
    }
  })
})

describe('the tables of the cooler loop', () => {
  const truck = makeTruck(TRUCKS['tank and stack in parallel'] as HeatInput)
  const { loop } = truck.system

  /** Within 0.1 % at -38 °C, where the viscosity doubles every 8 K, 0.06 % where a line turns turbulent. */
  const expectClose = (read: number | undefined, solved: number | undefined, sumpC: number) =>
    expect(Math.abs((read ?? NaN) / (solved ?? NaN) - 1)).toBeLessThan(sumpC < -20 ? 1.2e-3 : 8e-4)

  it('agree with the loop solved directly', () => {
    const read = makeLoopState(2)
    const solved = makeLoopState(2)
    for (const share of [1, 0.47]) {
      const table = new LoopTable(loop, share)
      const shared = new SharedLoopTables(loop)
      shared.feedShare = share
      for (let sumpC = -55; sumpC < 300; sumpC += 3.7) {
        solveLoopState(loop, sumpC, kinematicViscosity(loop.oil, sumpC), share, solved)
        for (const source of [table, shared]) {
          source.read(sumpC, read)
          expectClose(read.volumeFlow, solved.volumeFlow, sumpC)
          expectClose(read.oilCapacityRate, solved.oilCapacityRate, sumpC)
          expectClose(read.spinFactor, solved.spinFactor, sumpC)
          for (const index of [0, 1]) {
            expectClose(read.oilSide[index], solved.oilSide[index], sumpC)
            expectClose(read.shares[index], solved.shares[index], sumpC)
          }
        }
      }
    }
  })

  it('split a parallel flow so that both pressure drops are equal', () => {
    const state = makeLoopState(2)
    for (const sumpC of [-20, 40, 100]) {
      const viscosity = kinematicViscosity(loop.oil, sumpC)
      solveLoopState(loop, sumpC, viscosity, 0.8, state)
      const drops = loop.coolers.map(
        (cooler, index) =>
          cooler.ratedDropPa *
          ((state.volumeFlow * (state.shares[index] ?? NaN)) / cooler.ratedOilFlowM3S) **
            cooler.law.dropFlowExponent *
          (viscosity / cooler.ratedViscosityMmSqS) ** cooler.law.dropViscosityExponent,
      )
      expect((state.shares[0] ?? NaN) + (state.shares[1] ?? NaN)).toBeCloseTo(1, 9)
      expect((drops[0] ?? NaN) / (drops[1] ?? NaN)).toBeCloseTo(1, 6)
    }
  })
})

describe('names of the coupled temperatures', () => {
  it('stand for four different places', () => {
    expect(new Set([SUMP, CONVERTER, CASE, COOLANT]).size).toBe(4)
  })
})
