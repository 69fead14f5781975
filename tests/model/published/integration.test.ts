import { describe, expect, it } from 'vitest'
import { CASE, COOLANT, CONVERTER, SUMP, ThermalPoint } from '#shared/heat/balances'
import { makeCoolingSystem } from '#shared/heat/cooling-system'
import { estimate } from '#shared/heat'
import { operatingPoint } from '#shared/heat/operating-point'
import { resolveInput } from '#shared/heat/resolve'
import type { HeatInput, Segment } from '#shared/schemas/heat-input'
import { plainTruck } from '../../support/plain-truck'
import { expectAbsolute } from '../../support/published'
import { odex, solveODE } from '../../support/untyped-packages'

/**
 * The six temperatures against two integrators that are not ours, on the same right-hand side: odex (extrapolation after
 * Hairer and Wanner, Solving Ordinary Differential Equations I, II.9) at 1e-9, and mathjs solveODE (Runge-Kutta 4(5), after
 * Dormand and Prince). Axle and transfer case, which the model has in closed form, are integrated here from their balances.
 */

const SIX = 6
const AXLE = 4
const TRANSFER_CASE = 5

/** Right-hand side and start of one segment, with the two lone bodies as differential equations again. */
function sixRates(input: HeatInput, segment: Segment) {
  const resolved = resolveInput(input)
  const point = new ThermalPoint(
    operatingPoint(resolved.powertrain, segment, 'duty.segments.0'),
    makeCoolingSystem(resolved),
    resolved.masses,
    resolved.calibration,
  )
  const four = new Float64Array(4)
  const fourRates = new Float64Array(4)
  const rates = (_time: number, temperatures: number[]): number[] => {
    for (let index = 0; index < 4; index++) four[index] = temperatures[index] ?? NaN
    point.rates(four, fourRates)
    return [
      ...fourRates,
      (point.axle.endC - (temperatures[AXLE] ?? NaN)) / point.axle.timeS,
      (point.transferCase.endC - (temperatures[TRANSFER_CASE] ?? NaN)) / point.transferCase.timeS,
    ]
  }
  const { sumpC, coolantC, axleC } = resolved.start
  return { rates, start: [sumpC, sumpC, sumpC, coolantC, axleC, axleC] }
}

function byOdex(rates: (t: number, y: number[]) => number[], start: number[], durationS: number): number[] {
  const solver = new odex.Solver(SIX)
  solver.absoluteTolerance = 1e-9
  solver.relativeTolerance = 1e-9
  solver.maxSteps = 200_000
  const answer = solver.solve(rates, 0, start, durationS)
  expect(answer.outcome).toBe(odex.Outcome.Converged)
  return answer.y
}

const DUTIES: Record<string, Segment> = {
  'a climb, unlocked': { kind: 'steady', speedMps: 18, grade: 0.06, durationS: 900 },
  'the flat, locked': { kind: 'steady', speedMps: 26, grade: 0, durationS: 1500 },
  'down the other side': { kind: 'steady', speedMps: 22, grade: -0.06, durationS: 700 },
  town: { kind: 'stopGo', speedMps: 13, stopsPerKm: 3, durationS: 1200 },
  'standing in gear': { kind: 'idle', inGear: true, durationS: 1800 },
  'a stall test': { kind: 'stall', throttle: 0.8, durationS: 8 },
}
const STARTS = {
  cold: { sumpC: -15, coolantC: -15, axleC: -15 },
  warm: { sumpC: 75, coolantC: 92, axleC: 60 },
  'far too hot': { sumpC: 140, coolantC: 110, axleC: 120 },
}

describe.each(Object.entries(DUTIES))('%s', (_name, segment) => {
  it.each(Object.entries(STARTS))('from %s ends where odex and mathjs end', (_start, start) => {
    const input = plainTruck({ segments: [segment], start })
    const end = estimate(input).segments[0]?.end
    if (end === undefined) throw new Error('no segment')
    const { rates, start: first } = sixRates(input, segment)
    const durationS = 'durationS' in segment ? (segment.durationS ?? NaN) : NaN
    const witness = byOdex(rates, first, durationS)
    const second = solveODE(rates, [0, durationS], first, { method: 'RK45', tol: 1e-7, maxIter: 1e6 })
    const last = second.y.at(-1) ?? []
    for (let index = 0; index < SIX; index++)
      // The two witnesses first: what they agree on is the answer.
      expectAbsolute(
        last[index] ?? NaN,
        witness[index] ?? NaN,
        0.005,
        `mathjs and odex, temperature ${index}`,
      )
    const ours: [string, number, number][] = [
      ['sump', end.sumpC, SUMP],
      ['hot line', end.coolerInletC, CONVERTER],
      ['case', end.caseC, CASE],
      ['coolant', end.coolantC, COOLANT],
      ['axle', end.axleC, AXLE],
      ['transfer case', end.transferCaseC, TRANSFER_CASE],
    ]
    for (const [name, value, index] of ours) expectAbsolute(value, witness[index] ?? NaN, 0.1, name)
  })
})
