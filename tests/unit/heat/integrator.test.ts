import { expm, matrix, multiply } from 'mathjs'
import { describe, expect, it } from 'vitest'
import { integralOnStep, integrate, onStep, peakOnStep } from '#shared/heat/integrator'
import type { StepRecord, StiffSystem } from '#shared/heat/integrator'
import { odex } from '../../support/untyped-packages'

/** A linear system of four bodies, x' = A (x - rest). */
function linearSystem(a: number[][], rest: number[]): StiffSystem {
  return {
    rates: (at, into) => {
      for (let row = 0; row < 4; row++)
        into[row] = (a[row] ?? []).reduce(
          (sum, slope, column) => sum + slope * ((at[column] ?? NaN) - (rest[column] ?? NaN)),
          0,
        )
    },
    jacobian: (_at, _rates, slopes) => slopes.set(a.flat()),
  }
}

/** Exact end of a linear system, by the matrix exponential of mathjs. */
function exactEnd(a: number[][], rest: number[], start: number[], durationS: number): number[] {
  const away = start.map((value, index) => value - (rest[index] ?? NaN))
  const grown = expm(matrix(a.map((row) => row.map((slope) => slope * durationS))))
  return (multiply(grown, away).valueOf() as number[]).map((value, index) => value + (rest[index] ?? NaN))
}

/** Sump, converter, case and coolant as they hang together; and a ring in which everything meets everything. */
const ARROW = [
  [-0.03, 0.01, 0.015, 0.004],
  [0.02, -0.02, 0, 0],
  [0.005, 0, -0.006, 0],
  [0.001, 0.002, 0, -0.4],
]
const RING = [
  [-0.05, 0.01, 0.01, 0.01],
  [0.02, -0.09, 0.03, 0.01],
  [0.003, 0.004, -0.02, 0.005],
  [0.01, 0.02, 0.03, -5],
]
const REST = [90, 110, 85, 95]
const START = [20, 25, 15, 60]

describe.each([
  ['an arrow', ARROW],
  ['a ring', RING],
])('integration of %s of four bodies', (_name, a) => {
  it.each([1, 37, 600, 20_000])('ends after %d s where the matrix exponential does', (durationS) => {
    const state = Float64Array.from(START)
    integrate(linearSystem(a, REST), state, durationS, () => undefined)
    const exact = exactEnd(a, REST, START, durationS)
    exact.forEach((value, index) => expect(Math.abs((state[index] ?? NaN) - value)).toBeLessThan(0.03))
  })

  it('needs no slopes of its own', () => {
    const [given, differenced] = [Float64Array.from(START), Float64Array.from(START)]
    const system = linearSystem(a, REST)
    integrate(system, given, 300, () => undefined)
    integrate(system.rates, differenced, 300, () => undefined)
    given.forEach((value, index) => expect(differenced[index]).toBeCloseTo(value, 4))
  })
})

describe('integration of a body with a steep switch', () => {
  /** Heated at 1 K/s; from 90 to 90.2 °C something opens that takes 3 K/s. */
  const rates = (at: ArrayLike<number>, into: Float64Array | number[]) => {
    for (let index = 0; index < 4; index++)
      into[index] = 1 - 3 * Math.min(1, Math.max(0, ((at[index] ?? NaN) - 90) / 0.2))
  }

  it('stays where the switch holds it, like odex', () => {
    const state = Float64Array.from([60, 80, 95, 120])
    const steps = integrate(rates, state, 200, () => undefined)
    const solver = new odex.Solver(4)
    solver.absoluteTolerance = solver.relativeTolerance = 1e-9
    solver.maxSteps = 500_000
    const witness = solver.solve(
      (_time, at) => {
        const into = [0, 0, 0, 0]
        rates(at, into)
        return into
      },
      0,
      [60, 80, 95, 120],
      200,
    )
    witness.y.forEach((value, index) => expect(Math.abs((state[index] ?? NaN) - value)).toBeLessThan(0.02))
    expect(steps).toBeLessThan(400)
  })
})

describe('the cubic on a step', () => {
  const step: StepRecord = {
    timeS: 0,
    lengthS: 10,
    from: Float64Array.from([70, 0, 0, 0]),
    to: Float64Array.from([72, 0, 0, 0]),
    fromRates: Float64Array.from([1, 0, 0, 0]),
    toRates: Float64Array.from([-0.6, 0, 0, 0]),
  }

  it('meets both ends', () => {
    expect(onStep(step, 0, 0)).toBe(70)
    expect(onStep(step, 0, 1)).toBe(72)
  })

  it('has its top and its area where a fine sampling of it has them', () => {
    const shares = Array.from({ length: 20_001 }, (_, index) => index / 20_000)
    const values = shares.map((share) => onStep(step, 0, share))
    expect(peakOnStep(step, 0)).toBeCloseTo(Math.max(...values), 6)
    const area =
      values.reduce((sum, value) => sum + value, 0) * (10 / 20_000) - 0.5 * (70 + 72) * (10 / 20_000)
    expect(integralOnStep(step, 0)).toBeCloseTo(area, 5)
  })
})
