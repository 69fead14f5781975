import { ladderOfPlace, targetsOfLimits } from '../build-sheet/limits'
import { openShare } from '../heat/circuit'
import type { SegmentResult, State, Warning, WarningCode } from '../heat/types'
import { predictIdleFlow, QUART_LIMITS_S, QUART_M3 } from './idle-flow'
import { WARNING_QUANTITIES } from './codes'
import {
  addCore,
  clearTheFront,
  countAsGeneric,
  coverFrontCores,
  earlierBypass,
  fewerFittings,
  fitBypass,
  moveFrontCores,
  powerFromTorque,
  removeBypass,
  sideBySide,
  tankFirst,
  takeOut,
  widerLine,
  withoutTank,
} from './cooler-remedies'
import {
  airConditioningOff,
  driveDifferently,
  dropAGear,
  lockIt,
  pullLess,
  setupRemedy,
  shiftForTow,
  slowDown,
  slowerThan,
  takeLowRange,
} from './driving-remedies'
import { draft, type Sign } from './sign'
import { type Answered, isAnswered, type Situation } from './situation'
import { peakCoolantC } from './trials'
import type { Advice, Remedy, Severity } from './types'
import { figure, heat, joinWords, ordinal, speed, temperature, type Words, words } from './words'

/** What can be read off an answer without another run of the model. */

/** How urgent each warning of the model is, where nothing else says so. */
const SEVERITIES: Record<WarningCode, Severity> = {
  speed_not_held: 'watch',
  coolant_hot: 'ease-off',
  coolant_over_limit: 'stop',
  hot_line_over_limit_pan_fine: 'ease-off',
  unlocked_other_gear_cooler: 'note',
  grade_above_validated_range: 'note',
  limited_by_oil_flow: 'note',
  rating_misfit: 'watch',
  bypass_hides_cooler: 'watch',
  over_cooled: 'note',
  cooler_flow_low: 'watch',
  coolant_heats_oil: 'watch',
  temperature_beyond_data: 'watch',
  engine_power_exceeds_torque: 'watch',
}

/** Judged here by the shop’s own limits and by the flow test, and not by the usual ones the model knows. */
const JUDGED_ELSEWHERE: readonly WarningCode[] = ['hot_line_over_limit_pan_fine', 'cooler_flow_low']

/** Below this outside air it is winter, and a cold pan may keep the converter unlocked (50 °F); common practice, no source. */
const COLD_AIR_C = 10

const REMEDIES: Record<WarningCode, (situation: Situation, warning: Warning) => Remedy[]> = {
  speed_not_held: (situation) => [...slowDown(situation), ...takeLowRange(situation), ...pullLess(situation)],
  coolant_hot: coolantRemedies,
  coolant_over_limit: coolantRemedies,
  hot_line_over_limit_pan_fine: driveDifferently,
  unlocked_other_gear_cooler: shiftForTow,
  grade_above_validated_range: (situation) => [...takeLowRange(situation), ...pullLess(situation)],
  limited_by_oil_flow: (situation) => [
    ...sideBySide(situation),
    ...widerLine(situation),
    ...addCore(situation, 'medium'),
  ],
  rating_misfit: (situation, { at }) => countAsGeneric(situation, coolerIndex(at)),
  bypass_hides_cooler: (situation) => [...removeBypass(situation), ...earlierBypass(situation)],
  over_cooled: (situation) => [...fitBypass(situation), ...coverFrontCores(situation)],
  cooler_flow_low: flowRemedies,
  coolant_heats_oil: (situation) => [...tankFirst(situation), ...withoutTank(situation)],
  temperature_beyond_data: driveDifferently,
  engine_power_exceeds_torque: powerFromTorque,
}

function coolantRemedies(situation: Situation): Remedy[] {
  return [
    ...clearTheFront(situation),
    ...takeLowRange(situation),
    ...slowDown(situation),
    ...dropAGear(situation),
    ...airConditioningOff(situation),
  ]
}

function flowRemedies(situation: Situation): Remedy[] {
  return [...fewerFittings(situation), ...widerLine(situation), ...sideBySide(situation)]
}

const coolerIndex = (at: string | undefined): number =>
  Number(/coolers\.(\d+)/.exec(at ?? '')?.[1] ?? Number.NaN)

