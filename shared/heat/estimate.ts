import type { HeatInput, Segment } from '../schemas/heat-input'
import { AppError } from '../errors'
import { CONVERTER, COOLANT, SUMP, loneBodyAt } from './balances'
import type { ThermalPoint } from './balances'
import { equilibriumOf } from './equilibrium'
import { ageingFactor, referenceDamageRate, wallChartDistance } from './fluid-life'
import { integralOnStep, integrate, onStep, peakOnStep } from './integrator'
import type { StepRecord } from './integrator'
import type { OperatingPoint } from './operating-point'
import type { ResolvedFluidLife } from './resolve'
import { makeThermal, makeTruck, operatingPoints, segmentDuration, startTemperatures } from './truck'
import type { Truck } from './truck'
import type { Estimate, EstimateOptions, SegmentResult, Series, State } from './types'
import { MODEL_VERSION } from './version'
import { collectWarnings } from './warnings'

/** Drives a truck through its drive cycle and reports what happened. */

const DEFAULT_STEP_S = 10
/** Longest drive cycle [s] and longest series [points] one answer carries. */
export const LONGEST_DUTY_S = 1e6
export const LONGEST_SERIES = 200_000

/** Places and weights of three-point Gauss quadrature on a unit step. Source: Abramowitz & Stegun, table 25.4. */
const GAUSS = [
  [0.5 - Math.sqrt(0.15), 5 / 18],
  [0.5, 8 / 18],
  [0.5 + Math.sqrt(0.15), 5 / 18],
] as const

/** Sums over a drive so far. */
export interface Tally {
  peakSumpC: number
  peakCoolerInletC: number
  sumpIntegral: number
  /** Seconds at the reference temperature that age the fluid as much: in the sump, in the converter. */
  sumpAgeingS: number
  converterAgeingS: number
}

function tallyStep(tally: Tally, life: ResolvedFluidLife, step: StepRecord): void {
  tally.peakSumpC = Math.max(tally.peakSumpC, peakOnStep(step, SUMP))
  tally.peakCoolerInletC = Math.max(tally.peakCoolerInletC, peakOnStep(step, CONVERTER))
  tally.sumpIntegral += integralOnStep(step, SUMP)
  for (const [place, weight] of GAUSS) {
    tally.sumpAgeingS += weight * step.lengthS * ageingFactor(life, onStep(step, SUMP, place))
    tally.converterAgeingS += weight * step.lengthS * ageingFactor(life, onStep(step, CONVERTER, place))
  }
}

/** Writes the series' points that lie on a step, the segment's end excepted. */
class SeriesWriter {
  readonly series: Series = {
    timeS: [],
    sumpC: [],
    coolerInletC: [],
    coolerReturnC: [],
    coolantC: [],
    axleC: [],
    transferCaseC: [],
  }

  push(
    timeS: number,
    sumpC: number,
    inletC: number,
    returnC: number,
    coolantC: number,
    axleC: number,
    caseC: number,
  ) {
    const { series } = this
    series.timeS.push(timeS)
    series.sumpC.push(sumpC)
    series.coolerInletC.push(inletC)
    series.coolerReturnC.push(returnC)
    series.coolantC.push(coolantC)
    series.axleC.push(axleC)
    series.transferCaseC.push(caseC)
  }
}

interface SegmentRun {
  thermal: ThermalPoint
  durationS: number
  tally: Tally
  axleStartC: number
  transferCaseStartC: number
}

/** Drives one segment; `temperatures` becomes its end. */
function driveSegment(
  run: SegmentRun,
  temperatures: Float64Array,
  life: ResolvedFluidLife,
  output: { writer: SeriesWriter; startS: number; stepS: number } | null,
): void {
  const { thermal, tally } = run
  tally.peakSumpC = temperatures[SUMP]!
  tally.peakCoolerInletC = temperatures[CONVERTER]!
  const intervals = output === null ? 0 : Math.max(1, Math.ceil(run.durationS / output.stepS - 1e-9))
  let next = 1
  integrate(thermal, temperatures, run.durationS, (step) => {
    tallyStep(tally, life, step)
    if (output === null) return
    const endS = step.timeS + step.lengthS
    while (next < intervals && next * output.stepS <= endS) {
      const atS = next * output.stepS
      writePoint(run, step, atS, (atS - step.timeS) / step.lengthS, output)
      next++
    }
  })
}

