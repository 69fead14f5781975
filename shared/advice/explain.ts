import { type Band, simpleBand } from '../build-sheet/band'
import { flattenBranch } from '../build-sheet/sheet'
import {
  findSpreadOfPath,
  listSpreads,
  matchesPath,
  relativeSpreadOf,
  type RelativeSpreads,
  SPREADS,
  type SpreadName,
} from '../build-sheet/spreads'
import { AppError } from '../errors'
import { DEFAULTS, resolveRollingResistance } from '../heat/resolve'
import type { Build, HeatInput } from '../schemas/heat-input'
import type { BuildSheet, Origin } from '../schemas/sheet'
import type { Quantity } from '../units/display'
import type { Answer } from '../workbench/answer'
import { type ExplainChoice, Reading } from './explain-reading'
import { EXPLAIN_IDS, type ExplainId, type ExplainPart, type Topic, TOPICS } from './explain-topics'
import { findLabel, labelOf, valueWords } from './labels'
import type { AdviceRequest } from './types'

/** How a number of the answer was made: equation, inputs with their origin, source, and what moves it most. */

/** Where an input comes from; beyond the sheet's own origins, what the drive asks, or what a set-up or the judging changed. */
export type InputOrigin = Origin | 'scenario' | 'set-up'

export interface ExplainedInput {
  path: string
  label: string
  /** Null where the value is a word. */
  si: number | null
  /** The value in words; null where it is a number. */
  words: string | null
  quantity: Quantity
  origin: InputOrigin
  /** One standard deviation as a share of the value; null where none is reckoned with. */
  spread: number | null
}

/** One doubt and what it does to the number. */
export interface Move {
  doubt: SpreadName
  /** The value of the sheet that settles it; null where only a road test does. */
  path: string | null
  label: string
  /** One standard deviation, as a share. */
  relative: number
  /** Change of the number for one standard deviation up: K for a temperature, else in the number's own SI unit. */
  effect: number
  quantity: Quantity
}

export interface Explanation {
  id: ExplainId
  title: string
  /** The stretch it is the number of; null where it is one of the whole drive. */
  at: string | null
  equation: readonly string[]
  where: string
  /** Null where there is no such number here; `problem` says why. */
  result: { si: number | null; quantity: Quantity; problem: string | null }
  /** Numbers on the way to it, as they stand at the end of the stretch `partsAt`. */
  parts: ExplainPart[]
  partsAt: string
  inputs: ExplainedInput[]
  source: string
  movesItMost: Move[]
}

/** What is explained: a request with its answer, and which of several numbers is meant. */
export type ExplainContext = Omit<AdviceRequest, 'answers'> & {
  answers: Answer
} & Partial<ExplainChoice>

const MOST_MOVES = 4

const topicOf = (id: ExplainId): Topic => TOPICS[id]

function choiceOf({ answers, segment, cooler, core }: ExplainContext): ExplainChoice {
  return {
    segment: segment ?? answers.hottestIndex,
    cooler: cooler ?? null,
    core: core ?? { construction: 'stacked-plate', position: 'ahead-of-condenser' },
  }
}

/**
 * Explains one number without asking what moves it: no run of the model, except where the number itself takes some (the
 * grade that is held, the cooler that is needed).
 */
export function explainAtOnce(id: ExplainId, context: ExplainContext): Omit<Explanation, 'movesItMost'> {
  const topic = topicOf(id)
  const choice = choiceOf(context)
  const { input, judged } = context.answers
  const reading = new Reading(input, choice, context.limits, judged)
  const { value, problem } = readResult(topic, reading)
  const partsAt = `duty.segments.${choice.segment}`
  return {
    id,
    title: topic.title,
    at: topic.of === 'drive' ? null : partsAt,
    equation: topic.equation,
    where: topic.where,
    result: { si: value, quantity: topic.quantity, problem },
    parts: value === null ? [] : (topic.parts?.(reading) ?? []),
    partsAt,
    inputs: listInputs(topic, context, choice),
    source: topic.source,
  }
}

