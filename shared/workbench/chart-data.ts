import type { DriveCycleData } from '../charts/drive-cycle-chart'
import type { GradeBandPoint, GradeChartData, GradeSeries } from '../charts/grade-chart'
import type { HeatBudgetData } from '../charts/heat-budget'
import type { Estimate } from '../heat/types'
import type { Cooler, Duty } from '../schemas/heat-input'
import type { Limits } from '../schemas/limits'
import { segmentName } from './duty-edit'
import { chartLimits } from './grade-evidence'

/** The answer as the charts take it. */

/** Temperature along the drive cycle, stretch by stretch. */
export function driveCycleData(judged: Estimate, duty: Duty, limits: Limits): DriveCycleData {
  const { timeS, sumpC, coolerInletC, coolantC } = judged.series
  return {
    series: { timeS, sumpC, coolerInletC, coolantC },
    segments: judged.segments.map((result, index) => {
      const segment = duty.segments[index]
      return {
        name: segment ? segmentName(segment) : `Stretch ${index + 1}`,
        durationS: result.durationS,
        distanceM: result.distanceM,
        grade: segment && 'grade' in segment ? (segment.grade ?? 0) : 0,
        peakSumpC: result.peakSumpC,
        peakCoolerInletC: result.peakCoolerInletC,
      }
    }),
    limits: { sumpC: chartLimits('sump', limits), coolerInletC: chartLimits('hotLine', limits) },
  }
}

/** Heat in and out at the end of one stretch. */
export function heatBudgetData(
  judged: Estimate,
  duty: Duty,
  coolers: readonly Cooler[],
  index: number,
): HeatBudgetData | null {
  const result = judged.segments[index]
  const segment = duty.segments[index]
  if (!result || !segment) return null
  const { converterW, gearW, pumpW, shiftW } = result.heat
  return {
    moment: `At the end of “${index + 1}. ${segmentName(segment)}”, gear ${result.gear}, ${result.locked ? 'locked' : 'unlocked'}`,
    sources: { converterW, gearW, spinW: result.end.heatSpinW, pumpW, shiftW },
    coolers: result.end.coolerHeatW.map((heatW, place) => ({
      name: coolers[place]?.name ?? `Cooler ${place + 1}`,
      heatW,
    })),
    panCaseW: result.end.heatPanCaseW,
  }
}

/** The grade chart with what the deeper look adds: the band and the other set-ups. */
export function gradeChartData(
  grades: GradeChartData,
  others: readonly GradeSeries[] = [],
  band?: GradeBandPoint[],
): GradeChartData {
  return {
    ...grades,
    series: [
      ...grades.series.map((series) => (series.kind === 'present' && band ? { ...series, band } : series)),
      ...others,
    ],
  }
}