function writePoint(
  run: SegmentRun,
  step: StepRecord,
  atS: number,
  share: number,
  output: { writer: SeriesWriter; startS: number },
): void {
  const { thermal } = run
  const sumpC = onStep(step, SUMP, share)
  const inletC = onStep(step, CONVERTER, share)
  const coolantC = onStep(step, COOLANT, share)
  thermal.circuit.evaluate(sumpC, inletC, coolantC)
  output.writer.push(
    output.startS + atS,
    sumpC,
    inletC,
    thermal.circuit.returnC,
    coolantC,
    loneBodyAt(thermal.axle, run.axleStartC, atS),
    loneBodyAt(thermal.transferCase, run.transferCaseStartC, atS),
  )
}

function checkLength(
  truck: Truck,
  segments: readonly Segment[],
  points: OperatingPoint[],
  stepS: number,
): void {
  let totalS = 0
  segments.forEach((segment, index) => {
    totalS += segmentDuration(segment, points[index]!)
  })
  if (totalS > LONGEST_DUTY_S || totalS / stepS > LONGEST_SERIES)
    throw new AppError('bad_input', {
      issues: [
        {
          path: 'duty.segments',
          message: `the drive cycle lasts ${Math.round(totalS)} s; at a step of ${stepS} s at most ${Math.min(LONGEST_DUTY_S, LONGEST_SERIES * stepS)} s fit into one answer: shorten it`,
        },
      ],
    })
}

function segmentResult(
  point: OperatingPoint,
  thermal: ThermalPoint,
  durationS: number,
  tally: Tally,
  end: State,
  equilibrium: State | null,
): SegmentResult {
  return {
    kind: point.kind,
    speedMps: point.speedMps,
    speedHeld: point.speedHeld,
    gear: point.gear,
    locked: point.locked,
    engineRpm: (point.engineSpeed * 30) / Math.PI,
    speedRatio: point.speedRatio,
    durationS,
    distanceM: point.speedMps * durationS,
    heat: thermal.heatSources(point, end.heatSpinW),
    peakSumpC: tally.peakSumpC,
    peakCoolerInletC: tally.peakCoolerInletC,
    end,
    equilibrium,
  }
}

/** State at rest of a segment, coming from given temperatures. */
export function equilibriumState(thermal: ThermalPoint, from: ArrayLike<number>): State {
  return thermal.stateAt(equilibriumOf(thermal, from), thermal.axle.endC, thermal.transferCase.endC)
}

const freshTally = (): Tally => ({
  peakSumpC: -Infinity,
  peakCoolerInletC: -Infinity,
  sumpIntegral: 0,
  sumpAgeingS: 0,
  converterAgeingS: 0,
})

/** Peaks of a drive cycle whose operating points are known: what sizing asks for, without series or equilibria. */
export function peaksOfDuty(
  truck: Truck,
  segments: readonly Segment[],
  points: readonly OperatingPoint[],
): { sumpC: number; coolerInletC: number } {
  const temperatures = startTemperatures(truck.resolved.start)
  const thermal = makeThermal(truck)
  const peaks = { sumpC: -Infinity, coolerInletC: -Infinity }
  segments.forEach((segment, index) => {
    thermal.set(points[index]!)
    peaks.sumpC = Math.max(peaks.sumpC, temperatures[SUMP]!)
    peaks.coolerInletC = Math.max(peaks.coolerInletC, temperatures[CONVERTER]!)
    integrate(thermal, temperatures, segmentDuration(segment, points[index]!), (step) => {
      peaks.sumpC = Math.max(peaks.sumpC, peakOnStep(step, SUMP))
      peaks.coolerInletC = Math.max(peaks.coolerInletC, peakOnStep(step, CONVERTER))
    })
  })
  return peaks
}

/**
 * How hot the fluid gets on a drive cycle.
 * @param input - truck, load, duty; accepted by `HeatInputSchema`
 * @param options - `stepS`, longest step of the series [s]
 * @returns temperatures, heats, fluid life, warnings
 * @throws AppError cannot_climb_grade, cannot_pull_away, cannot_hold_cruise, rating_impossible, model_refuses; bad_input
 * when the series would be too long
 */
