import { AppError } from '../errors'
import type { Control } from '../schemas/control'
import type { Build, Duty, HeatInput, Load, Segment } from '../schemas/heat-input'
import type { Setup, SetupChange } from '../schemas/setup'
import type { BuildSheet } from '../schemas/sheet'
import { milesPerHourToMetersPerSecond } from '../units/conversions'
import { deriveBuild } from './sheet'

/** What a set-up needs of a scenario; a saved one and a draft both fit. */
export interface ScenarioConditions {
  load: Load
  duty: Duty
}

export type SetupDraft = Pick<Setup, 'name' | 'kind' | 'change'>

/** From here on a grade counts as a climb (1 %). */
const CLIMB_FROM_GRADE = 0.01

const SLOWER_BY_MPS = milesPerHourToMetersPerSecond(5)
/** A crawl is not made slower: below this, 5 mph would be most of the speed (20 mph). */
const SLOWER_FROM_MPS = milesPerHourToMetersPerSecond(20)

function isUnderway(segment: Segment): segment is Extract<Segment, { kind: 'steady' | 'stopGo' }> {
  return segment.kind === 'steady' || segment.kind === 'stopGo'
}

function isWork(segment: Segment): boolean {
  return (
    isUnderway(segment) &&
    ((segment.grade ?? 0) >= CLIMB_FROM_GRADE || (segment.surface ?? 'pavement') !== 'pavement')
  )
}

/**
 * The segments in which driving differently is meant: climbs and loose ground; on a drive cycle without any, all of it.
 * (Slowing down on the flat before the hill would only change how warm the hill is met.)
 */
export function listWork(duty: Duty): boolean[] {
  const work = duty.segments.map(isWork)
  return work.includes(true) ? work : duty.segments.map(isUnderway)
}

/** The same road driven no faster than `maxMps`: a segment given by its time takes longer, so that it is as long. */
function slowDown(segment: Segment, maxMps: number): Segment {
  if (!isUnderway(segment) || segment.speedMps <= maxMps) return segment
  if (segment.durationS === undefined) return { ...segment, speedMps: maxMps }
  return { ...segment, speedMps: maxMps, durationS: (segment.durationS * segment.speedMps) / maxMps }
}

function changeDuty(duty: Duty, change: SetupChange, gears: number): Duty {
  const { topGear, speedMps } = change
  if (topGear === undefined && speedMps === undefined) return duty
  const work = listWork(duty)
  return {
    ...duty,
    segments: duty.segments.map((segment, index) => {
      if (work[index] !== true) return segment
      const slower = speedMps === undefined ? segment : slowDown(segment, speedMps)
      const allowed = Math.min(topGear ?? gears, slower.topGear ?? gears)
      return allowed >= gears ? slower : { ...slower, topGear: allowed }
    }),
  }
}

function changeBuild(build: Build, change: SetupChange): Build {
  const { bypass, ...cooling } = build.cooling
  const keepsBypass = bypass !== undefined && change.removeBypass !== true
  return {
    ...build,
    transmission: {
      ...build.transmission,
      ...(change.shiftStyle === undefined ? {} : { shiftStyle: change.shiftStyle }),
    },
    cooling: {
      ...cooling,
      ...(change.coolers === undefined ? {} : { coolers: change.coolers }),
      ...(keepsBypass ? { bypass } : {}),
    },
  }
}

/** The same truck with a converter that never locks. */
export function withoutLockup(build: Build): Build {
  return { ...build, converter: { ...build.converter, lockup: { fitted: false } } }
}

/** Whether there is a lock-up clutch that could ever close. */
export function hasLockup(build: Build): boolean {
  return build.converter.lockup?.fitted === true
}

export interface InputRequest {
  sheet: BuildSheet
  /** "As it is" when left out. */
  setup?: { change: SetupChange }
  scenario: ScenarioConditions
}