/**
 * Explains one number of an answer in full.
 * @param id - which kind of number
 * @param context - the request, its answer, and which of several is meant: `segment` (the hottest unless said), `cooler`
 *   (all together unless said), `core` (stacked plate ahead of the condenser unless said)
 * @returns what the number rests on; `movesItMost` takes eleven runs of the model for the first number
 *   of an answer, none for the next of its kind
 */
export function explain(id: ExplainId, context: ExplainContext): Explanation {
  const atOnce = explainAtOnce(id, context)
  return { ...atOnce, movesItMost: atOnce.result.si === null ? [] : findMoves(id, context) }
}

function readResult(topic: Topic, reading: Reading): { value: number | null; problem: string | null } {
  try {
    const value = topic.read(reading)
    return { value, problem: value === null ? 'There is no such number on this drive cycle.' : null }
  } catch (error) {
    if (!(error instanceof AppError)) throw error
    return { value: null, problem: error.details.issues?.[0]?.message ?? error.message }
  }
}

/** Bands by answer, then by choice and kind of number: whoever opens one number usually opens the next. */
const knownBands = new WeakMap<Answer, Map<string, Record<string, Band>>>()

/** Every number of one kind with each doubt moved alone: eleven runs of the model, once. */
function bandsOf(from: Topic['from'], context: ExplainContext, choice: ExplainChoice): Record<string, Band> {
  const known = knownBands.get(context.answers) ?? new Map<string, Record<string, Band>>()
  knownBands.set(context.answers, known)
  const key = JSON.stringify([from ?? '', choice])
  const found = known.get(key)
  if (found !== undefined) return found
  const ids = EXPLAIN_IDS.filter((id) => topicOf(id).from === from)
  const bands = simpleBand({
    input: context.answers.input,
    spreads: listSpreads(context.sheet),
    measure: (input: HeatInput): Record<string, number> => {
      const reading = new Reading(input, choice, context.limits)
      return Object.fromEntries(ids.map((id) => [id, topicOf(id).read(reading) ?? 0]))
    },
  })
  known.set(key, bands)
  return bands
}

/** The doubts that move a number most, the largest first. */
export function findMoves(id: ExplainId, context: ExplainContext): Move[] {
  const topic = topicOf(id)
  const spreads = listSpreads(context.sheet)
  const parts = bandsOf(topic.from, context, choiceOf(context))[id]?.parts ?? []
  return parts
    .filter(({ effect }) => Number.isFinite(effect) && effect !== 0)
    .slice(0, MOST_MOVES)
    .map(({ name, effect }) => moveOf(name, effect, spreads, topic, context.sheet))
}

function moveOf(
  name: SpreadName,
  effect: number,
  spreads: RelativeSpreads,
  topic: Topic,
  sheet: BuildSheet,
): Move {
  const path = sheet.values.find((value) => findSpreadOfPath(value.path)?.name === name)?.path ?? null
  return {
    doubt: name,
    path,
    label: SPREADS[name].words,
    relative: spreads[name],
    effect,
    quantity: topic.quantity === 'temperature' ? 'temperatureRise' : topic.quantity,
  }
}

/** One value the model was given, or takes where nothing is given. */
interface Leaf {
  path: string
  value: number | string | boolean
  origin: InputOrigin
  spread: number | null
}

function listInputs(topic: Topic, context: ExplainContext, choice: ExplainChoice): ExplainedInput[] {
  const leaves = listLeaves(context)
  const gear = context.answers.judged.segments[choice.segment]?.gear ?? 1
  const patterns = topic.inputs.map((path) =>
    path
      .replace('@gear', String(gear - 1))
      .replace('@cooler', choice.cooler === null ? '*' : String(choice.cooler))
      .replace('@', String(choice.segment)),
  )
  const found = [...new Set(patterns)].flatMap((pattern) =>
    leaves.filter(({ path }) => matchesPath(pattern, path)),
  )
  return found.map((leaf) => explained(leaf, context.sheet))
}