/** The sheet knows its own paths; the drive cycle keeps the model's. */
const placeOf = (at: string): string => at.replace(/^build\./, '')

/** The model's own warnings, one advice a code: the worst place of each, the others beside it. */
export const modelWarnings: Sign = (situation) => {
  if (!isAnswered(situation)) return []
  const byCode = new Map<WarningCode, Warning[]>()
  for (const warning of situation.answer.judged.warnings) {
    if (JUDGED_ELSEWHERE.includes(warning.code) || isTried(situation, warning)) continue
    byCode.set(warning.code, [...(byCode.get(warning.code) ?? []), warning])
  }
  return [...byCode.values()].flatMap((warnings) => warningAdvice(situation, warnings))
}

/** Where the limits do not hold, other ways to drive are run and compared, which says more than their heat. */
const isTried = ({ answer }: Answered, { code }: Warning): boolean =>
  code === 'unlocked_other_gear_cooler' && answer.judgement.judgement !== 'fine'

function warningAdvice(situation: Answered, warnings: readonly Warning[]): Advice[] {
  const [worst, ...others] = [...warnings].sort((a, b) => exceeding(b) - exceeding(a))
  if (worst === undefined) return []
  const { code, value, limit, at } = worst
  const quantity = WARNING_QUANTITIES[code]
  const alsoAt = others.flatMap((other) => (other.at === undefined ? [] : [placeOf(other.at)]))
  return [
    draft(code, severityOf(situation, code), textOf(situation, worst), {
      ...actionOf(situation, worst),
      ...(value === undefined
        ? {}
        : { value: figure(code === 'coolant_heats_oil' ? -value : value, quantity) }),
      ...(limit === undefined ? {} : { limit: figure(limit, quantity) }),
      ...(at === undefined ? {} : { at: placeOf(at) }),
      ...(alsoAt.length === 0 ? {} : { alsoAt }),
      remedies: REMEDIES[code](situation, worst),
    }),
  ]
}

/** How far a warning is from its limit, either way. */
const exceeding = ({ value = 0, limit = 0 }: Warning): number => Math.abs(Math.abs(value) - Math.abs(limit))

const isCold = ({ input }: Answered): boolean => input.duty.ambientC < COLD_AIR_C

function severityOf(situation: Answered, code: WarningCode): Severity {
  return code === 'over_cooled' && isCold(situation) ? 'watch' : SEVERITIES[code]
}

/** What to do, where the weather or the side it is off on decides. */
function actionOf(situation: Answered, { code, value = 0, limit = 0 }: Warning): Partial<Advice> {
  if (code === 'over_cooled' && !isCold(situation))
    return { action: words`Nothing now. Before winter, think of a thermal bypass or a cover for the core.` }
  if (code === 'temperature_beyond_data' && value > limit)
    return { action: words`Read it as “far too hot”, not as a number, and mend that first.` }
  return {}
}

/** What it is here, with its numbers; where the model's own message says as much, that. */
function textOf(situation: Answered, warning: Warning): Words {
  const { code, value = 0, limit = 0 } = warning
  switch (code) {
    case 'speed_not_held':
      return words`No gear holds ${speed(limit)} there; ${speed(value)} is the fastest that is held, and all temperatures are those of that speed.`
    case 'coolant_hot':
      return words`The coolant reaches ${temperature(value)}, over ${temperature(limit)}. That is the engine’s own cooling and not the transmission cooler’s fault; a cooler in the radiator tank then gives heat instead of taking it.`
    case 'coolant_over_limit':
      return words`The coolant reaches ${temperature(value)}. Over ${temperature(limit)} it would boil, and the numbers here stop being valid.`
    case 'over_cooled':
      return isCold(situation)
        ? words`The pan never gets over ${temperature(value)}, however long this lasts. Under ${temperature(limit)} in the cold, lock-up may be withheld.`
        : words`The pan never gets over ${temperature(value)}, however long this lasts. That does no harm in this weather; in the cold it would be colder still.`
    case 'bypass_hides_cooler':
      return words`The thermal bypass lets ${figure(value, 'share')} of the oil through the coolers where the pan is hottest; the rest returns uncooled.`
    case 'coolant_heats_oil':
      return words`The radiator tank gives ${heat(-value)} to the oil where the pan is hottest: the coolant is the warmer of the two.`
    case 'limited_by_oil_flow':
      return words`This core carries ${heat(value)} at the reference point. Over ${heat(limit)} the oil flow is the limit, not the size: a larger one adds little.`
    case 'grade_above_validated_range':
      return words`${figure(value, 'grade')} is steeper than the ${figure(limit, 'grade')} anything here was compared with.`
    case 'temperature_beyond_data':
      return words`${temperature(value)} is beyond the ${temperature(limit)} up to which the oil is known.`
    case 'engine_power_exceeds_torque':
      return words`Peak power at its speed takes ${figure(value, 'torque')}, more than the peak torque of ${figure(limit, 'torque')}: one of the two belongs to another engine.`
    default:
      return [warning.message]
  }
}

