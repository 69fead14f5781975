import { AppError } from '../errors'
import { GradeRunner } from './sweep'
import { makeTruck } from './truck'
import type { GradeHeld, GradeHeldRequest, GradeLimit } from './types'

/** The steepest grade a truck holds within its temperature limits. */

const DEFAULT_MAX_GRADE = 0.3
const SCAN_STEP = 0.005
const BISECTIONS = 24

/** Which limit a grade breaks, or none. */
function brokenLimit(runner: GradeRunner, limits: GradeHeldRequest['limits'], grade: number): GradeLimit {
  let answer
  try {
    const point = runner.drive(grade, 'grade')
    if (!point.speedHeld) return 'speed'
    answer = runner.answer(grade, point)
  } catch (error) {
    if (error instanceof AppError && error.code === 'cannot_climb_grade') return 'speed'
    throw error
  }
  const sumpOver = limits.sumpC === undefined ? -Infinity : answer.sumpC - limits.sumpC
  const inletOver = limits.coolerInletC === undefined ? -Infinity : answer.coolerInletC - limits.coolerInletC
  if (sumpOver <= 0 && inletOver <= 0) return 'none'
  return sumpOver >= inletOver ? 'sumpC' : 'coolerInletC'
}

/**
 * Steepest grade up to which the truck holds its speed and stays within limits on every gentler grade too: a steeper one
 * beyond a gear change may run cooler again, but nobody can drive only that one.
 * @param request - input, speed, limits, and how far to look
 * @returns the grade, to about 1e-9, and the limit that ends it
 * @throws AppError rating_impossible, model_refuses
 */
export function findGradeHeld(request: GradeHeldRequest): GradeHeld {
  const maxGrade = request.maxGrade ?? DEFAULT_MAX_GRADE
  const runner = new GradeRunner(
    makeTruck(request.input),
    request.speedMps,
    request.segment,
    request.climb,
    request.foot,
  )
  const broken = (grade: number) => brokenLimit(runner, request.limits, grade)
  const flat = broken(0)
  if (flat !== 'none') return { grade: null, endedBy: flat }
  const steps = Math.ceil(maxGrade / SCAN_STEP)
  let good = 0
  for (let step = 1; step <= steps; step++) {
    let bad = Math.min(maxGrade, step * SCAN_STEP)
    let endedBy = broken(bad)
    if (endedBy === 'none') {
      good = bad
      continue
    }
    for (let k = 0; k < BISECTIONS; k++) {
      const middle = 0.5 * (good + bad)
      const limit = broken(middle)
      if (limit === 'none') good = middle
      else [bad, endedBy] = [middle, limit]
    }
    return { grade: good, endedBy }
  }
  return { grade: maxGrade, endedBy: 'none' }
}
