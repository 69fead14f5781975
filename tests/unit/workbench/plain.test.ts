import { describe, expect, it } from 'vitest'
import { createDefaultFacts, createSheetFromFacts, EightFactsSchema } from '../../../shared/build-sheet/facts'
import { ARCHETYPE_IDS } from '../../../shared/build-sheet/archetypes'
import { listWarningCodes } from '../../../shared/heat'
import { DutySchema } from '../../../shared/schemas/heat-input'
import { describeBuild } from '../../../shared/workbench/describe-build'
import {
  addSegment,
  createSegment,
  measureBy,
  moveSegment,
  removeSegment,
  segmentName,
} from '../../../shared/workbench/duty-edit'
import { fluidDates, formatDay } from '../../../shared/workbench/fluid-dates'
import { roundFacts } from '../../../shared/workbench/round-facts'
import { WARNING_ADVICE } from '../../../shared/workbench/warning-advice'
import { fieldText } from '../../../shared/units/display'

describe('editing a drive cycle', () => {
  const duty = createSheetFromFacts(createDefaultFacts('classic-4x4')).scenario.duty

  it('gives only what the model takes, whatever is added, moved and taken out', () => {
    for (const kind of ['steady', 'stopGo', 'stall', 'idle'] as const) {
      const longer = addSegment(duty, 0, kind)
      expect(longer.segments[1]).toEqual(createSegment(kind))
      expect(DutySchema.safeParse(longer).success).toBe(true)
      expect(removeSegment(longer, 1)).toEqual(duty)
      expect(DutySchema.safeParse(moveSegment(longer, 1, 3)).success).toBe(true)
    }
  })

  it('never takes the last stretch out, and moves nothing beyond the ends', () => {
    const one = { ...duty, segments: duty.segments.slice(0, 1) }
    expect(removeSegment(one, 0)).toBe(one)
    expect(moveSegment(duty, 0, -1)).toBe(duty)
    expect(moveSegment(duty, 2, 3)).toBe(duty)
  })

  it('turns length into time and back without changing either', () => {
    const steady = { kind: 'steady' as const, speedMps: 20, grade: 0.06, distanceM: 8000 }
    expect(measureBy(steady, 'durationS')).toEqual({
      kind: 'steady',
      speedMps: 20,
      grade: 0.06,
      durationS: 400,
    })
    expect(measureBy(measureBy(steady, 'durationS'), 'distanceM')).toEqual(steady)
    expect(measureBy(steady, 'distanceM')).toEqual(steady)
  })

  it('calls a stretch by what it is', () => {
    expect(segmentName({ kind: 'steady', speedMps: 20, grade: 0.065, durationS: 60 })).toBe('Climb 6.5 %')
    expect(segmentName({ kind: 'steady', speedMps: 20, grade: -0.05, durationS: 60 })).toBe('Down 5 %')
    expect(segmentName({ kind: 'steady', speedMps: 9, grade: 0, durationS: 60, surface: 'sand' })).toBe(
      'Flat, sand',
    )
    expect(segmentName({ kind: 'idle', durationS: 60, inGear: true })).toBe('Idle in gear')
  })
})

describe('fluid dates', () => {
  it('turns cycles into days, and says nothing beyond ten years', () => {
    expect(fluidDates({ fewest: 20, most: 60 }, 2)).toEqual({ fromDays: 70, toDays: 210 })
    expect(fluidDates({ fewest: 20, most: 6000 }, 2)).toEqual({ fromDays: 70, toDays: null })
    expect(fluidDates({ fewest: Infinity, most: Infinity }, 2)).toEqual({ fromDays: null, toDays: null })
    expect(formatDay(new Date('2026-12-01T10:00:00Z'), 70)).toBe('Feb 9, 2027')
  })
})

describe('facts nobody has said yet', () => {
  it('stand in round numbers of the person’s unit, and still make a truck', () => {
    for (const id of ARCHETYPE_IDS)
      for (const system of ['us', 'metric'] as const) {
        const facts = roundFacts(createDefaultFacts(id), system)
        expect(EightFactsSchema.safeParse(facts).success).toBe(true)
        expect(fieldText(facts.truckMassKg, 'mass', system)).toMatch(/0$/)
        expect(fieldText(facts.hill.speedMps, 'speed', system)).toMatch(/^\d{2}$/)
        expect(fieldText(facts.hill.lengthM, 'distance', system)).toMatch(/^\d+(\.5)?$/)
      }
  })
})

describe('warnings', () => {
  it('each come with something to do', () => {
    for (const code of listWarningCodes()) expect(WARNING_ADVICE[code].length, code).toBeGreaterThan(20)
    expect(Object.keys(WARNING_ADVICE).sort()).toEqual([...listWarningCodes()].sort())
  })
})

describe('a build at a glance', () => {
  const draft = createSheetFromFacts(createDefaultFacts('midsize-4x4'))
  const setups = draft.setups.map((setup, index) => ({
    ...setup,
    id: String(index),
    buildId: 'b',
    version: 1,
  }))
  const scenario = { ...draft.scenario, id: 's', buildId: 'b', version: 1 }

  it('shows the road with the pan along it and the answer of every set-up', () => {
    const [glance] = describeBuild(draft, setups, [scenario])
    expect(glance?.setups.map(({ name }) => name)).toEqual(['As it is', 'Drive it differently'])
    expect(glance?.setups[0]?.peakSumpC).toBeGreaterThan(90)
    expect(glance?.road[0]).toEqual({ along: 0, height: 0.05 })
    expect(glance?.road.at(-1)?.along).toBe(1)
    expect(glance?.marks('us').every(({ text }) => /°F$/.test(text))).toBe(true)
    expect(glance?.judgement).toBe(glance?.setups[0]?.judgement)
  })

  it('says why there is no answer, and still lists the set-ups', () => {
    const [glance] = describeBuild(draft, setups, [{ ...scenario, load: { trailerMassKg: 290_000 } }])
    expect(glance?.refusal).toMatch(/cannot climb/)
    expect(glance?.judgement).toBeNull()
    expect(glance?.setups).toHaveLength(2)
    expect(describeBuild(draft, setups, [])).toEqual([])
  })
})
