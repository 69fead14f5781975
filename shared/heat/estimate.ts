import type { HeatInput, Segment } from '../schemas/heat-input'
import { AppError } from '../errors'
import { CONVERTER, SUMP, loneBodyAt } from './balances'
import type { ThermalPoint } from './balances'
import { equilibriumOf } from './equilibrium'
import { referenceDamageRate, wallChartDistance } from './fluid-life'
import { integrate, peakOnStep } from './integrator'
import type { OperatingPoint } from './operating-point'
import type { ResolvedFluidLife } from './resolve'
import { SeriesWriter, driveSegment, pointsOnSegment } from './series'
import type { SegmentRun } from './series'
import { addTally, freshTally } from './tally'
import type { Tally } from './tally'
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

function checkLength(durations: readonly number[], stepS: number): void {
  const totalS = durations.reduce((sum, durationS) => sum + durationS, 0)
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

/** A drive cycle driven: what happened on each segment, along the way and in sum. */
interface Drive {
  results: SegmentResult[]
  series: Series
  total: Tally
  totalS: number
  distanceM: number
}

/** Where the drive stands between two segments. */
interface DriveState {
  temperatures: Float64Array
  axleC: number
  transferCaseC: number
  timeS: number
}

/** Drives one segment from a state, which becomes its end; its points go to the writer, its sums to the total. */
function driveOn(
  truck: Truck,
  thermal: ThermalPoint,
  point: OperatingPoint,
  durationS: number,
  at: DriveState,
  output: { writer: SeriesWriter; stepS: number; total: Tally },
): SegmentResult {
  thermal.set(point)
  const { temperatures } = at
  const { axle, transferCase } = thermal
  const run: SegmentRun = {
    thermal,
    durationS,
    tally: freshTally(),
    axle,
    transferCase,
    axleStartC: at.axleC,
    transferCaseStartC: at.transferCaseC,
    startS: at.timeS,
    stepS: output.stepS,
    writer: output.writer,
  }
  if (at.timeS === 0) writeState(output.writer, at, thermal.stateAt(temperatures, at.axleC, at.transferCaseC))
  driveSegment(run, temperatures, truck.resolved.fluidLife)
  at.axleC = loneBodyAt(axle, at.axleC, durationS)
  at.transferCaseC = loneBodyAt(transferCase, at.transferCaseC, durationS)
  at.timeS += durationS
  const end = thermal.stateAt(temperatures, at.axleC, at.transferCaseC)
  writeState(output.writer, at, end)
  addTally(output.total, run.tally)
  const rest = point.kind === 'stall' ? null : equilibriumState(thermal, temperatures)
  return segmentResult(point, thermal, durationS, run.tally, end, rest)
}

function writeState(writer: SeriesWriter, at: DriveState, state: State): void {
  const { sumpC, coolerInletC, coolerReturnC, coolantC } = state
  writer.push(at.timeS, sumpC, coolerInletC, coolerReturnC, coolantC, at.axleC, at.transferCaseC)
}

function driveDuty(
  truck: Truck,
  points: readonly OperatingPoint[],
  durations: readonly number[],
  stepS: number,
): Drive {
  const { start } = truck.resolved
  const at = {
    temperatures: startTemperatures(start),
    axleC: start.axleC,
    transferCaseC: start.axleC,
    timeS: 0,
  }
  const writer = new SeriesWriter(
    durations.reduce((count, durationS) => count + pointsOnSegment(durationS, stepS), 1),
  )
  const thermal = makeThermal(truck)
  const total = freshTally()
  const results = points.map((point, index) =>
    driveOn(truck, thermal, point, durations[index]!, at, { writer, stepS, total }),
  )
  const distanceM = results.reduce((sum, result) => sum + result.distanceM, 0)
  return { results, series: writer.series, total, totalS: at.timeS, distanceM }
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
  const { fluidLife, masses } = truck.resolved
  const { segments } = input.duty
  const points = operatingPoints(truck, segments)
  const durations = segments.map((segment, index) => segmentDuration(segment, points[index]!))
  checkLength(durations, stepS)
  const drive = driveDuty(truck, points, durations, stepS)
  const answer = {
    modelVersion: MODEL_VERSION,
    segments: drive.results,
    series: drive.series,
    ...lifeResults(drive.total, fluidLife, masses.converterOilShare, drive.totalS, drive.distanceM),
  }
  return { ...answer, warnings: collectWarnings(input, truck, answer) }
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
