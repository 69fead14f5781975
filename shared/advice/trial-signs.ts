import { targetsOfLimits } from '../build-sheet/limits'
import type { Estimate } from '../heat/types'
import { addCore, addLargestCore, GENERIC_SIZE_NAMES } from './cooler-remedies'
import { frontCoresMayMatter } from './answer-signs'
import { driveDifferently, dropAGear, setupRemedy, shiftForTow, slowDown } from './driving-remedies'
import { draft, type Sign } from './sign'
import { type Answered, isAnswered } from './situation'
import { peakCoolantC } from './trials'
import type { Advice, Remedy } from './types'
import { heat, ordinal, temperature, type Words, words } from './words'

/** What only shows when the model is run with something changed: seven runs at most, none asked for twice. */

/** A change must cool the place that decides by this much to be worth a word [K]. */
const COOLER_BY_K = 3
/** And must not heat the other place by more than this [K]. */
const HOTTER_BY_K = 1
/** Share of the heat that the converter makes where unlocked driving is to blame. */
const CONVERTER_SHARE = 0.2

/** Unlocked on the hottest stretch, where another gear, speed or shift style runs cooler. */
export const otherGearCooler: Sign = (situation) => {
  if (!isAnswered(situation) || situation.answer.judgement.judgement === 'fine') return []
  const { answer } = situation
  const index = answer.hottestIndex
  const stretch = answer.judged.segments[index]
  if (stretch === undefined || stretch.kind !== 'steady' || stretch.locked) return []
  const { converterW } = stretch.heat
  if (converterW < CONVERTER_SHARE * stretch.end.heatGeneratedW) return []
  const tried = [...dropAGear(situation), ...slowDown(situation), ...shiftForTow(situation)]
  const better = tried.flatMap((remedy) => {
    const gainK = gainOf(situation, remedy)
    return gainK === undefined ? [] : [{ remedy, gainK }]
  })
  const best = better.sort((a, b) => b.gainK - a.gainK)[0]
  if (best === undefined) return []
  const decider = deciderOf(situation)
  const bestC = decider.tempC - best.gainK
  const text = words`Unlocked in ${ordinal(stretch.gear)} where the pan is hottest, the converter alone makes ${heat(converterW)}. Driven differently, the ${decider.words} peaks at ${temperature(bestC)} instead of ${temperature(decider.tempC)}.`
  return [
    draft('unlocked_other_gear_cooler', 'watch', text, {
      title: words`Unlocked, and another way to drive runs cooler`,
      action: words`This costs nothing, so it comes before any cooler.`,
      value: temperature(decider.tempC),
      limit: temperature(bestC),
      at: `duty.segments.${index}`,
      remedies: better.map(({ remedy }) => remedy),
    }),
  ]
}

const deciderOf = ({ answer }: Answered) =>
  answer.judgement.decidedBy === 'hotLine'
    ? { ...answer.judgement.hotLine, words: 'to-cooler line' }
    : { ...answer.judgement.sump, words: 'pan' }

/** How much cooler a change makes the place that decides [K]; undefined where it is not worth a word. */
function gainOf({ answer, trials }: Answered, remedy: Remedy): number | undefined {
  const trial = trials.run(remedy.what)
  if (trial.problem !== null) return undefined
  const sumpK = answer.judged.peakSumpC - trial.answer.peakSumpC
  const lineK = answer.judged.peakCoolerInletC - trial.answer.peakCoolerInletC
  const [decidingK, otherK] = answer.judgement.decidedBy === 'hotLine' ? [lineK, sumpK] : [sumpK, lineK]
  return decidingK >= COOLER_BY_K && otherK >= -HOTTER_BY_K ? decidingK : undefined
}

/** Over its limits: whether a cooler mends that, or none does. */
export const coolerNeededOrUseless: Sign = (situation) => {
  if (!isAnswered(situation)) return []
  const { judgement } = situation.answer
  const holds = holdsLimits(situation, situation.answer.judged)
  if (holds) return []
  const severity = judgement.judgement === 'stop' ? 'stop' : 'ease-off'
  const decider = deciderOf(situation)
  const figures = { value: temperature(decider.tempC), limit: temperature(decider.limitC) }
  const over = overWords(decider)
  const { cores, tried } = findHoldingCores(situation)
  if (cores.length > 0)
    return [
      draft('cooler_needed', severity, words`${over} One more cooler holds it.`, {
        action: words`Choose the part by the heat it carries at the reference point. What costs nothing comes first: lock it, drop a gear, slow down.`,
        ...figures,
        remedies: [...cores, ...driveDifferently(situation)],
      }),
    ]
  return [
    draft('no_cooler_fixes_this', severity, uselessText(situation, over, tried), {
      action: words`Lock the converter, drop a gear, take low range, slow down: what each comes to stands here. More core alone is money without effect.`,
      ...figures,
      remedies: [...driveDifferently(situation), ...tried, ...everythingAtOnce(situation, tried)],
    }),
  ]
}

