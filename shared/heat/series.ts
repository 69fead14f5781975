import { CONVERTER, COOLANT, SUMP, loneBodyAt } from './balances'
import type { LoneBody, ThermalPoint } from './balances'
import { integrate, onStep } from './integrator'
import type { StepRecord } from './integrator'
import type { ResolvedFluidLife } from './resolve'
import { tallyStep } from './tally'
import type { Tally } from './tally'
import type { Series } from './types'

/** Temperatures along a drive, at even times and at every segment's end. */

/** Points a segment adds to the series: even steps, the last of them its end. */
export function pointsOnSegment(durationS: number, stepS: number): number {
  return Math.max(1, Math.ceil(durationS / stepS - 1e-9))
}

/** Columns of a series of known length, filled point by point. */
export class SeriesWriter {
  readonly series: Series
  private next = 0

  constructor(points: number) {
    const column = () => new Array<number>(points)
    this.series = {
      timeS: column(),
      sumpC: column(),
      coolerInletC: column(),
      coolerReturnC: column(),
      coolantC: column(),
      axleC: column(),
      transferCaseC: column(),
    }
  }

  push(
    timeS: number,
    sumpC: number,
    coolerInletC: number,
    coolerReturnC: number,
    coolantC: number,
    axleC: number,
    transferCaseC: number,
  ): void {
    const { series } = this
    const at = this.next++
    series.timeS[at] = timeS
    series.sumpC[at] = sumpC
    series.coolerInletC[at] = coolerInletC
    series.coolerReturnC[at] = coolerReturnC
    series.coolantC[at] = coolantC
    series.axleC[at] = axleC
    series.transferCaseC[at] = transferCaseC
  }
}

/** One segment on its way. */
export interface SegmentRun {
  thermal: ThermalPoint
  durationS: number
  tally: Tally
  axle: LoneBody
  transferCase: LoneBody
  axleStartC: number
  transferCaseStartC: number
  /** Time at which the segment starts [s], and step of the series [s]. */
  startS: number
  stepS: number
  writer: SeriesWriter
}

/** Steps with more points than this take the return line from a parabola instead of solving it at each. */
const FEW_POINTS = 2

/** Drives one segment and writes its points, the end excepted; `temperatures` becomes its end. */
export function driveSegment(run: SegmentRun, temperatures: Float64Array, life: ResolvedFluidLife): void {
  const { thermal, tally, stepS } = run
  const { circuit } = thermal
  tally.peakSumpC = temperatures[SUMP]!
  tally.peakCoolerInletC = temperatures[CONVERTER]!
  circuit.evaluate(temperatures[SUMP]!, temperatures[CONVERTER]!, temperatures[COOLANT]!)
  let returnFromC = circuit.returnC
  const inner = pointsOnSegment(run.durationS, stepS) - 1
  let next = 1
  integrate(thermal, temperatures, run.durationS, (step) => {
    tallyStep(tally, life, step)
    // the integrator asked for the rates at the step's end last
    const returnToC = circuit.returnC
    const last = Math.min(inner, Math.floor((step.timeS + step.lengthS) / stepS + 1e-12))
    if (last - next >= FEW_POINTS) {
      const returnMiddleC = returnAt(thermal, step, 0.5)
      for (; next <= last; next++) {
        const share = Math.min(1, (next * stepS - step.timeS) / step.lengthS)
        const rest = 1 - share
        const returnC =
          rest * (rest - share) * returnFromC +
          4 * share * rest * returnMiddleC +
          share * (share - rest) * returnToC
        writePoint(run, step, next * stepS, share, returnC)
      }
    }
    for (; next <= last; next++) {
      const share = Math.min(1, (next * stepS - step.timeS) / step.lengthS)
      writePoint(run, step, next * stepS, share, returnAt(thermal, step, share))
    }
    returnFromC = returnToC
  })
}

/** Return line at a place on a step, solved [°C]. */
function returnAt({ circuit }: ThermalPoint, step: StepRecord, share: number): number {
  circuit.evaluate(onStep(step, SUMP, share), onStep(step, CONVERTER, share), onStep(step, COOLANT, share))
  return circuit.returnC
}

function writePoint(run: SegmentRun, step: StepRecord, atS: number, share: number, returnC: number): void {
  run.writer.push(
    run.startS + atS,
    onStep(step, SUMP, share),
    onStep(step, CONVERTER, share),
    returnC,
    onStep(step, COOLANT, share),
    loneBodyAt(run.axle, run.axleStartC, atS),
    loneBodyAt(run.transferCase, run.transferCaseStartC, atS),
  )
}
