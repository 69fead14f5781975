import { createGenericCore } from '../../../shared/build-sheet/generic-cooler'
import { type ArchetypeId, findArchetype } from '../../../shared/build-sheet/archetypes'
import { getDemoDuty, type DemoDutyKey } from '../../../shared/build-sheet/demo-duties'
import { createDefaultFacts, createSheetFromFacts } from '../../../shared/build-sheet/facts'
import { removeSheetBranch, setSheetBranch, setSheetValue } from '../../../shared/build-sheet/sheet'
import type { AdviceCode } from '../../../shared/advice'
import type { AdviceRequest } from '../../../shared/advice/types'
import type { CatalogueAirCooler } from '../../../shared/schemas/catalogue-cooler'
import type { Control } from '../../../shared/schemas/control'
import type { Cooler, Duty, Load, Segment } from '../../../shared/schemas/heat-input'
import type { Limits } from '../../../shared/schemas/limits'
import type { SetupChange } from '../../../shared/schemas/setup'
import type { BuildSheet, SheetValue } from '../../../shared/schemas/sheet'
import { computeAnswer } from '../../../shared/workbench/answer'

/** Requests for advice: an archetype on the hill its form starts from, and what is different this time. */

export interface Difference {
  archetype?: ArchetypeId
  /** Values put on the sheet, as typical where no origin is said. */
  values?: (Pick<SheetValue, 'path' | 'value'> & Partial<SheetValue>)[]
  without?: string[]
  coolers?: (stock: readonly Cooler[]) => Cooler[]
  load?: Load
  duty?: Partial<Duty>
  demo?: DemoDutyKey
  segments?: Segment[]
  control?: Partial<Control>
  limits?: (usual: Limits) => Limits
  change?: SetupChange
  parts?: CatalogueAirCooler[]
}

export const defaultDraft = (archetype: ArchetypeId) => createSheetFromFacts(createDefaultFacts(archetype))

function sheetOf(difference: Difference, archetype: ArchetypeId): BuildSheet {
  const stock = defaultDraft(archetype).sheet
  const cleared = (difference.without ?? []).reduce(removeSheetBranch, stock)
  const valued = (difference.values ?? []).reduce(
    (sheet, value) => setSheetValue(sheet, { origin: 'typical', ...value }),
    cleared,
  )
  if (difference.coolers === undefined) return valued
  const coolers = difference.coolers(findArchetype(archetype)?.build.cooling.coolers ?? [])
  return setSheetBranch(valued, 'cooling.coolers', coolers, 'typical')
}

export function requestFor(difference: Difference = {}): AdviceRequest {
  const archetype = difference.archetype ?? 'classic-4x4'
  const draft = defaultDraft(archetype)
  const duty: Duty = {
    ...(difference.demo === undefined ? draft.scenario.duty : getDemoDuty(difference.demo).duty),
    ...(difference.segments === undefined ? {} : { segments: difference.segments }),
    ...difference.duty,
  }
  const base = {
    sheet: sheetOf(difference, archetype),
    control: { ...draft.control, ...difference.control },
    limits: difference.limits?.(draft.limits) ?? draft.limits,
    scenario: { load: difference.load ?? draft.scenario.load, duty },
  }
  const change = difference.change ?? {}
  const answers = computeAnswer({ ...base, setup: { id: 'one', name: 'One', change }, others: [] })
  return {
    ...base,
    ...(difference.change === undefined ? {} : { setup: { change } }),
    ...(difference.parts === undefined ? {} : { parts: difference.parts }),
    answers,
  }
}

const LOCKS = { lockupSeen: 'yes' } as const
const flat = (speedMps: number, durationS = 1200): Segment => ({
  kind: 'steady',
  speedMps,
  grade: 0,
  durationS,
})
const climb = (speedMps: number, grade: number, distanceM = 8000): Segment => ({
  kind: 'steady',
  speedMps,
  grade,
  distanceM,
})

