import { targetsOfLimits } from '../build-sheet/limits'
import { estimate, sizing } from '../heat'
import { operatingPoint, roadPoint } from '../heat/operating-point'
import { resolveInput } from '../heat/resolve'
import { roadForce, type RoadLoad } from '../heat/road-load'
import type { Estimate, SegmentResult, Series, Sizing, State } from '../heat/types'
import type { AirConstruction, AirPosition, HeatInput, Segment } from '../schemas/heat-input'
import type { Limits } from '../schemas/limits'
import { climbOfInput, gradeHeld } from '../workbench/grade-evidence'
import { findHill } from '../workbench/hill'

/** Which of several numbers of one kind is meant. */
export interface ExplainChoice {
  /** Place in the drive cycle. */
  segment: number
  /** Place in the loop; null for all coolers together. */
  cooler: number | null
  /** The core whose size is asked for. */
  core: { construction: AirConstruction; position: AirPosition }
}

/** An input with its answer, worked out when first asked for. */
export class Reading {
  readonly input: HeatInput
  readonly choice: ExplainChoice
  readonly limits: Limits
  private known: Estimate | undefined
  private sized: Sizing | undefined

  constructor(input: HeatInput, choice: ExplainChoice, limits: Limits, known?: Estimate) {
    this.input = input
    this.choice = choice
    this.limits = limits
    this.known = known
  }

  get answer(): Estimate {
    this.known ??= estimate(this.input)
    return this.known
  }

  get stretch(): SegmentResult {
    const found = this.answer.segments[this.choice.segment]
    if (found === undefined) throw new RangeError(`no stretch ${this.choice.segment} in this drive cycle`)
    return found
  }

  get segment(): Segment {
    const found = this.input.duty.segments[this.choice.segment]
    if (found === undefined) throw new RangeError(`no stretch ${this.choice.segment} in this drive cycle`)
    return found
  }

  get end(): State {
    return this.stretch.end
  }

  /** Highest value of a column along the drive. */
  peak(column: Exclude<keyof Series, 'timeS'>): number {
    return this.answer.series[column].reduce((highest, value) => Math.max(highest, value), -Infinity)
  }

  /** The core that holds the limits; throws where no single one does. */
  get needed(): Sizing {
    const { construction, position } = this.choice.core
    this.sized ??= sizing({
      input: this.input,
      construction,
      position,
      targets: targetsOfLimits(this.limits),
      basis: 'peak',
    })
    return this.sized
  }

  get gradeHeld(): number | null {
    return gradeHeld(this.input, findHill(this.input.duty), climbOfInput(this.input), this.limits).grade
  }

  /** Weight, air and road of the stretch; null where it does not drive. */
  get roadLoad(): RoadLoad | null {
    const { segment } = this
    if (segment.kind !== 'steady' && segment.kind !== 'stopGo') return null
    return roadPoint(resolveInput(this.input).powertrain, segment, segment.grade ?? 0).load
  }

  /** Speed of that load [m/s]: the one held, or the cruise between two stops. */
  get roadSpeedMps(): number {
    const { segment } = this
    return segment.kind === 'stopGo' ? segment.speedMps : this.stretch.speedMps
  }

  /** Force of the road against the truck [N]; null where it does not drive. */
  get roadForceN(): number | null {
    const { roadLoad } = this
    return roadLoad === null ? null : roadForce(roadLoad, this.roadSpeedMps)
  }

  /** Power the engine gives converter and pump [W]. */
  get enginePowerW(): number {
    const { powertrain } = resolveInput(this.input)
    return operatingPoint(powertrain, this.segment, `duty.segments.${this.choice.segment}`).enginePowerW
  }
}
