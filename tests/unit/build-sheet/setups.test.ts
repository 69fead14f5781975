import { describe, expect, it } from 'vitest'
import { ARCHETYPES, createArchetypeSheet } from '../../../shared/build-sheet/archetypes'
import {
  createDriveDifferently,
  createStandingSetups,
  deriveInput,
  deriveInputs,
  type ScenarioConditions,
} from '../../../shared/build-sheet/setups'
import {
  deriveBuild,
  removeSheetBranch,
  setSheetBranch,
  setSheetValue,
} from '../../../shared/build-sheet/sheet'
import { AppError } from '../../../shared/errors'
import type { Control } from '../../../shared/schemas/control'
import { HeatInputSchema } from '../../../shared/schemas/heat-input'
import { SetupChangeSchema } from '../../../shared/schemas/setup'

const sheet = createArchetypeSheet(ARCHETYPES[2]!)
const build = deriveBuild(sheet)
const gears = build.transmission.gears.length

const scenario: ScenarioConditions = {
  load: { trailerMassKg: 1800, trailerDragAreaM2: 2.4 },
  duty: {
    ambientC: 38,
    altitudeM: 500,
    segments: [
      { kind: 'steady', speedMps: 27, grade: 0, durationS: 1200 },
      { kind: 'steady', speedMps: 20, grade: 0.06, distanceM: 8000 },
      { kind: 'steady', speedMps: 22, grade: 0.03, durationS: 300 },
      { kind: 'steady', speedMps: 9, grade: 0, surface: 'sand', durationS: 100 },
      { kind: 'steady', speedMps: 25, grade: -0.05, distanceM: 3000 },
      { kind: 'idle', durationS: 60 },
    ],
  },
}
const control = (lockupSeen: Control['lockupSeen']): Control => ({
  generationsMatch: 'yes',
  lockupCommand: 'controller',
  loadSignal: 'yes',
  brakeSwitchWired: 'yes',
  lockupSeen,
})

describe('as it is', () => {
  it('is the sheet and the scenario and nothing else', () => {
    const input = deriveInput({ sheet, scenario })
    expect(input).toEqual({ build, load: scenario.load, duty: scenario.duty })
    expect(HeatInputSchema.safeParse(input).success).toBe(true)
    expect(deriveInput({ sheet, scenario, setup: { change: {} } })).toEqual(input)
  })

  it('names a top gear the transmission does not have', () => {
    const odd = {
      ...scenario,
      duty: { ...scenario.duty, segments: [{ ...scenario.duty.segments[0]!, topGear: 9 }] },
    }
    expect(() => deriveInput({ sheet, scenario: odd })).toThrow(AppError)
    try {
      deriveInput({ sheet, scenario: odd })
    } catch (error) {
      expect((error as AppError).details.issues?.[0]).toEqual({
        path: 'duty.segments.0.topGear',
        message: 'the transmission has 5 gears: must be at most 5',
      })
    }
  })
})

describe('driving it differently', () => {
  const change = createDriveDifferently({ build, scenario })

  it('is one gear lower, 5 mph slower than the fastest climb, and protects the fluid', () => {
    expect(SetupChangeSchema.safeParse(change).success).toBe(true)
    expect(change.topGear).toBe(gears - 1)
    expect(change.shiftStyle).toBe('tow')
    // 5 mph = 2.2352 m/s, exact.
    expect(change.speedMps).toBeCloseTo(22 - 2.2352, 9)
  })

  it('changes climbs and loose ground only', () => {
    const { segments } = deriveInput({ sheet, scenario, setup: { change } }).duty
    const before = scenario.duty.segments
    expect(segments[0]).toEqual(before[0])
    expect(segments[1]).toMatchObject({ speedMps: change.speedMps, topGear: gears - 1, distanceM: 8000 })
    expect(segments[3]).toMatchObject({ speedMps: 9, topGear: gears - 1, durationS: 100 })
    expect(segments[4]).toEqual(before[4])
    expect(segments[5]).toEqual(before[5])
  })

  it('keeps the road as long: a climb given by its time takes longer', () => {
    const slower = deriveInput({ sheet, scenario, setup: { change } }).duty.segments[2]
    const before = scenario.duty.segments[2]
    if (slower?.kind !== 'steady' || before?.kind !== 'steady') throw new Error('not a climb')
    expect(slower.speedMps * (slower.durationS ?? 0)).toBeCloseTo(
      before.speedMps * (before.durationS ?? 0),
      6,
    )
  })

  it('means all of a drive cycle without a climb', () => {
    const flat: ScenarioConditions = {
      load: {},
      duty: { ...scenario.duty, segments: [scenario.duty.segments[0]!, { kind: 'idle', durationS: 60 }] },
    }
    const flatChange = createDriveDifferently({ build, scenario: flat })
    expect(flatChange.speedMps).toBeCloseTo(27 - 2.2352, 9)
    const { segments } = deriveInput({ sheet, scenario: flat, setup: { change: flatChange } }).duty
    expect(segments[0]).toMatchObject({ speedMps: flatChange.speedMps, topGear: gears - 1 })
    expect(segments[1]).toEqual(flat.duty.segments[1])
  })

  it('does not slow a crawl', () => {
    const crawl: ScenarioConditions = {
      load: {},
      duty: {
        ambientC: 30,
        altitudeM: 0,
        segments: [
          { kind: 'steady', speedMps: 1.5, grade: 0.12, surface: 'rock', range: 'low', durationS: 600 },
        ],
      },
    }
    expect(createDriveDifferently({ build, scenario: crawl }).speedMps).toBeUndefined()
  })

  it('keeps a driver who already holds a lower gear', () => {
    const [, climb] = scenario.duty.segments
    const held: ScenarioConditions = {
      ...scenario,
      duty: { ...scenario.duty, segments: [{ ...climb!, topGear: 2 }] },
    }
    expect(deriveInput({ sheet, scenario: held, setup: { change } }).duty.segments[0]?.topGear).toBe(2)
  })

  it('comes with every build, beside as it is', () => {
    const [asItIs, differently] = createStandingSetups({ build, scenario })
    expect(asItIs).toEqual({ name: 'As it is', kind: 'as-it-is', change: {} })
    expect(differently.kind).toBe('drive-differently')
    expect(differently.change).toEqual(change)
  })
})

