import { listWork } from '../build-sheet/setups'
import type { Duty, Load, Segment } from '../schemas/heat-input'
import type { SetupChange } from '../schemas/setup'
import { milesPerHourToMetersPerSecond, radiansPerSecondToRpm } from '../units/conversions'
import type { Situation } from './situation'
import type { Remedy } from './types'
import { figure, ordinal, speed, type Words, words } from './words'

/** What can be done without buying anything. None of it is computed here; see `Trials`. */

const SLOWER_BY_MPS = milesPerHourToMetersPerSecond(5)
/** A crawl is not made slower: 5 mph would be most of it (20 mph). */
const SLOWER_FROM_MPS = milesPerHourToMetersPerSecond(20)
/** Share of a trailer's load left at home, as an example. */
const LEFT_AT_HOME = 0.25
/** Faster than this nobody drives in low range (25 mph); common practice, no source. */
const LOW_RANGE_TO_MPS = milesPerHourToMetersPerSecond(25)

export const setupRemedy = (id: string, label: Words, change: SetupChange): Remedy => ({
  id,
  label,
  what: { kind: 'set-up', change },
  effect: null,
})

export const scenarioRemedy = (id: string, label: Words, changed: { load?: Load; duty?: Duty }): Remedy => ({
  id,
  label,
  what: { kind: 'scenario', ...changed },
  effect: null,
})

/** Where driving differently is meant, in words. */
const where = ({ hill }: Situation): string => (hill.grade === undefined ? 'here' : 'on the climb')

/** Gear the hardest stretch is driven in; undefined where there is no answer or no such stretch. */
export function gearOnHill({ answer, hill }: Situation): number | undefined {
  return hill.index === undefined ? undefined : answer?.judged.segments[hill.index]?.gear
}

/** Less than this nobody can tell from nothing [K]. */
const NOTHING_K = 0.5

/** Lock it: only where a clutch is there that was not seen to close, and closing it would change something. */
export function lockIt({ answer }: Situation): Remedy[] {
  if (answer === null || answer.ifLocked === null) return []
  const { judged, ifLocked } = answer
  const gainsK = [judged.peakSumpC - ifLocked.peakSumpC, judged.peakCoolerInletC - ifLocked.peakCoolerInletC]
  if (Math.max(...gainsK) < NOTHING_K) return []
  return [
    setupRemedy('lock', words`Prove lock-up, so that the converter locks where it may`, { lockup: 'always' }),
  ]
}

export function dropAGear(situation: Situation): Remedy[] {
  const gear = gearOnHill(situation)
  if (gear === undefined || gear <= 1 || !engineStands(situation, gear - 1)) return []
  const label = words`Drop a gear: ${ordinal(gear - 1)} at most ${where(situation)}`
  return [setupRemedy('drop-a-gear', label, { topGear: gear - 1 })]
}

/** Share of redline up to which a gear is driven, as the model has it. Judgement. */
const SPEED_RESERVE = 0.95

/** Whether the engine can turn as fast as a gear asks at the speed of the hardest stretch. */
function engineStands({ input, answer, hill }: Situation, gear: number): boolean {
  const ratio = input?.build.transmission.gears[gear - 1]?.ratio
  const driven = hill.index === undefined ? undefined : answer?.judged.segments[hill.index]
  if (input === null || ratio === undefined || driven === undefined) return false
  const { vehicle, axle, transferCase, engine } = input.build
  const range = hill.road.range === 'low' ? transferCase.lowRatio : transferCase.highRatio
  const shaftSpeed = (driven.speedMps / vehicle.tyreRadiusM) * axle.ratio * range * ratio
  return radiansPerSecondToRpm(shaftSpeed) <= SPEED_RESERVE * engine.redlineRpm
}

/** Slow down by 5 mph from the speed the truck holds on the hardest stretch. */
export function slowDown(situation: Situation): Remedy[] {
  const { answer, hill } = situation
  if (hill.index === undefined) return []
  const drivenMps = answer?.judged.segments[hill.index]?.speedMps ?? hill.speedMps
  return slowerThan(situation, Math.min(drivenMps, hill.speedMps))
}

/** 5 mph less than a speed, unless it is a crawl. */
export function slowerThan(situation: Situation, fromMps: number): Remedy[] {
  if (fromMps < SLOWER_FROM_MPS) return []
  const speedMps = fromMps - SLOWER_BY_MPS
  const label = words`Slow down by ${speed(SLOWER_BY_MPS)} ${where(situation)}, to ${speed(speedMps)}`
  return [setupRemedy('slow-down', label, { speedMps })]
}

/** The shift style that protects the fluid, where the other is set. */
export function shiftForTow({ input }: Situation): Remedy[] {
  if (input?.build.transmission.shiftStyle !== 'economy') return []
  return [setupRemedy('tow', words`Shift to protect the fluid (tow style)`, { shiftStyle: 'tow' })]
}

/** Lock it, drop a gear, slow down, each alone and all together; and low range, which is another drive. */
export function driveDifferently(situation: Situation): Remedy[] {
  const each = [
    ...lockIt(situation),
    ...shiftForTow(situation),
    ...dropAGear(situation),
    ...slowDown(situation),
  ]
  const together = each.length < 2 ? each : [...each, allOf(each)]
  return [...together, ...takeLowRange(situation)]
}

function allOf(each: readonly Remedy[]): Remedy {
  const change = each.reduce<SetupChange>(
    (all, { what }) => (what.kind === 'set-up' ? { ...all, ...what.change } : all),
    {},
  )
  return setupRemedy('all', each.length === 2 ? words`Both of these` : words`All of these`, change)
}

/** Low range on climbs and loose ground that are driven slowly enough for it, where there is one. */
export function takeLowRange({ request, input }: Situation): Remedy[] {
  if (input === null) return []
  const { lowRatio, highRatio } = input.build.transferCase
  if (lowRatio <= highRatio) return []
  const { duty } = request.scenario
  const work = listWork(duty)
  const segments = duty.segments.map((segment, index) =>
    work[index] === true && isForLowRange(segment) ? { ...segment, range: 'low' as const } : segment,
  )
  if (segments.every((segment, index) => segment === duty.segments[index])) return []
  return [
    scenarioRemedy('low-range', words`Take low range where it is slow`, { duty: { ...duty, segments } }),
  ]
}

const isForLowRange = (segment: Segment): boolean =>
  (segment.kind === 'steady' || segment.kind === 'stopGo') &&
  segment.range !== 'low' &&
  segment.speedMps <= LOW_RANGE_TO_MPS

/** A quarter of the trailer's weight left at home. */
export function pullLess({ request }: Situation): Remedy[] {
  const { load } = request.scenario
  const massKg = load.trailerMassKg ?? 0
  if (massKg <= 0) return []
  const trailerMassKg = Math.round(massKg * (1 - LEFT_AT_HOME))
  const label = words`A lighter trailer: ${figure(trailerMassKg, 'mass')} in place of ${figure(massKg, 'mass')}`
  return [scenarioRemedy('lighter-trailer', label, { load: { ...load, trailerMassKg } })]
}

/** The air conditioning off for the climb. */
export function airConditioningOff({ request }: Situation): Remedy[] {
  const { duty } = request.scenario
  if (duty.airConditioning !== true) return []
  return [
    scenarioRemedy('ac-off', words`Air conditioning off`, { duty: { ...duty, airConditioning: false } }),
  ]
}
