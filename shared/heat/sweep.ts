import type { Climb, RoadConditions, SweepRequest } from '../schemas/estimate'
import { AppError } from '../errors'
import { CASE, COOLANT, CONVERTER, SUMP } from './balances'
import type { ThermalPoint } from './balances'
import { equilibriumOf } from './equilibrium'
import { integrate } from './integrator'
import { operatingPoint } from './operating-point'
import type { OperatingPoint } from './operating-point'
import { resolveStart } from './resolve'
import { makeThermal, makeTruck, startTemperatures } from './truck'
import type { Truck } from './truck'
import type { FootOfClimb, Sweep, SweepAnswerPoint, SweepPoint } from './types'

/** Temperature over grade, at equilibrium or at the top of a climb. */

/** Driving one speed over many grades; keeps the last equilibrium as the guess for the next. */
export class GradeRunner {
  private readonly truck: Truck
  private readonly speedMps: number
  private readonly segment: RoadConditions
  private readonly climb: Climb | undefined
  private readonly start: Float64Array
  private readonly thermal: ThermalPoint
  private guess: Float64Array

  constructor(
    truck: Truck,
    speedMps: number,
    segment: RoadConditions = {},
    climb?: Climb,
    foot?: FootOfClimb,
  ) {
    this.truck = truck
    this.speedMps = speedMps
    this.segment = segment
    this.climb = climb
    const { ambientC } = truck.resolved.site
    this.start = startTemperatures(
      climb?.start === undefined ? truck.resolved.start : resolveStart(climb.start, ambientC),
    )
    if (foot !== undefined) {
      this.start[SUMP] = foot.sumpC
      this.start[CONVERTER] = foot.coolerInletC
      this.start[CASE] = foot.caseC
      this.start[COOLANT] = foot.coolantC
    }
    this.guess = this.start
    this.thermal = makeThermal(truck)
  }

  /** Operating point at a grade. Throws AppError cannot_climb_grade. */
  drive(grade: number, path: string): OperatingPoint {
    return operatingPoint(
      this.truck.resolved.powertrain,
      {
        ...this.segment,
        kind: 'steady',
        speedMps: this.speedMps,
        grade,
        durationS: 1,
      },
      path,
    )
  }

  /** Temperatures and heat of an operating point, at equilibrium or at the top of the climb. */
  answer(grade: number, point: OperatingPoint): SweepAnswerPoint {
    const { thermal } = this
    thermal.set(point)
    let temperatures: Float64Array
    if (this.climb === undefined) {
      temperatures = equilibriumOf(thermal, this.start, this.guess)
      this.guess = temperatures
    } else {
      temperatures = Float64Array.from(this.start)
      integrate(thermal, temperatures, this.climb.distanceM / point.speedMps, () => undefined)
    }
    thermal.circuit.readLoop(temperatures[SUMP]!)
    return {
      grade,
      speedMps: point.speedMps,
      speedHeld: point.speedHeld,
      gear: point.gear,
      locked: point.locked,
      sumpC: temperatures[SUMP]!,
      coolerInletC: temperatures[CONVERTER]!,
      coolantC: temperatures[COOLANT]!,
      heatW:
        thermal.converterW + thermal.fixedW + thermal.spinReferenceW * thermal.circuit.loopState.spinFactor,
    }
  }
}

/**
 * Temperatures over grade at one speed.
 * @param request - input, speed, grades, road conditions; with `climb` at the top of a climb, without it at equilibrium
 * @param request.foot - with `climb`: where the drive before it has left every temperature, in place of the climb's start, which
 *   takes converter and case to be as warm as the pan
 * @returns a point per grade; a grade that cannot be climbed says so
 * @throws AppError rating_impossible, model_refuses
 */
export function sweep(request: SweepRequest & { foot?: FootOfClimb }): Sweep {
  const runner = new GradeRunner(
    makeTruck(request.input),
    request.speedMps,
    request.segment,
    request.climb,
    request.foot,
  )
  return {
    points: request.grades.map((grade, index): SweepPoint => {
      try {
        return runner.answer(grade, runner.drive(grade, `grades.${index}`))
      } catch (error) {
        if (error instanceof AppError && error.code === 'cannot_climb_grade')
          return { grade, error: error.message }
        throw error
      }
    }),
  }
}