describe('a change of the truck', () => {
  it('replaces the loop, takes the bypass out, changes the shift style', () => {
    const withBypass = setSheetBranch(sheet, 'cooling.bypass', { openC: 71, fullC: 82 }, 'typical')
    const coolers = ARCHETYPES[1]!.build.cooling.coolers
    const input = deriveInput({
      sheet: withBypass,
      scenario,
      setup: { change: { coolers, removeBypass: true, shiftStyle: 'economy' } },
    })
    expect(input.build.cooling.coolers).toEqual(coolers)
    expect(input.build.cooling).not.toHaveProperty('bypass')
    expect(input.build.transmission.shiftStyle).toBe('economy')
    expect(deriveInput({ sheet: withBypass, scenario, setup: { change: {} } }).build.cooling.bypass).toEqual({
      openC: 71,
      fullC: 82,
    })
  })

  it('of a top gear the truck does not have changes nothing', () => {
    expect(deriveInput({ sheet, scenario, setup: { change: { topGear: 11 } } })).toEqual(
      deriveInput({ sheet, scenario }),
    )
  })
})

describe('lock-up', () => {
  it.each(['no', 'unknown'] as const)(
    'seen on the road: %s — both states, judged by the unlocked',
    (seen) => {
      const { locked, unlocked, judged, judgedBy } = deriveInputs({ sheet, scenario, control: control(seen) })
      expect(locked?.build.converter.lockup?.fitted).toBe(true)
      expect(unlocked?.build.converter.lockup).toEqual({ fitted: false })
      expect(judgedBy).toBe('unlocked')
      expect(judged).toBe(unlocked)
    },
  )

  it('proven: the locked alone', () => {
    const derived = deriveInputs({ sheet, scenario, control: control('yes') })
    expect(derived.unlocked).toBeNull()
    expect(derived.judgedBy).toBe('locked')
    expect(derived.judged).toEqual(deriveInput({ sheet, scenario, lockupProven: true }))
  })

  it('said by the set-up', () => {
    const never = deriveInputs({
      sheet,
      scenario,
      control: control('yes'),
      setup: { change: { lockup: 'never' } },
    })
    expect(never).toMatchObject({ locked: null, judgedBy: 'unlocked' })
    const always = deriveInputs({
      sheet,
      scenario,
      control: control('no'),
      setup: { change: { lockup: 'always' } },
    })
    expect(always).toMatchObject({ unlocked: null, judgedBy: 'locked' })
    expect(
      deriveInput({ sheet, scenario, lockupProven: false, setup: { change: { lockup: 'always' } } }).build
        .converter.lockup?.fitted,
    ).toBe(true)
  })

  it('cannot be had where no clutch is fitted', () => {
    const bare = setSheetValue(removeSheetBranch(sheet, 'converter.lockup'), {
      path: 'converter.lockup.fitted',
      value: false,
      origin: 'measured',
    })
    const derived = deriveInputs({
      sheet: bare,
      scenario,
      control: control('yes'),
      setup: { change: { lockup: 'always' } },
    })
    expect(derived).toMatchObject({ locked: null, judgedBy: 'unlocked' })
  })

  it('leaves the sheet as it was', () => {
    const copy = structuredClone(sheet)
    deriveInputs({ sheet, scenario, control: control('no') })
    expect(sheet).toEqual(copy)
  })
})
