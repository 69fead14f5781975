import { AppError } from '../errors'
import { estimate } from '../heat'
import type { HeatInput } from '../schemas/heat-input'
import {
  type RelativeSpreads,
  SPREAD_NAMES,
  SPREADS,
  type SpreadName,
  listSpreads,
  spreadFactor,
} from './spreads'

/** Standard deviations from the median to the 10th and 90th percentile of a normal distribution. */
const DEVIATIONS_TO_P90 = 1.28

/** What one doubt does to a number. */
export interface BandPart {
  name: SpreadName
  words: string
  /** Change of the number when the input is moved up by one standard deviation. */
  effect: number
  /** Its share of the variance, 0–1; 0 when nothing varies. */
  share: number
}

export interface Band {
  value: number
  low: number
  high: number
  /** The largest first: what to measure next. */
  parts: BandPart[]
  /** Doubts that could not be moved either way without the model refusing; the band leaves them out. */
  open: SpreadName[]
}

type Peaks = Record<'peakSumpC' | 'peakCoolerInletC', number>

function measurePeaks(input: HeatInput): Peaks {
  const { peakSumpC, peakCoolerInletC } = estimate(input)
  return { peakSumpC, peakCoolerInletC }
}

type Measure<K extends string> = (input: HeatInput) => Record<K, number>

/** The change of every number for one doubt moved up; where the model refuses that, moved down and mirrored. */
function findEffects(
  input: HeatInput,
  base: Record<string, number>,
  spread: SpreadName,
  relative: number,
  measure: Measure<string>,
): Record<string, number> | undefined {
  for (const side of [1, -1]) {
    try {
      const moved = measure(SPREADS[spread].apply(input, spreadFactor(relative, side)))
      return Object.fromEntries(
        Object.entries(base).map(([key, value]) => [key, side * ((moved[key] ?? value) - value)]),
      )
    } catch (error) {
      if (!(error instanceof AppError)) throw error
    }
  }
  return undefined
}

/**
 * The simple band: every doubt moved alone by one standard deviation, their effects taken as independent.
 *
 * Equation: half-width = 1.28 sqrt(Σ (y(k_i) − y)²), k_i = exp(s_i), s_i the doubt's relative standard deviation.
 *
 * @param request.input - the input whose answer the band stands around
 * @param request.spreads - from {@link listSpreads}; without it nothing counts as measured
 * @param request.measure - numbers of an input's answer; the two peaks unless told otherwise
 * @returns per number its value, P10 and P90, and what each doubt adds
 * @throws what the model throws for the input itself
 *
 * Source: first-order propagation of independent uncertainties, JCGM 100:2008 (GUM), 5.1.2.
 */
export function simpleBand<K extends string = keyof Peaks>(request: {
  input: HeatInput
  spreads?: RelativeSpreads
  measure?: Measure<K>
}): Record<K, Band> {
  const spreads = request.spreads ?? listSpreads()
  // Without a measure K is its default, the two peaks.
  const measure: Measure<string> = request.measure ?? measurePeaks
  const base = measure(request.input)
  const moved = SPREAD_NAMES.map((name) => ({
    name,
    effects: spreads[name] === 0 ? {} : findEffects(request.input, base, name, spreads[name], measure),
  }))
  const open = moved.filter(({ effects }) => effects === undefined).map(({ name }) => name)
  const bands = Object.fromEntries(
    Object.entries(base).map(([key, value]) => {
      const effects = moved.map(({ name, effects }) => ({ name, effect: effects?.[key] ?? 0 }))
      const variance = effects.reduce((sum, { effect }) => sum + effect ** 2, 0)
      const halfWidth = DEVIATIONS_TO_P90 * Math.sqrt(variance)
      const parts = effects
        .map(({ name, effect }) => ({
          name,
          words: SPREADS[name].words,
          effect,
          share: variance === 0 ? 0 : effect ** 2 / variance,
        }))
        .sort((a, b) => Math.abs(b.effect) - Math.abs(a.effect))
      return [key, { value, low: value - halfWidth, high: value + halfWidth, parts, open }]
    }),
  )
  return bands as Record<K, Band>
}
