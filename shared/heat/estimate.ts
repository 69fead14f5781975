import type { HeatInput, Segment } from '../schemas/heat-input'
import { AppError } from '../errors'
import { CONVERTER, COOLANT, SUMP, loneBodyAt } from './balances'
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
import type { Estimate, EstimateOptions, SegmentResult, State } from './types'
import { MODEL_VERSION } from './version'
import { collectWarnings } from './warnings'

/** Drives a truck through its drive cycle and reports what happened. */

const DEFAULT_STEP_S = 10
/** Longest drive cycle [s] and longest series [points] one answer carries. */
export const LONGEST_DUTY_S = 1e6
export const LONGEST_SERIES = 200_000

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
  const durations = segments.map((segment, index) => segmentDuration(segment, points[index]!))
  const writer = new SeriesWriter(
    durations.reduce((count, durationS) => count + pointsOnSegment(durationS, stepS), 1),
  )
  const thermal = makeThermal(truck)
  const total = freshTally()
  const results = points.map((point, index) => {
    thermal.set(point)
    const durationS = durations[index]!
    const run: SegmentRun = {
      thermal,
      durationS,
      tally: freshTally(),
      axleStartC: axleC,
      transferCaseStartC: transferCaseC,
      startS: timeS,
      stepS,
      writer,
    }
    if (index === 0) {
      const [sumpC, inletC, coolantC] = [
        temperatures[SUMP]!,
        temperatures[CONVERTER]!,
        temperatures[COOLANT]!,
      ]
      thermal.circuit.evaluate(sumpC, inletC, coolantC)
      writer.push(0, sumpC, inletC, thermal.circuit.returnC, coolantC, axleC, transferCaseC)
    }
    driveSegment(run, temperatures, resolved.fluidLife)
    axleC = loneBodyAt(thermal.axle, axleC, durationS)
    transferCaseC = loneBodyAt(thermal.transferCase, transferCaseC, durationS)
    const end = thermal.stateAt(temperatures, axleC, transferCaseC)
    timeS += durationS
    distanceM += point.speedMps * durationS
    writer.push(timeS, end.sumpC, end.coolerInletC, end.coolerReturnC, end.coolantC, axleC, transferCaseC)
    addTally(total, run.tally)
    const rest = point.kind === 'stall' ? null : equilibriumState(thermal, temperatures)
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
