import type { Duty, HeatInput } from '../schemas/heat-input'
import type { BuildSheet, SheetValue } from '../schemas/sheet'
import { DEFAULTS, resolveRollingResistance } from '../heat/resolve'

/**
 * The doubts of an estimate: eleven inputs that nobody measures, each with one standard deviation and what it does to the
 * model's input. The simple band moves them one by one, a sample all at once; both through `apply`.
 */

export const SPREAD_NAMES = [
  'mass',
  'dragArea',
  'rollingResistance',
  'stallSpeed',
  'gearLosses',
  'underbodyRise',
  'coolerUa',
  'faceVelocity',
  'coolerFlow',
  'generatedHeat',
  'coolantHeat',
] as const
export type SpreadName = (typeof SPREAD_NAMES)[number]

export interface Spread {
  name: SpreadName
  /** What a builder calls it. */
  words: string
  /** One standard deviation as a share of the value, log-normal about a median of 1, where nobody measured; judgement. */
  relative: number
  /** The same once it was measured on this truck; judgement. */
  measuredRelative: number
  /** Leaves of the sheet that settle it, `*` for any index; a doubt without one stays open until it is calibrated. */
  paths: readonly string[]
  /** The input with this one quantity times `factor`; everything else, and the input itself, stays. */
  apply: (input: HeatInput, factor: number) => HeatInput
}

function scaleOptional(value: number | undefined, factor: number): number | undefined {
  return value === undefined ? undefined : value * factor
}

/** Drops what is undefined, so that an input stays as sparse as it was. */
function sparse<T extends object>(fields: T): T {
  return Object.fromEntries(Object.entries(fields).filter(([, value]) => value !== undefined)) as T
}

function withCalibration(
  input: HeatInput,
  field: 'heatScale' | 'coolerScale' | 'flowScale',
  factor: number,
): HeatInput {
  return {
    ...input,
    calibration: { ...input.calibration, [field]: (input.calibration?.[field] ?? 1) * factor },
  }
}

function withRollingResistance(duty: Duty, factor: number): Duty {
  return {
    ...duty,
    segments: duty.segments.map((segment) => ({
      ...segment,
      rollingResistance: Math.min(1, resolveRollingResistance(segment) * factor),
    })),
  }
}