/** The line over its limit while a gauge in the pan shows nothing. */
export const hotLineOverPanFine: Sign = (situation) => {
  if (!isAnswered(situation)) return []
  const { request, answer } = situation
  const { sump, hotLine } = answer.judgement
  const limitC = ladderOfPlace('hotLine', request.limits).easeOffC
  if (hotLine.tempC < limitC || sump.marginK <= 0) return []
  const blind =
    request.limits.gaugePlace === 'hotLine' ? '' : ' The gauge does not sit where it would show this.'
  const text = words`The to-cooler line reaches ${temperature(hotLine.tempC)}, over its ${temperature(limitC)}, while the pan stays at ${temperature(sump.tempC)}.${blind}`
  return [
    draft('hot_line_over_limit_pan_fine', hotLine.judgement === 'stop' ? 'stop' : 'ease-off', text, {
      value: temperature(hotLine.tempC),
      limit: temperature(limitC),
      remedies: [...driveDifferently(situation), ...addCore(situation, 'medium')],
    }),
  ]
}

/** The workshop's flow test as it would come out, and the flow while driving. */
export const coolerFlowLow: Sign = (situation) => {
  if (!isAnswered(situation) || situation.input.build.cooling.coolers.length === 0) return []
  const { quartS } = predictIdleFlow(situation.input)
  const driving = situation.answer.judged.warnings.filter(({ code }) => code === 'cooler_flow_low')
  const { bulletin, manual } = QUART_LIMITS_S
  if (quartS <= bulletin && driving.length === 0) return []
  const quart = figure(QUART_M3, 'volume')
  const slowest = [...driving].sort((a, b) => (a.value ?? 0) - (b.value ?? 0))[0]
  const onTheRoad =
    slowest?.value === undefined
      ? words``
      : words` While driving, no more than ${figure(slowest.value, 'volumeFlow')} reaches them.`
  const text = words`At idle with hot oil, ${quart} from the return line would take ${figure(quartS, 'seconds')}. A maker’s bulletin passes it within ${figure(bulletin, 'seconds')}, a service manual within ${figure(manual, 'seconds')}.${onTheRoad}`
  return [
    draft('cooler_flow_low', quartS > manual ? 'ease-off' : 'watch', text, {
      value: figure(quartS, 'seconds'),
      limit: figure(bulletin, 'seconds'),
      ...(slowest?.at === undefined ? {} : { at: placeOf(slowest.at) }),
      remedies: flowRemedies(situation),
    }),
  ]
}

/** The limits hold with what is there. */
export const noCoolerNeeded: Sign = (situation) => {
  if (!isAnswered(situation)) return []
  const { answer, request, input } = situation
  const { judgement, judged } = answer
  // Past its limit the coolant makes every number here void, good news too.
  if (judged.warnings.some(({ code }) => code === 'coolant_over_limit')) return []
  const targets = targetsOfLimits(request.limits)
  if (judgement.sump.tempC > targets.sumpC || judgement.hotLine.tempC > targets.coolerInletC) return []
  const close = judgement.judgement !== 'fine'
  const text = words`The pan peaks at ${temperature(judgement.sump.tempC)} with ${temperature(targets.sumpC)} allowed, the to-cooler line at ${temperature(judgement.hotLine.tempC)} with ${temperature(targets.coolerInletC)}: no other cooler is needed on this drive.${close ? ' It is close, so mind how sure the numbers are.' : ''}`
  const decider = judgement[judgement.decidedBy === 'hotLine' ? 'hotLine' : 'sump']
  const last = input.build.cooling.coolers.findLastIndex(({ construction }) => construction !== 'in-tank')
  return [
    draft('no_cooler_needed', close ? 'watch' : 'note', text, {
      action: words`Spend nothing on cooling for this. Try the hardest drive it must survive before telling the customer.`,
      value: temperature(decider.tempC),
      limit: temperature(decider.limitC),
      remedies: takeOut(situation, last),
    }),
  ]
}