/** A front core whose two ratings contradict one another: twice the heat at the same conditions. */
const MISFITTING: CatalogueAirCooler = {
  id: '01890000-0000-7000-8000-000000000001',
  name: 'Front cooler',
  construction: 'stacked-plate',
  faceAreaM2: 0.058,
  widthM: 0.28,
  heightM: 0.2,
  depthM: 0.04,
  ports: '3/8 in',
  priceCents: 10_000,
  ratings: [4000, 6000].map((heatW, index) => ({
    heatW,
    inletDifferenceK: 55.56,
    oilFlowM3S: 1.26e-4,
    airVelocityMps: 4 + 0.01 * index,
    pressureDropPa: 24_000,
  })),
}

const core = (faceAreaM2: number, name = 'Big core') =>
  createGenericCore({ name, construction: 'stacked-plate', position: 'ahead-of-condenser', faceAreaM2 })

/** For every code an input made for it. */
export const MADE_FOR: Record<AdviceCode, Difference> = {
  rating_impossible: { values: [{ path: 'cooling.coolers.0.rating.heatW', value: 56_000 }] },
  rating_lacks_conditions: {
    archetype: 'diesel-pickup',
    values: [{ path: 'cooling.coolers.1.rating.heatW', value: 7000, origin: 'maker' }],
  },
  weight_class_rating: {
    archetype: 'diesel-pickup',
    values: [
      { path: 'cooling.coolers.1.name', value: 'Tow cooler 24,000 GVW' },
      // 24,000 BTU/h.
      { path: 'cooling.coolers.1.rating.heatW', value: 7033.7, origin: 'maker' },
    ],
  },
  cannot_climb: { load: { trailerMassKg: 2000 }, segments: [flat(20), climb(3, 0.4, 200)] },
  engine_power_exceeds_torque: { values: [{ path: 'engine.peakPowerW', value: 190_000 }] },
  lockup_contradicted: { control: { lockupSeen: 'yes', generationsMatch: 'no' } },
  coolant_over_limit: { demo: 'soft-sand' },
  coolant_hot: { load: { trailerMassKg: 2600, trailerDragAreaM2: 2.6 }, duty: { ambientC: 38 } },
  no_cooler_fixes_this: { demo: 'soft-sand' },
  cooler_needed: {},
  no_cooler_needed: { archetype: 'diesel-pickup' },
  lockup_unproven: { archetype: 'midsize-4x4' },
  unlocked_other_gear_cooler: {},
  hot_line_over_limit_pan_fine: { archetype: 'diesel-pickup', demo: 'soft-sand' },
  cooler_flow_low: {
    values: [
      { path: 'cooling.lines.innerDiameterM', value: 0.0045 },
      { path: 'cooling.lines.fittingsK', value: 40 },
    ],
  },
  speed_not_held: {
    load: { trailerMassKg: 4500, trailerDragAreaM2: 2.6 },
    segments: [flat(25), climb(20, 0.09)],
  },
  front_cores_heat_coolant: {
    coolers: (stock) => [...stock, core(0.1)],
    load: { trailerMassKg: 2400, trailerDragAreaM2: 2.6 },
    duty: { ambientC: 43 },
  },
  coolant_heats_oil: { archetype: 'diesel-pickup', demo: 'rating-grade', control: LOCKS },
  bypass_hides_cooler: {
    archetype: 'diesel-pickup',
    values: [
      { path: 'cooling.bypass.openC', value: 80 },
      { path: 'cooling.bypass.fullC', value: 160 },
    ],
  },
  over_cooled: { archetype: 'diesel-pickup', demo: 'winter-short-trips' },
  heat_up_pan_down: {
    archetype: 'diesel-pickup',
    values: [
      { path: 'cooling.bypass.openC', value: 90 },
      { path: 'cooling.bypass.fullC', value: 94 },
    ],
    segments: [flat(13), climb(16, 0.03)],
  },
  rating_misfit: { archetype: 'diesel-pickup', parts: [MISFITTING] },
  limited_by_oil_flow: { coolers: (stock) => [...stock, core(0.4)] },
  temperature_beyond_data: { demo: 'soft-sand' },
  grade_above_validated_range: { segments: [climb(2, 0.27, 400)] },
}
