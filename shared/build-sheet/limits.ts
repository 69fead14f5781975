import type { Judgement, Ladder, Limits, Place, PlaceLimits } from '../schemas/limits'
import { differenceF, differenceFToK, fahrenheit, fahrenheitToCelsius } from '../units/temperature'

const fromFahrenheit = (value: number): number => fahrenheitToCelsius(fahrenheit(value))

/**
 * What the default limits rest on, to be printed beside them. Common practice: a trade article and two service manuals;
 * another source is 20 °F lower.
 */
export const DEFAULT_LIMITS_NOTE =
  'Common practice: a trade article and two service manuals; another source is 20 °F lower. The limits of the transmission itself come first.'

/** Rungs from cool to hot; the words say what to do. */
export const JUDGEMENTS = ['fine', 'watch', 'ease-off', 'stop'] as const satisfies readonly Judgement[]

export const JUDGEMENT_WORDS: Record<Judgement, string> = {
  fine: 'fine',
  watch: 'watch',
  'ease-off': 'ease off',
  stop: 'stop',
}

/** Where a place has no ladder of its own, `watch` begins this far under its sustained limit: the step of the pan's ladder. */
const WATCH_BELOW_SUSTAINED_K = differenceFToK(differenceF(20))

/**
 * The shop's limits before it sets its own: pan 200 / 220 / 240 °F; hot line 250 °F sustained, 300 °F brief.
 * Source: see {@link DEFAULT_LIMITS_NOTE}.
 */
export function createDefaultLimits(): Limits {
  return {
    sump: { sustainedC: fromFahrenheit(220), briefC: fromFahrenheit(240) },
    hotLine: { sustainedC: fromFahrenheit(250), briefC: fromFahrenheit(300) },
    gaugePlace: 'sump',
    ladder: {
      watchC: fromFahrenheit(200),
      easeOffC: fromFahrenheit(220),
      stopC: fromFahrenheit(240),
    },
  }
}

/** Sustained and brief limit of a place. The return line flows into the pan and has no limits of its own: the pan's hold. */
export function limitsOfPlace(place: Place, limits: Limits): PlaceLimits {
  return place === 'hotLine' ? limits.hotLine : limits.sump
}

/**
 * The ladder of a place: the shop's own where the gauge sits; elsewhere ease off from the sustained limit, stop from the
 * brief one, and watch from 20 °F under the sustained (the step between the rungs of the pan; judgement).
 */
export function ladderOfPlace(place: Place, limits: Limits): Ladder {
  if (place === limits.gaugePlace) return limits.ladder
  const { sustainedC, briefC } = limitsOfPlace(place, limits)
  return { watchC: sustainedC - WATCH_BELOW_SUSTAINED_K, easeOffC: sustainedC, stopC: briefC }
}

/** What to do at a temperature of a place; each rung begins at its temperature. */
export function judge(tempC: number, place: Place, limits: Limits): Judgement {
  const ladder = ladderOfPlace(place, limits)
  if (tempC >= ladder.stopC) return 'stop'
  if (tempC >= ladder.easeOffC) return 'ease-off'
  return tempC >= ladder.watchC ? 'watch' : 'fine'
}

/** The more urgent of several judgements; `fine` of none. */
export function worseJudgement(...judgements: Judgement[]): Judgement {
  return JUDGEMENTS[Math.max(0, ...judgements.map((judgement) => JUDGEMENTS.indexOf(judgement)))] ?? 'fine'
}

/** One place of an answer against its ladder. */
export interface PlaceJudgement {
  place: Place
  tempC: number
  judgement: Judgement
  /** Where `ease off` begins there; the line a chart draws. */
  limitC: number
  /** Up to that line; negative when over it. */
  marginK: number
}

/** An answer judged at the pan and the hot line, the worse of the two deciding. */
export interface AnswerJudgement {
  judgement: Judgement
  /** The place that decides; at the same rung, the one with less margin. */
  decidedBy: Place
  sump: PlaceJudgement
  hotLine: PlaceJudgement
}

/** Judges the peaks of an answer at both places. */
export function judgeAnswer(
  answer: { peakSumpC: number; peakCoolerInletC: number },
  limits: Limits,
): AnswerJudgement {
  const at = (place: Place, tempC: number): PlaceJudgement => {
    const limitC = ladderOfPlace(place, limits).easeOffC
    return { place, tempC, judgement: judge(tempC, place, limits), limitC, marginK: limitC - tempC }
  }
  const sump = at('sump', answer.peakSumpC)
  const hotLine = at('hotLine', answer.peakCoolerInletC)
  const rung = (one: PlaceJudgement) => JUDGEMENTS.indexOf(one.judgement)
  const byRung = rung(hotLine) - rung(sump)
  const hotLineDecides = byRung !== 0 ? byRung > 0 : hotLine.marginK < sump.marginK
  const decider = hotLineDecides ? hotLine : sump
  return { judgement: decider.judgement, decidedBy: decider.place, sump, hotLine }
}

/** Temperatures that a grade must keep for it to count as held, and that a cooler is sized for: where `ease off` begins. */
export function targetsOfLimits(limits: Limits): { sumpC: number; coolerInletC: number } {
  return {
    sumpC: ladderOfPlace('sump', limits).easeOffC,
    coolerInletC: ladderOfPlace('hotLine', limits).easeOffC,
  }
}