/** What the model cannot drive, in words. */
const CANNOT: Readonly<Record<string, string>> = {
  cannot_climb_grade: 'No gear climbs this at any speed.',
  cannot_pull_away: 'No gear pulls away from a stop here.',
  cannot_hold_cruise: 'No gear holds the cruise speed between the stops.',
}

/** The truck cannot drive what is asked for: there is no answer. */
export const cannotClimb: Sign = (situation) => {
  const { refusal, request } = situation
  const text = refusal === null ? undefined : CANNOT[refusal.code]
  if (refusal === null || text === undefined) return []
  const index = Number(/segments\.(\d+)/.exec(refusal.issues[0]?.path ?? '')?.[1] ?? Number.NaN)
  const segment = request.scenario.duty.segments[index]
  const grade = segment !== undefined && 'grade' in segment ? segment.grade : undefined
  const cruiseMps = segment?.kind === 'stopGo' ? segment.speedMps : undefined
  return [
    draft('cannot_climb', 'stop', [text], {
      action: words`Take low range, a lighter load or another road; check weight, axle ratio and tire on the sheet.`,
      ...(grade === undefined ? {} : { value: figure(grade, 'grade') }),
      ...(segment === undefined ? {} : { at: `duty.segments.${index}` }),
      remedies: [
        ...takeLowRange(situation),
        ...(cruiseMps === undefined ? [] : slowerThan(situation, cruiseMps)),
        ...pullLess(situation),
        ...shiftForTow(situation),
      ],
    }),
  ]
}

/** Below this nobody would notice whether it locks [K]. */
const LOCKUP_MATTERS_K = 3

/** What the answer hangs on: lock-up that nobody has seen. */
export const lockupUnproven: Sign = (situation) => {
  if (!isAnswered(situation)) return []
  const { answer } = situation
  const { judgement, ifLocked } = answer
  if (ifLocked === null || judgement.judgement === 'fine') return []
  const atLine = judgement.decidedBy === 'hotLine'
  const now = atLine ? judgement.hotLine : judgement.sump
  const lockedC = atLine ? ifLocked.peakCoolerInletC : ifLocked.peakSumpC
  if (now.tempC - lockedC < LOCKUP_MATTERS_K) return []
  const place = atLine ? 'to-cooler line' : 'pan'
  const text = words`Judged unlocked, the ${place} peaks at ${temperature(now.tempC)}; if the converter locks where it may, at ${temperature(lockedC)}.`
  return [
    draft('lockup_unproven', 'watch', text, {
      action: words`Prove it before buying: at a steady ${speed(PROOF_SPEED_MPS)}, touch the throttle; engine speed stays when it is locked, and flares when it is not. In a swap, controller, harness and brake switch decide.`,
      value: temperature(now.tempC),
      limit: temperature(lockedC),
      remedies: lockIt(situation),
    }),
  ]
}

/** Steady speed at which lock-up is tried on the road (50 mph); common practice, no source. */
const PROOF_SPEED_MPS = 22.352

/** Seen to lock, says the sheet, and also what keeps it from locking. */
export const lockupContradicted: Sign = (situation) => {
  const { request, input } = situation
  const { control } = request
  if (control.lockupSeen !== 'yes' || input === null) return []
  const reasons = [
    ...(input.build.converter.lockup?.fitted === true ? [] : ['no lock-up clutch is fitted']),
    ...(control.lockupCommand === 'none' ? ['nothing commands it'] : []),
    ...(control.generationsMatch === 'no' ? ['controller and transmission do not match'] : []),
    ...(control.brakeSwitchWired === 'no' ? ['the brake switch is not wired'] : []),
  ]
  const neverSetUp = request.setup?.change.lockup === 'never'
  if (reasons.length === 0 || neverSetUp) return []
  return [
    draft(
      'lockup_contradicted',
      'watch',
      words`Lock-up counts as seen on the road, but ${joinWords(reasons)}.`,
      {
        action: words`Look again on the road. Until then, read the answer as if it never locks.`,
        remedies: input.build.converter.lockup?.fitted === true ? [neverLocks] : [],
      },
    ),
  ]
}

