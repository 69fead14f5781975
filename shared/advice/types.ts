import type { ScenarioConditions } from '../build-sheet/setups'
import type { CatalogueCooler } from '../schemas/catalogue-cooler'
import type { Control } from '../schemas/control'
import type { Judgement, Limits } from '../schemas/limits'
import type { SetupChange } from '../schemas/setup'
import type { BuildSheet, SheetValue } from '../schemas/sheet'
import type { Answer, Refusal } from '../workbench/answer'
import type { AdviceCode } from './codes'
import type { Figure, Words } from './words'

/** What advice is about: one set-up of one build on one scenario, and what the model said of it. */
export interface AdviceRequest {
  sheet: BuildSheet
  control: Control
  limits: Limits
  scenario: ScenarioConditions
  /** The set-up in use; "as it is" when left out. */
  setup?: { change: SetupChange }
  /** From `computeAnswer` for just this request: the judged state and the other one, or why there is none. */
  answers: Answer | Refusal
  /** Parts of the catalogue: a cooler of the loop that bears the name of one is checked against all its ratings. */
  parts?: readonly CatalogueCooler[]
}

/** How urgent; the words of the ladder, and `note` for what only wants to be known. */
export type Severity = 'note' | Exclude<Judgement, 'fine'>

/** What a remedy changes; `applyRemedy` lays it over a request. */
export type RemedyWhat =
  /** Laid over the set-up in use. */
  | { kind: 'set-up'; change: SetupChange }
  /** Values put on the sheet, branches taken off it. */
  | { kind: 'sheet'; values: Pick<SheetValue, 'path' | 'value'>[]; remove?: string[] }
  /** Load or drive cycle replaced whole. */
  | { kind: 'scenario'; load?: ScenarioConditions['load']; duty?: ScenarioConditions['duty'] }

/** One number before and after a remedy, in SI; null where there is no answer. */
export interface Change {
  before: number | null
  after: number | null
}

/** What a remedy comes to: the model run with it. */
export interface Effect {
  /** Peak of the pan [°C]. */
  sumpC: Change
  /** Peak of the to-cooler line [°C]. */
  coolerInletC: Change
  /** Peak of the coolant [°C]. */
  coolantC: Change
  /** Speed held on the hardest stretch [m/s]; null where none is driven steadily. */
  speedMps: Change
  /** Time a quart takes at idle [s]; only where advice is about flow. */
  idleQuartS?: Change
  /** Warmest the pan ever settles [°C]; only where advice is about cold. */
  settledSumpC?: Change
  /** Steepest grade held; only when asked for. */
  gradeHeld?: Change
  judgement: { before: Judgement | null; after: Judgement | null }
  /** Why there is no answer with it; null when there is one. */
  problem: string | null
}

/** Something to do, and what it comes to. */
export interface Remedy {
  /** The same remedy has the same id in every advice. */
  id: string
  label: Words
  what: RemedyWhat
  /** Null until it was worked out: see `remediesFor`. */
  effect: Effect | null
}

/** A remedy that was worked out. */
export type TriedRemedy = Remedy & { effect: Effect }

/** One thing to know, mend or do differently. */
export interface Advice {
  code: AdviceCode
  severity: Severity
  title: Words
  /** What it is here, with its numbers. */
  text: Words
  /** What to do about it, in the words of the trade. */
  action: Words
  value?: Figure
  limit?: Figure
  /** What it is about: a path of the sheet (`cooling.coolers.1`) or of the drive cycle (`duty.segments.2`). */
  at?: string
  /** Further places of the same kind. */
  alsoAt?: string[]
  remedies: Remedy[]
}