function explained({ path, value, origin, spread }: Leaf, sheet: BuildSheet): ExplainedInput {
  const isNumber = typeof value === 'number'
  return {
    path,
    label: labelOf(path, sheet),
    si: isNumber ? value : null,
    words: isNumber ? null : valueWords(path, value),
    quantity: findLabel(path)?.quantity ?? 'number',
    origin,
    spread,
  }
}

/** Everything the judged answer was computed from, leaf by leaf, with the model's defaults where nothing is given. */
function listLeaves(context: ExplainContext): Leaf[] {
  const { input } = context.answers
  const spreads = listSpreads(context.sheet)
  const build = flattenBranch(input.build, 'typical').map(({ path, value }): Leaf => {
    const onSheet = context.sheet.values.find((one) => one.path === path)
    if (onSheet === undefined || onSheet.value !== value)
      return { path, value, origin: 'set-up', spread: findSpreadOfPath(path)?.relative ?? null }
    return { path, value, origin: onSheet.origin, spread: relativeSpreadOf(onSheet) ?? null }
  })
  const driven = flattenBranch({ load: input.load, duty: input.duty }, 'typical').map(
    ({ path, value }): Leaf => ({ path, value, origin: 'scenario', spread: spreadOfDrive(path, spreads) }),
  )
  const given = [...build, ...driven]
  const paths = new Set(given.map(({ path }) => path))
  return [...given, ...listDefaults(input).filter(({ path }) => !paths.has(path))]
}

/** Doubts about what the drive asks: a trailer is as well known as the truck that pulls it, the road’s drag never is. */
const DOUBTS_OF_DRIVE: Readonly<Record<string, SpreadName>> = {
  'load.cargoMassKg': 'mass',
  'load.trailerMassKg': 'mass',
  'load.trailerDragAreaM2': 'dragArea',
}

function spreadOfDrive(path: string, spreads: RelativeSpreads): number | null {
  const doubt = path.endsWith('.rollingResistance') ? 'rollingResistance' : DOUBTS_OF_DRIVE[path]
  return doubt === undefined ? null : spreads[doubt]
}

/** What the model takes where the sheet says nothing: typical values, with the spread of their doubt. */
function listDefaults(input: HeatInput): Leaf[] {
  const { build, duty } = input
  const values = flattenBranch(defaultsOf(build), 'typical')
  const rolling = duty.segments.map((segment, index) => ({
    path: `duty.segments.${index}.rollingResistance`,
    value: resolveRollingResistance(segment),
    spread: SPREADS.rollingResistance.relative,
  }))
  return [...values, ...rolling].map((one) => ({
    path: one.path,
    value: one.value,
    origin: 'typical',
    spread: 'spread' in one ? one.spread : (findSpreadOfPath(one.path)?.relative ?? null),
  }))
}

function defaultsOf({ engine }: Build) {
  return {
    engine: { coolantHeatRatio: DEFAULTS.coolantHeatRatio[engine.fuel] },
    converter: {
      couplingPoint: DEFAULTS.couplingPoint,
      heatCapacityJK: DEFAULTS.converterHeatCapacityJK,
      oilShare: DEFAULTS.converterOilShare,
    },
    transmission: {
      caseAreaM2: DEFAULTS.caseAreaM2,
      shiftStyle: DEFAULTS.shiftStyle,
      ratedInputTorqueNm: engine.peakTorqueNm,
      pump: DEFAULTS.pump,
    },
    transferCase: DEFAULTS.transferCase,
    axle: DEFAULTS.axle,
    cooling: {
      lines: { fittingsK: DEFAULTS.fittingsK, roughnessM: DEFAULTS.roughnessM },
      feed: DEFAULTS.feed,
      stack: { ramFraction: DEFAULTS.stackRamFraction, blockedFraction: 0 },
      radiator: { thermostat: DEFAULTS.thermostat },
      condenserW: DEFAULTS.condenserW,
      underbodyRiseK: DEFAULTS.underbodyRiseK,
      coolantHeatCapacityJK: DEFAULTS.coolantHeatCapacityJK,
    },
  }
}
