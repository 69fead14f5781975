import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { z } from 'zod'
import { listIssues } from '#shared/build-sheet/sheet'
import { ReplayRequestSchema, SizingRequestSchema, SweepRequestSchema } from '#shared/schemas/estimate'
import { HeatInputSchema } from '#shared/schemas/heat-input'
import { arbitraryInput, couplingLimit, evenly } from '../../support/arbitrary-truck'
import { changedAt, isObject, placesWhere, valueAt, type Path } from '../../support/paths'
import { holdsFor, PROPERTY_TIMEOUT_MS } from '../../support/properties'

/** One thing wrong in an input that was right: the answer names the place. */

/** Fields that may be left out, as the interface documents them; every other field is needed. */
const OPTIONAL = new Set(
  [
    'curve coolantHeatRatio stallTorqueNm couplingPoint heatCapacityJK oilShare lockup maxTurbineTorqueNm slipRpm',
    'caseAreaM2 shiftStyle ratedInputTorqueNm pump surfaceM2 ramFraction fanFlowM3S blockedFraction',
    'parallelWithPrevious airShare oilInC fittingsK roughnessM feed bypass pumpRpm thermostat condenserW underbodyRiseK',
    'coolantHeatCapacityJK load cargoMassKg trailerMassKg trailerDragAreaM2 airConditioning start accelerationMps2 idleS',
    'inGear surface rollingResistance headwindMps range topGear calibration heatScale coolerScale flowScale fluidLife',
    'segment climb engineRpm gear',
  ].flatMap((line) => line.split(' ')),
)

/** Whether a field may be missing where it stands. */
function mayBeMissing(path: Path, root: unknown): boolean {
  const key = path.at(-1)
  const holder = valueAt(root, path.slice(0, -1))
  if (typeof key === 'number') return true
  if (path.includes('start')) return true
  if (path.includes('targets')) return isObject(holder) && Object.keys(holder).length > 1
  if (key === 'grade') return isObject(holder) && holder['kind'] === 'stopGo'
  if (key === 'minGear' || key === 'minSpeedMps') return isObject(holder) && holder['fitted'] !== true
  return OPTIONAL.has(key as string)
}

type Fault = { path: Path; wrong: unknown }

const wrongKind = (old: unknown): unknown =>
  typeof old === 'number'
    ? 'twelve'
    : typeof old === 'string'
      ? 12
      : typeof old === 'boolean'
        ? 'yes'
        : Array.isArray(old)
          ? { 0: old[0] as unknown }
          : 12

/** Faults of each kind that an input can have; a draw picks one. */
const FAULTS: Record<string, (root: unknown) => Fault[]> = {
  'a field that is needed taken away': (root) =>
    placesWhere(root, (_value, path) => path.length > 0 && !mayBeMissing(path, root)).map((path) => ({
      // One of the two lengths of a segment is needed; asked for either, it speaks of the first.
      path: path.at(-1) === 'distanceM' ? [...path.slice(0, -1), 'durationS'] : path,
      wrong: changedAt(root, path, () => undefined),
    })),
  'a field nobody knows': (root) =>
    placesWhere(root, isObject).map((path) => ({
      path: [...path, 'flavour'],
      wrong: changedAt(root, [...path, 'flavour'], () => 1),
    })),
  'a value of another kind': (root) =>
    placesWhere(root, (_value, path) => path.length > 0).map((path) => ({
      path,
      wrong: changedAt(root, path, wrongKind),
    })),
  'nothing where something stood': (root) =>
    placesWhere(root, (_value, path) => path.length > 0).map((path) => ({
      path,
      wrong: changedAt(root, path, () => null),
    })),
  'not a number': (root) =>
    placesWhere(root, (value) => typeof value === 'number').map((path) => ({
      path,
      wrong: changedAt(root, path, () => Number.NaN),
    })),
  'a number without end': (root) =>
    placesWhere(root, (value) => typeof value === 'number').map((path) => ({
      path,
      wrong: changedAt(root, path, () => Number.NEGATIVE_INFINITY),
    })),
  'a number far above its range': (root) =>
    placesWhere(root, (value) => typeof value === 'number').map((path) => ({
      path,
      wrong: changedAt(root, path, () => 1e13),
    })),
  'a number far below its range': (root) =>
    placesWhere(root, (value) => typeof value === 'number').map((path) => ({
      path,
      wrong: changedAt(root, path, () => -1e13),
    })),
  'a word that is not in the list': (root) =>
    placesWhere(root, (value, path) => typeof value === 'string' && path.at(-1) !== 'name').map((path) => ({
      path,
      wrong: changedAt(root, path, () => 'nonesuch'),
    })),
}