/** Less than this is lost in rounding [K]. */
const JUST_OVER_K = 1

function overWords(decider: { words: string; tempC: number; limitC: number }): Words {
  const { tempC, limitC } = decider
  return tempC - limitC < JUST_OVER_K
    ? words`The ${decider.words} goes just over its ${temperature(limitC)}.`
    : words`The ${decider.words} peaks at ${temperature(tempC)}, over its ${temperature(limitC)}.`
}

/** The largest core and driving differently: where neither is enough, both may be. */
function everythingAtOnce(situation: Answered, tried: readonly Remedy[]): Remedy[] {
  const driving = driveDifferently(situation).find(({ id }) => id === 'all')
  const core = tried[0]
  if (driving?.what.kind !== 'set-up' || core?.what.kind !== 'set-up') return []
  const change = { ...driving.what.change, ...core.what.change }
  return [setupRemedy('core-and-all', words`The largest core in front, and all of these`, change)]
}

function holdsLimits({ request }: Answered, answer: Estimate): boolean {
  const targets = targetsOfLimits(request.limits)
  return answer.peakSumpC <= targets.sumpC && answer.peakCoolerInletC <= targets.coolerInletC
}

/**
 * Cores that hold the limits, tried from the best guess on: a large one, the largest there is, the largest with a fan away
 * from the radiator. A larger one is not always cooler, since it also warms the radiator’s air.
 */
function findHoldingCores(situation: Answered): { cores: Remedy[]; tried: Remedy[] } {
  const holds = ({ what }: Remedy) => {
    const trial = situation.trials.run(what)
    return trial.problem === null && holdsLimits(situation, trial.answer)
  }
  const large = addCore(situation, 'large')
  if (large.some(holds)) {
    const smaller = GENERIC_SIZE_NAMES.filter((size) => size === 'medium')
    return { cores: [...smaller.flatMap((size) => addCore(situation, size)), ...large], tried: [] }
  }
  const tried = [...large]
  for (const position of ['ahead-of-condenser', 'remote'] as const) {
    const [core] = addLargestCore(situation, position)
    if (core === undefined) continue
    if (holds(core)) return { cores: [core], tried }
    tried.push(core)
  }
  return { cores: [], tried: tried.slice(1) }
}

function uselessText({ request, trials }: Answered, over: Words, tried: readonly Remedy[]): Words {
  const targets = targetsOfLimits(request.limits)
  const excess = ({ peakSumpC, peakCoolerInletC }: Estimate) =>
    Math.max(peakSumpC - targets.sumpC, peakCoolerInletC - targets.coolerInletC)
  const [best] = tried
    .flatMap(({ what }) => {
      const trial = trials.run(what)
      return trial.problem === null ? [trial.answer] : []
    })
    .sort((a, b) => excess(a) - excess(b))
  if (best === undefined) return words`${over} There is no room for another cooler in this loop.`
  return words`${over} Even the largest single core, in front or under the body with a fan, leaves the pan at ${temperature(best.peakSumpC)} and the to-cooler line at ${temperature(best.peakCoolerInletC)}.`
}

/** Front cores must heat the coolant by this much to be worth a word [K]. */
const COOLANT_COOLER_BY_K = 2

/** Cores in front of the radiator warm its air: what the coolant would be without them there. */
export const frontCoresHeatCoolant: Sign = (situation) => {
  if (!isAnswered(situation)) return []
  const [move] = frontCoresMayMatter(situation)
  if (move === undefined) return []
  const trial = situation.trials.run(move.what)
  if (trial.problem !== null) return []
  const nowC = peakCoolantC(situation.answer.judged)
  const withoutC = peakCoolantC(trial.answer)
  if (nowC - withoutC < COOLANT_COOLER_BY_K) return []
  return [frontCoresAdvice(nowC, withoutC, move)]
}

function frontCoresAdvice(nowC: number, withoutC: number, move: Remedy): Advice {
  const text = words`The coolant reaches ${temperature(nowC)}. With the front cores elsewhere it would reach ${temperature(withoutC)}: their heat and their fins go before the radiator.`
  return draft('front_cores_heat_coolant', 'watch', text, {
    action: words`Spread the heat: a core under the body with its own fan, or a smaller one in front; mind the radiator before adding more there.`,
    value: temperature(nowC),
    limit: temperature(withoutC),
    remedies: [move],
  })
}