export const SPREADS: Record<SpreadName, Spread> = {
  mass: {
    name: 'mass',
    words: 'loaded weight',
    relative: 0.05,
    measuredRelative: 0.005,
    paths: ['vehicle.massKg'],
    // The whole rolling mass: a truck whose weight is a guess pulls a trailer whose weight is one.
    apply: (input, factor) => ({
      ...input,
      build: {
        ...input.build,
        vehicle: { ...input.build.vehicle, massKg: input.build.vehicle.massKg * factor },
      },
      load: sparse({
        ...input.load,
        cargoMassKg: scaleOptional(input.load?.cargoMassKg, factor),
        trailerMassKg: scaleOptional(input.load?.trailerMassKg, factor),
      }),
    }),
  },
  dragArea: {
    name: 'dragArea',
    words: 'drag area',
    relative: 0.08,
    measuredRelative: 0.03,
    paths: ['vehicle.dragAreaM2'],
    apply: (input, factor) => ({
      ...input,
      build: {
        ...input.build,
        vehicle: { ...input.build.vehicle, dragAreaM2: input.build.vehicle.dragAreaM2 * factor },
      },
      load: sparse({
        ...input.load,
        trailerDragAreaM2: scaleOptional(input.load?.trailerDragAreaM2, factor),
      }),
    }),
  },
  rollingResistance: {
    name: 'rollingResistance',
    words: 'rolling resistance',
    relative: 0.15,
    measuredRelative: 0.05,
    paths: [],
    apply: (input, factor) => ({ ...input, duty: withRollingResistance(input.duty, factor) }),
  },
  stallSpeed: {
    name: 'stallSpeed',
    words: 'converter stall speed',
    relative: 0.06,
    measuredRelative: 0.02,
    paths: ['converter.stallRpm'],
    apply: (input, factor) => ({
      ...input,
      build: {
        ...input.build,
        converter: { ...input.build.converter, stallRpm: input.build.converter.stallRpm * factor },
      },
    }),
  },
  gearLosses: {
    name: 'gearLosses',
    words: 'gear losses',
    relative: 0.15,
    measuredRelative: 0.05,
    paths: ['transmission.gears.*.efficiency'],
    apply: (input, factor) => ({
      ...input,
      build: {
        ...input.build,
        transmission: {
          ...input.build.transmission,
          gears: input.build.transmission.gears.map((gear) => ({
            ...gear,
            efficiency: 1 - (1 - gear.efficiency) * factor,
          })),
        },
      },
    }),
  },
  underbodyRise: {
    name: 'underbodyRise',
    words: 'heat under the body',
    relative: 0.4,
    measuredRelative: 0.15,
    paths: ['cooling.underbodyRiseK'],
    apply: (input, factor) => ({
      ...input,
      build: {
        ...input.build,
        cooling: {
          ...input.build.cooling,
          underbodyRiseK: (input.build.cooling.underbodyRiseK ?? DEFAULTS.underbodyRiseK) * factor,
        },
      },
    }),
  },
  coolerUa: {
    name: 'coolerUa',
    words: 'what the coolers really carry',
    relative: 0.12,
    measuredRelative: 0.05,
    paths: ['cooling.coolers.*.rating.heatW'],
    apply: (input, factor) => withCalibration(input, 'coolerScale', factor),
  },
  faceVelocity: {
    name: 'faceVelocity',
    words: 'air through the stack',
    relative: 0.2,
    measuredRelative: 0.08,
    paths: ['cooling.stack.fan.faceVelocityMps', 'cooling.stack.ramFraction'],
    // Both parts by one factor is the whole face velocity by that factor: it is homogeneous in the two.
    apply: (input, factor) => {
      const { stack } = input.build.cooling
      return {
        ...input,
        build: {
          ...input.build,
          cooling: {
            ...input.build.cooling,
            stack: {
              ...stack,
              ramFraction: (stack.ramFraction ?? DEFAULTS.stackRamFraction) * factor,
              fan: { ...stack.fan, faceVelocityMps: stack.fan.faceVelocityMps * factor },
            },
          },
        },
      }
    },
  },
  coolerFlow: {
    name: 'coolerFlow',
    words: 'oil flow to the coolers',
    relative: 0.15,
    measuredRelative: 0.05,
    paths: ['cooling.feed.openFlowM3S'],
    apply: (input, factor) => withCalibration(input, 'flowScale', factor),
  },
  generatedHeat: {
    name: 'generatedHeat',
    words: 'heat made in the transmission',
    relative: 0.08,
    measuredRelative: 0.03,
    paths: [],
    apply: (input, factor) => withCalibration(input, 'heatScale', factor),
  },
  coolantHeat: {
    name: 'coolantHeat',
    words: 'heat of the engine to its coolant',
    relative: 0.15,
    measuredRelative: 0.05,
    paths: ['engine.coolantHeatRatio'],
    apply: (input, factor) => ({
      ...input,
      build: {
        ...input.build,
        engine: {
          ...input.build.engine,
          coolantHeatRatio:
            (input.build.engine.coolantHeatRatio ?? DEFAULTS.coolantHeatRatio[input.build.engine.fuel]) *
            factor,
        },
      },
    }),
  },
}

/**
 * The factor of a log-normal quantity whose median is 1.
 *
 * @param relative - one standard deviation of its logarithm
 * @param deviations - how many standard deviations from the median
 */
export function spreadFactor(relative: number, deviations: number): number {
  return Math.exp(relative * deviations)
}

/** Whether a path is one of those a pattern stands for, `*` being any place in a list. */
export function matchesPath(pattern: string, path: string): boolean {
  const [wanted, given] = [pattern.split('.'), path.split('.')]
  return (
    wanted.length === given.length && wanted.every((part, index) => part === '*' || part === given[index])
  )
}

/** Which doubt a leaf of the sheet settles, if any. */
export function findSpreadOfPath(path: string): Spread | undefined {
  return SPREAD_NAMES.map((name) => SPREADS[name]).find(({ paths }) =>
    paths.some((pattern) => matchesPath(pattern, path)),
  )
}

/** One standard deviation of one value of the sheet: its own where it has one, else by whether it was measured. */
export function relativeSpreadOf(value: SheetValue): number | undefined {
  const spread = findSpreadOfPath(value.path)
  if (spread === undefined) return value.relativeSpread
  return value.relativeSpread ?? (value.origin === 'measured' ? spread.measuredRelative : spread.relative)
}

export type RelativeSpreads = Record<SpreadName, number>

/**
 * One standard deviation of each of the eleven, for a sheet: a measured value narrows its own. Of several leaves (one per
 * gear, one per cooler) the widest holds, so that one measured gear does not speak for all.
 *
 * @param sheet - without one: as if nothing was measured
 */
export function listSpreads(sheet?: BuildSheet): RelativeSpreads {
  const spreads = Object.fromEntries(
    SPREAD_NAMES.map((name) => [name, SPREADS[name].relative]),
  ) as RelativeSpreads
  if (sheet === undefined) return spreads
  const found = new Map<SpreadName, number>()
  for (const value of sheet.values) {
    const spread = findSpreadOfPath(value.path)
    if (spread === undefined) continue
    found.set(spread.name, Math.max(found.get(spread.name) ?? 0, relativeSpreadOf(value) ?? spread.relative))
  }
  return { ...spreads, ...Object.fromEntries(found) }
}
