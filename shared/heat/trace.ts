import type { Trace } from '../schemas/estimate'
import type { Road } from './resolve'

/** Reading a log: grade from altitude, one value per sample for what the log says once or per sample. */

/** Length of travel over which altitude becomes grade [m]. Judgement: longer than GPS noise, shorter than a hill. */
const GRADE_WINDOW_M = 100

/**
 * Grade along a log from its altitudes: slope of a least-squares line through the samples within 50 m of travel to
 * either side, and at least through the neighbours.
 * @param timeS - times, rising [s]
 * @param speedMps - speeds [m/s]
 * @param altitudeM - altitudes [m]
 * @returns grade at each sample, rise over travel; 0 where the truck does not move at all
 * Source: moving least squares; window by judgement.
 */
export function gradesFromAltitude(
  timeS: readonly number[],
  speedMps: readonly number[],
  altitudeM: readonly number[],
): number[] {
  const count = timeS.length
  const travel = new Float64Array(count)
  for (let k = 1; k < count; k++)
    travel[k] = travel[k - 1]! + 0.5 * (speedMps[k]! + speedMps[k - 1]!) * (timeS[k]! - timeS[k - 1]!)
  const grades: number[] = []
  let first = 0
  let last = 0
  const sums = { count: 0, s: 0, z: 0, ss: 0, sz: 0 }
  const base = altitudeM[0]!
  const add = (k: number, sign: 1 | -1) => {
    const [s, z] = [travel[k]!, altitudeM[k]! - base]
    sums.count += sign
    sums.s += sign * s
    sums.z += sign * z
    sums.ss += sign * s * s
    sums.sz += sign * s * z
  }
  add(0, 1)
  for (let k = 0; k < count; k++) {
    const reach = Math.min(count - 1, k + 1)
    while (last < reach || (last + 1 < count && travel[last + 1]! <= travel[k]! + GRADE_WINDOW_M / 2))
      add(++last, 1)
    while (first < k - 1 && travel[first]! < travel[k]! - GRADE_WINDOW_M / 2) add(first++, -1)
    const spread = sums.ss - (sums.s * sums.s) / sums.count
    grades.push(spread > 1e-3 ? (sums.sz - (sums.s * sums.z) / sums.count) / spread : 0)
  }
  return grades
}

/** Grade of each sample: as logged, or from altitude. */
export function traceGrades(trace: Trace): readonly number[] {
  if (trace.grade !== undefined) return trace.grade
  return gradesFromAltitude(trace.timeS, trace.speedMps, trace.altitudeM ?? trace.timeS.map(() => 0))
}

/** What holds between sample `index` and the next: levers and surface as at `index`, wind the mean of the two. */
export function traceRoad(trace: Trace, index: number): Road {
  const { surface, range, topGear, headwindMps } = trace
  return {
    surface: Array.isArray(surface) ? surface[index] : surface,
    range: Array.isArray(range) ? range[index] : range,
    topGear: Array.isArray(topGear) ? topGear[index] : topGear,
    headwindMps: Array.isArray(headwindMps)
      ? 0.5 * (headwindMps[index]! + headwindMps[index + 1]!)
      : headwindMps,
  }
}

/** Whether a log says anything about road or levers sample by sample. */
export function isRoadPerSample({ surface, range, topGear, headwindMps }: Trace): boolean {
  return [surface, range, topGear, headwindMps].some(Array.isArray)
}
