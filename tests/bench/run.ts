import { readFileSync } from 'node:fs'
import * as math from 'mathjs'
import { COUPLED } from '../../shared/heat/balances'
import { estimate, replay, sizing, sweep } from '../../shared/heat'
import { integrate } from '../../shared/heat/integrator'
import { makeThermal, makeTruck, operatingPoints, startTemperatures } from '../../shared/heat/truck'
import type { ReplayRequest, SizingRequest, SweepRequest } from '../../shared/schemas/estimate'
import type { HeatInput, Segment } from '../../shared/schemas/heat-input'

/**
 * How fast the heat model is: ratios of one run, which a busy machine moves little, and absolute figures. A report, not a
 * test: it always ends well.
 */

interface WholeTruck {
  input: HeatInput
  sizing: { request: Omit<SizingRequest, 'input'> }
}

const load = (name: string) =>
  JSON.parse(readFileSync(new URL(`../model/cases/${name}.json`, import.meta.url), 'utf8')) as WholeTruck

/**
 * Best time of a call [ms], `batch` calls to a timing, after a warm-up. A timing is the wall's or the processor's,
 * whichever is less: where the machine is shared, longer calls are never left alone.
 */
function bestMs(call: () => unknown, repeats: number, batch = 1): number {
  for (let index = 0; index < Math.max(20, repeats / 2); index++) call()
  let best = Infinity
  for (let index = 0; index < repeats; index++) {
    const processor = process.cpuUsage()
    const start = performance.now()
    for (let k = 0; k < batch; k++) call()
    const wallMs = performance.now() - start
    const { user, system } = process.cpuUsage(processor)
    const processorMs = (user + system) / 1000
    // the processor's clock is too coarse for short timings
    best = Math.min(best, (processorMs > 2 ? Math.min(wallMs, processorMs) : wallMs) / batch)
  }
  return best
}

/** Best times of several calls whose ratios matter, taken in turns so that a busy moment meets all alike. */
function bestTogether(
  calls: readonly (readonly [call: () => unknown, repeats: number, batch: number])[],
): number[] {
  const best = calls.map(() => Infinity)
  for (let round = 0; round < ROUNDS; round++)
    calls.forEach(([call, repeats, batch], index) => {
      best[index] = Math.min(best[index] ?? NaN, bestMs(call, repeats, batch))
    })
  return best
}

const ROUNDS = 8
const truck = load('highway-tow')
const climb: Segment = { kind: 'steady', speedMps: 20, grade: 0.06, durationS: 600 }
const climbInput: HeatInput = { ...truck.input, duty: { ...truck.input.duty, segments: [climb] } }
const made = makeTruck(climbInput)
const [point] = operatingPoints(made, [climb])
if (point === undefined) throw new Error('no operating point')
const operating = point

/** Our integration of the climb, circuit set up anew each time. */
function ourSegment(): Float64Array {
  const thermal = makeThermal(made)
  thermal.set(operating)
  const temperatures = startTemperatures(made.resolved.start)
  integrate(thermal, temperatures, 600, () => undefined)
  return temperatures
}

type SolveOde = (
  rates: (time: number, temperatures: number[]) => number[],
  span: [number, number],
  start: number[],
  options: { method: 'RK45'; tol: number; maxIter: number },
) => { t: number[]; y: number[][] }
// mathjs ships no type for solveODE
const { solveODE } = math as unknown as { solveODE: SolveOde }

/** The same right-hand side, integrated by mathjs. */
function theirSegment(tolerance: number): number[] {
  const thermal = makeThermal(made)
  thermal.set(operating)
  const at = new Float64Array(COUPLED)
  const into = new Float64Array(COUPLED)
  const rates = (_time: number, temperatures: number[]) => {
    at.set(temperatures)
    thermal.rates(at, into)
    return Array.from(into)
  }
  const start = Array.from(startTemperatures(made.resolved.start))
  const { y } = solveODE(rates, [0, 600], start, { method: 'RK45', tol: tolerance, maxIter: 1e6 })
  return y.at(-1) ?? []
}