function deriveChanged({ sheet, setup, scenario }: InputRequest): HeatInput {
  const change = setup?.change ?? {}
  const build = deriveBuild(sheet)
  const gears = build.transmission.gears.length
  scenario.duty.segments.forEach(({ topGear }, index) => {
    if (topGear !== undefined && topGear > gears)
      throw new AppError('bad_input', {
        issues: [
          {
            path: `duty.segments.${index}.topGear`,
            message: `the transmission has ${gears} gears: must be at most ${gears}`,
          },
        ],
      })
  })
  return {
    build: changeBuild(build, change),
    load: scenario.load,
    duty: changeDuty(scenario.duty, change, gears),
  }
}

/**
 * The model's input for a sheet, a set-up and a scenario.
 *
 * @param request.lockupProven - whether lock-up was seen on the road; false computes the truck unlocked. A set-up that
 *   says `always` or `never` decides by itself. A converter without a lock-up clutch never locks, whatever is said.
 * @throws bad_input whose issues carry the sheet's or the duty's own paths
 */
export function deriveInput(request: InputRequest & { lockupProven?: boolean }): HeatInput {
  const input = deriveChanged(request)
  const lockup = request.setup?.change.lockup ?? 'as-proven'
  const locks = lockup === 'as-proven' ? (request.lockupProven ?? true) : lockup === 'always'
  return locks ? input : { ...input, build: withoutLockup(input.build) }
}

/** Both states of lock-up, and which of them an answer is judged by. */
export interface DerivedInputs {
  /** Locking where its gear, speed and torque allow; null where nothing can lock it. */
  locked: HeatInput | null
  /** Never locking; null where lock-up is proven, so that it does not come into question. */
  unlocked: HeatInput | null
  judgedBy: 'locked' | 'unlocked'
  /** The one of the two that judges. */
  judged: HeatInput
}

/**
 * The inputs an answer needs: unless lock-up was seen on the road, the truck is computed locked and unlocked and judged
 * by the unlocked.
 *
 * @throws bad_input as {@link deriveInput} does
 */
export function deriveInputs(request: InputRequest & { control: Control }): DerivedInputs {
  const input = deriveChanged(request)
  const lockup = request.setup?.change.lockup ?? 'as-proven'
  const unlocked = { ...input, build: withoutLockup(input.build) }
  if (lockup === 'never' || !hasLockup(input.build))
    return { locked: null, unlocked, judgedBy: 'unlocked', judged: unlocked }
  if (lockup === 'always' || request.control.lockupSeen === 'yes')
    return { locked: input, unlocked: null, judgedBy: 'locked', judged: input }
  return { locked: input, unlocked, judgedBy: 'unlocked', judged: unlocked }
}

/**
 * "Drive it differently": tow shift style, the top gear one lower and 5 mph slower, on climbs and loose ground. A crawl
 * is not made slower.
 */
export function createDriveDifferently(request: { build: Build; scenario: ScenarioConditions }): SetupChange {
  const gears = request.build.transmission.gears.length
  const work = listWork(request.scenario.duty)
  const fastestMps = Math.max(
    0,
    ...request.scenario.duty.segments.map((segment, index) =>
      work[index] === true && isUnderway(segment) ? segment.speedMps : 0,
    ),
  )
  return {
    shiftStyle: 'tow',
    ...(gears > 1 ? { topGear: gears - 1 } : {}),
    ...(fastestMps >= SLOWER_FROM_MPS ? { speedMps: fastestMps - SLOWER_BY_MPS } : {}),
  }
}

/** The two set-ups every build has: as it is, and driven differently. */
export function createStandingSetups(request: {
  build: Build
  scenario: ScenarioConditions
}): [SetupDraft, SetupDraft] {
  return [
    { name: 'As it is', kind: 'as-it-is', change: {} },
    { name: 'Drive it differently', kind: 'drive-differently', change: createDriveDifferently(request) },
  ]
}