export function estimate(input: HeatInput, options: EstimateOptions = {}): Estimate {
  const stepS = options.stepS ?? DEFAULT_STEP_S
  const truck = makeTruck(input)
  const { resolved } = truck
  const { segments } = input.duty
  const points = operatingPoints(truck, segments)
  checkLength(truck, segments, points, stepS)
  const temperatures = startTemperatures(resolved.start)
  let axleC = resolved.start.axleC
  let transferCaseC = resolved.start.axleC
  let timeS = 0
  let distanceM = 0
  const total = freshTally()
  const writer = new SeriesWriter()
  const thermal = makeThermal(truck)
  const results = segments.map((segment, index) => {
    const point = points[index]!
    thermal.set(point)
    const durationS = segmentDuration(segment, point)
    const run: SegmentRun = {
      thermal,
      durationS,
      tally: freshTally(),
      axleStartC: axleC,
      transferCaseStartC: transferCaseC,
    }
    if (index === 0) {
      thermal.circuit.evaluate(temperatures[SUMP]!, temperatures[CONVERTER]!, temperatures[COOLANT]!)
      const [sumpC, inletC, coolantC] = [
        temperatures[SUMP]!,
        temperatures[CONVERTER]!,
        temperatures[COOLANT]!,
      ]
      writer.push(0, sumpC, inletC, thermal.circuit.returnC, coolantC, axleC, transferCaseC)
    }
    driveSegment(run, temperatures, resolved.fluidLife, { writer, startS: timeS, stepS })
    axleC = loneBodyAt(thermal.axle, axleC, durationS)
    transferCaseC = loneBodyAt(thermal.transferCase, transferCaseC, durationS)
    const end = thermal.stateAt(temperatures, axleC, transferCaseC)
    timeS += durationS
    distanceM += point.speedMps * durationS
    writer.push(timeS, end.sumpC, end.coolerInletC, end.coolerReturnC, end.coolantC, axleC, transferCaseC)
    addTally(total, run.tally)
    const rest = segment.kind === 'stall' ? null : equilibriumState(thermal, temperatures)
    return segmentResult(point, thermal, durationS, run.tally, end, rest)
  })
  const answer = {
    modelVersion: MODEL_VERSION,
    segments: results,
    series: writer.series,
    ...lifeResults(total, resolved.fluidLife, resolved.masses.converterOilShare, timeS, distanceM),
  }
  return { ...answer, warnings: collectWarnings(input, truck, answer) }
}

function addTally(total: Tally, part: Tally): void {
  total.peakSumpC = Math.max(total.peakSumpC, part.peakSumpC)
  total.peakCoolerInletC = Math.max(total.peakCoolerInletC, part.peakCoolerInletC)
  total.sumpIntegral += part.sumpIntegral
  total.sumpAgeingS += part.sumpAgeingS
  total.converterAgeingS += part.converterAgeingS
}

/** Peaks, mean and fluid life of the whole duty. */
function lifeResults(
  tally: Tally,
  life: ResolvedFluidLife,
  converterOilShare: number,
  totalS: number,
  distanceM: number,
) {
  const rate = referenceDamageRate(life)
  const fluidDamageSumpOnly = rate * tally.sumpAgeingS
  const fluidDamage =
    (1 - converterOilShare) * fluidDamageSumpOnly + converterOilShare * rate * tally.converterAgeingS
  const meanSumpC = tally.sumpIntegral / totalS
  return {
    peakSumpC: tally.peakSumpC,
    peakCoolerInletC: tally.peakCoolerInletC,
    meanSumpC,
    totalS,
    distanceM,
    fluidDamage,
    fluidDamageSumpOnly,
    wallChart: {
      atMeanM: wallChartDistance(life, meanSumpC),
      atPeakM: wallChartDistance(life, tally.peakSumpC),
    },
    cyclesToFluidChange: 1 / fluidDamage,
    hoursToFluidChange: totalS / 3600 / fluidDamage,
    distanceToFluidChangeM: distanceM > 0 ? distanceM / fluidDamage : null,
  }
}