/** Loosest of mathjs's tolerances that still ends within 0.1 K of its tightest. */
function fairTolerance(): number {
  const exact = theirSegment(1e-8)
  const close = (tolerance: number) =>
    theirSegment(tolerance).every((value, index) => Math.abs(value - (exact[index] ?? NaN)) <= 0.1)
  return [1, 0.3, 0.1, 0.03, 0.01, 1e-3, 1e-4, 1e-5].find(close) ?? 1e-6
}

/** A duty of back-and-forth climbs and descents of a given length. */
function rollingDuty(hours: number): HeatInput {
  const segments: Segment[] = []
  for (let k = 0; k < 12 * hours; k++)
    segments.push({ kind: 'steady', speedMps: 20, grade: k % 2 === 0 ? 0.05 : 0, durationS: 300 })
  return { ...truck.input, duty: { ...truck.input.duty, segments } }
}

/** An hour at 1 Hz over rolling country. */
function hourTrace(): ReplayRequest['trace'] {
  const timeS = Array.from({ length: 3600 }, (_, index) => index)
  return {
    timeS,
    speedMps: timeS.map((t) => 18 + 6 * Math.sin(t / 40) + Math.sin(t / 7.3)),
    grade: timeS.map((t) => 0.02 + 0.02 * Math.sin(t / 130)),
  }
}

const tolerance = fairTolerance()
const oneHour = rollingDuty(1)
const tenHours = rollingDuty(10)
const [segmentMs = NaN, theirsMs = NaN, estimateMs = NaN, oneHourMs = NaN, tenHoursMs = NaN] = bestTogether([
  [ourSegment, 60, 5],
  [() => theirSegment(tolerance), 8, 1],
  [() => estimate(truck.input), 80, 1],
  [() => estimate(oneHour), 40, 1],
  [() => estimate(tenHours), 10, 1],
])
const grades = Array.from({ length: 21 }, (_, index) => index * 0.005)
const sweeps: SweepRequest = { input: truck.input, speedMps: 20, grades }
const setUps = [0.05, 0.07, 0.09].map((faceAreaM2): SweepRequest => {
  const input = structuredClone(truck.input)
  const cooler = input.build.cooling.coolers[1]
  if (cooler !== undefined && cooler.construction !== 'in-tank') cooler.faceAreaM2 = faceAreaM2
  return { ...sweeps, input }
})
const trace = hourTrace()

console.log('ratios of this run')
const ratio = (name: string, value: number, limit: string) =>
  console.log(`  ${name.padEnd(64)} ${value.toFixed(1).padStart(8)}   wanted ${limit}`)
ratio(
  `mathjs solveODE (tol ${tolerance}, within 0.1 K) : one 600 s segment`,
  theirsMs / segmentMs,
  'at least 25',
)
ratio('estimate of five segments with equilibria and series : segment', estimateMs / segmentMs, 'at most 12')
ratio('ten hours of duty : one hour', tenHoursMs / oneHourMs, 'at most 11')

console.log('best times on this machine')
const figure = (name: string, ms: number, trial: string) =>
  console.log(`  ${name.padEnd(64)} ${ms.toFixed(3).padStart(8)} ms   trial ${trial}`)
figure('one 600 s segment', segmentMs, '-')
figure('the same by mathjs solveODE', theirsMs, '-')
figure('estimate with equilibria and 10 s series', estimateMs, '0.24 ms')
figure(
  'estimate with 1 s series',
  bestMs(() => estimate(truck.input, { stepS: 1 }), 200),
  '-',
)
figure(
  'sweep, 21 grades, 3 set-ups',
  bestMs(() => setUps.map(sweep), 200),
  '0.74 ms',
)
for (const name of ['highway-tow', 'hot-town', 'low-range-trail']) {
  const { input, sizing: sized } = load(name)
  const request = { input, ...sized.request }
  figure(
    `sizing, ${name}, ${request.basis}`,
    bestMs(() => sizing(request), 100),
    '0.6-1.7 ms',
  )
}
figure(
  'replay of 1 h at 1 Hz',
  bestMs(() => replay({ input: truck.input, trace }), 30),
  '6 ms',
)