function expectNamed(schema: z.ZodType, { path, wrong }: Fault) {
  const parsed = schema.safeParse(wrong)
  expect(parsed.success, `${path.join('.')} was taken`).toBe(false)
  if (parsed.success) return
  const issues = listIssues(parsed.error)
  for (const issue of issues) expect(issue.message.length).toBeGreaterThan(5)
  expect(issues.map((issue) => issue.path)).toContain(path.join('.'))
}

const input = arbitraryInput({ maxSegments: 2 })
const REQUESTS: Record<string, { schema: z.ZodType; drawn: fc.Arbitrary<object> }> = {
  estimate: { schema: HeatInputSchema, drawn: input },
  sweep: {
    schema: SweepRequestSchema,
    drawn: fc.record({
      input,
      speedMps: evenly(5, 30),
      grades: fc.array(evenly(0, 0.1), { minLength: 1, maxLength: 3 }),
      climb: fc.record({ distanceM: evenly(100, 5000) }),
    }),
  },
  sizing: {
    schema: SizingRequestSchema,
    drawn: fc.record({
      input,
      construction: fc.constantFrom('stacked-plate', 'plate-fin', 'tube-fin'),
      position: fc.constantFrom('ahead-of-condenser', 'behind-condenser', 'remote'),
      targets: fc.record({ sumpC: evenly(60, 120), coolerInletC: evenly(80, 150) }),
      basis: fc.constant('peak'),
    }),
  },
  replay: {
    schema: ReplayRequestSchema,
    drawn: fc.record({
      input,
      trace: fc.constant({
        timeS: [0, 1, 2],
        speedMps: [3, 4, 5],
        grade: [0, 0.01, 0.02],
        engineRpm: [900, 1000, 1100],
      }),
    }),
  },
}

describe('a converter that would give more power than it takes', () => {
  it('is refused, by the number that makes it so', () =>
    holdsFor(
      100,
      fc.record({ input, torqueRatio: evenly(2.05, 5), over: evenly(1.001, 1.2), given: fc.boolean() }),
      ({ input: plain, torqueRatio, over, given }) => {
        const limit = couplingLimit(torqueRatio)
        const couplingPoint = limit * over
        fc.pre(given ? couplingPoint <= 1 : limit < 0.88)
        const converter = { ...plain.build.converter, stallTorqueRatio: torqueRatio, couplingPoint }
        if (!given) Reflect.deleteProperty(converter, 'couplingPoint')
        // It would: somewhere between stall and coupling the power ratio passes 1.
        const coupling = given ? couplingPoint : 0.88
        const ratios = Array.from({ length: 1000 }, (_, step) => (coupling * step) / 1000)
        const best = Math.max(...ratios.map((sr) => sr * (1 + (torqueRatio - 1) * (1 - sr / coupling))))
        expect(best).toBeGreaterThan(1)
        expectNamed(HeatInputSchema, {
          path: ['build', 'converter', given ? 'couplingPoint' : 'stallTorqueRatio'],
          wrong: { ...plain, build: { ...plain.build, converter } },
        })
      },
    ))
})

describe.each(Object.entries(REQUESTS))('a request to %s', (_name, { schema, drawn }) => {
  it('is taken as it is', () =>
    holdsFor(30, drawn, (request) => {
      expect(schema.safeParse(request).error?.issues ?? []).toEqual([])
    }))

  it.each(Object.keys(FAULTS))(
    'is refused by the place of %s',
    (kind) =>
      holdsFor(_name === 'estimate' ? 120 : 30, fc.tuple(drawn, fc.nat()), ([request, pick]) => {
        const faults = FAULTS[kind]?.(request) ?? []
        const fault = faults[pick % faults.length]
        if (fault === undefined) throw new Error('no place for such a fault')
        expectNamed(schema, fault)
      }),
    PROPERTY_TIMEOUT_MS,
  )
})