const neverLocks = setupRemedy('never-lock', words`If it never locks`, { lockup: 'never' })

/** So much more heat, and so much cooler a pan, are worth an explanation. */
const MORE_HEAT = 1.05
const COOLER_BY_K = 1.5

/** From one steady stretch to the next, more heat and a cooler pan: right, though it looks wrong. */
export const heatUpPanDown: Sign = (situation) => {
  if (!isAnswered(situation)) return []
  const steady = situation.answer.judged.segments.flatMap((segment, index) =>
    segment.kind === 'steady' && segment.equilibrium !== null
      ? [{ segment, index, rest: segment.equilibrium }]
      : [],
  )
  const found = steady.flatMap((later, place) => {
    const before = steady[place - 1]
    return before !== undefined && runsCoolerOnMore(before.rest, later.rest) ? [{ before, later }] : []
  })
  const [first] = found.sort((a, b) => panDrop(b) - panDrop(a))
  return first === undefined ? [] : [heatUpAdvice(situation, first)]
}

interface Rest {
  segment: SegmentResult
  index: number
  rest: State
}
interface Pair {
  before: Rest
  later: Rest
}

const runsCoolerOnMore = (before: State, later: State): boolean =>
  later.heatGeneratedW > MORE_HEAT * before.heatGeneratedW && later.sumpC < before.sumpC - COOLER_BY_K
const panDrop = ({ before, later }: Pair): number => before.rest.sumpC - later.rest.sumpC

function heatUpAdvice(situation: Answered, { before, later }: Pair): Advice {
  const lineHotter = later.rest.coolerInletC > before.rest.coolerInletC + COOLER_BY_K
  const line: Words = lineHotter
    ? words` The to-cooler line climbs from ${temperature(before.rest.coolerInletC)} to ${temperature(later.rest.coolerInletC)} all the while: a pan gauge would mislead.`
    : words``
  const text = words`In ${ordinal(later.segment.gear)} at ${speed(later.segment.speedMps)} the heat made rises from ${heat(before.rest.heatGeneratedW)} to ${heat(later.rest.heatGeneratedW)}, yet the pan would settle at ${temperature(later.rest.sumpC)} instead of ${temperature(before.rest.sumpC)}: ${reasonWords(situation, before.rest, later.rest)}.${line}`
  return draft('heat_up_pan_down', lineHotter ? 'watch' : 'note', text, {
    action: words`Nothing is wrong with the number. Judge such a stretch by the to-cooler line, not by the pan.`,
    value: heat(later.rest.heatGeneratedW),
    limit: heat(before.rest.heatGeneratedW),
    at: `duty.segments.${later.index}`,
    remedies: [...removeBypass(situation), ...lockIt(situation)],
  })
}

/** Noticeably more of something that carries heat away. */
const MORE = 1.05

function reasonWords({ input }: Answered, before: State, later: State): string {
  const { bypass } = input.build.cooling
  const opened =
    bypass !== undefined &&
    openShare(bypass, later.coolerInletC) > openShare(bypass, before.coolerInletC) + 0.05
  const reasons = [
    ...(opened ? ['the hotter line opens the thermal bypass further'] : []),
    ...(later.faceVelocityMps > MORE * before.faceVelocityMps ? ['more air goes through the coolers'] : []),
    ...(later.coolerFlowM3S > MORE * before.coolerFlowM3S ? ['more oil goes through them'] : []),
    ...(later.coolantC < before.coolantC - 1 ? ['the coolant is cooler'] : []),
  ]
  return reasons.length === 0
    ? 'a hotter line gives off more, and the oil comes back cooler'
    : joinWords(reasons)
}

/** A cooler in front of the radiator is worth a look only from here on [°C], 5 K under what counts as hot. Judgement. */
const COOLANT_WARM_C = 110

/** Whether the coolant is warm enough for front cores to matter, and there are any. */
export function frontCoresMayMatter(situation: Answered): Remedy[] {
  return peakCoolantC(situation.answer.judged) < COOLANT_WARM_C ? [] : moveFrontCores(situation)
}
