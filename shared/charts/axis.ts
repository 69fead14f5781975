import { scaleLinear } from 'd3-scale'

/** How an axis prints a quantity: the unit, and the way from and to SI. */
export interface AxisUnit {
  unit: string
  toDisplay: (value: number) => number
  fromDisplay: (value: number) => number
}

/** One mark of an axis: where it stands and what it says. */
export interface AxisTick {
  value: number
  position: number
  label: string
}

/** A straight axis: SI in, pixels out, ticks at round numbers of the person's unit. */
export interface Axis {
  unit: string
  domain: [number, number]
  ticks: AxisTick[]
  at: (value: number) => number
  invert: (position: number) => number
}

interface AxisRequest {
  /** Lowest and highest value that must fit, in SI. */
  extent: [number, number]
  /** Pixels of the low and the high end. */
  range: [number, number]
  unit: AxisUnit
  /** About how many ticks; the axis takes the nearest round step. */
  tickCount: number
  /** Whether the ends move out to round numbers (true) or stay where they are. */
  roundEnds?: boolean
}

/**
 * A tenth of a pixel is finer than anybody sees, and coarser than the last digits in which the mathematics of two
 * JavaScript engines differ: server and browser draw the very same numbers.
 */
export const toTenth = (pixels: number): number => Math.round(pixels * 10) / 10

const plainNumber = new Intl.NumberFormat('en-US', { maximumFractionDigits: 6 })

/**
 * Makes a straight axis whose ticks are round numbers in the unit a person reads.
 * An empty or upside-down extent is widened to one display unit, so that a flat series still draws.
 */
export function linearAxis({ extent, range, unit, tickCount, roundEnds = true }: AxisRequest): Axis {
  let low = unit.toDisplay(extent[0])
  let high = unit.toDisplay(extent[1])
  if (!(high - low > 1e-9)) {
    low -= 0.5
    high += 0.5
  }
  const scale = scaleLinear().domain([low, high]).range(range)
  if (roundEnds) scale.nice(tickCount)
  const [domainLow = low, domainHigh = high] = scale.domain()
  return {
    unit: unit.unit,
    domain: [unit.fromDisplay(domainLow), unit.fromDisplay(domainHigh)],
    ticks: scale.ticks(tickCount).map((tick) => ({
      value: unit.fromDisplay(tick),
      position: toTenth(scale(tick)),
      label: plainNumber.format(tick),
    })),
    at: (value) => toTenth(scale(unit.toDisplay(value))),
    invert: (position) => unit.fromDisplay(scale.invert(position)),
  }
}
