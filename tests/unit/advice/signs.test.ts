import { describe, expect, it } from 'vitest'
import { ARCHETYPES } from '../../../shared/build-sheet/archetypes'
import { DEMO_CATALOGUE } from '../../../shared/build-sheet/demo-catalogue'
import { targetsOfLimits } from '../../../shared/build-sheet/limits'
import { listWarningCodes } from '../../../shared/heat'
import {
  advise,
  adviseAtOnce,
  ADVICE_MEANINGS,
  ADVICE_ORDER,
  type AdviceCode,
  countRuns,
  placeWords,
  remediesFor,
} from '../../../shared/advice'
import type { Advice, AdviceRequest } from '../../../shared/advice/types'
import type { Segment } from '../../../shared/schemas/heat-input'
import { answerOf } from './answers'
import { type Difference, MADE_FOR, requestFor } from './requests'

const codes = (found: readonly Advice[]) => found.map(({ code }) => code)
const find = (request: AdviceRequest, code: AdviceCode) => advise(request).find((one) => one.code === code)
const cases = Object.entries(MADE_FOR) as [AdviceCode, (typeof MADE_FOR)[AdviceCode]][]

describe('the list of codes', () => {
  it('holds every warning of the model by its own name', () => {
    for (const code of listWarningCodes()) expect(ADVICE_MEANINGS).toHaveProperty(code)
  })

  it('orders every code once', () => {
    expect([...ADVICE_ORDER].sort()).toEqual(Object.keys(ADVICE_MEANINGS).sort())
    expect(new Set(ADVICE_ORDER).size).toBe(ADVICE_ORDER.length)
  })
})

describe('every code', () => {
  it.each(cases)('%s appears for an input made for it', (code, difference) => {
    const found = find(requestFor(difference), code)
    expect(found).toBeDefined()
    expect(found?.action).not.toEqual([])
    expect(found?.text).not.toEqual([])
  })

  it.each(cases)('%s comes once, most urgent first, with finite numbers', (_, difference) => {
    const request = requestFor(difference)
    const found = advise(request)
    const ids = found.map(({ code, at }) => `${code} ${at ?? ''}`)
    expect(new Set(ids).size).toBe(ids.length)
    const urgency = found.map(({ severity }) => ['stop', 'ease-off', 'watch', 'note'].indexOf(severity))
    expect(urgency).toEqual([...urgency].sort((a, b) => a - b))
    for (const { value, limit, at } of found) {
      for (const number of [value, limit]) if (number) expect(Number.isFinite(number.si)).toBe(true)
      if (at !== undefined) expect(placeWords(at, request)).not.toMatch(/^$|^cooling\.|^duty\./)
    }
  })
})

/**
 * What the three archetypes get as the form starts them: towing 1,800 kg up 6 % at 38 °C, nobody having seen the converter
 * lock. Each of these is true of that truck, and nothing else is said.
 */
const BY_DEFAULT: Record<(typeof ARCHETYPES)[number]['id'], Partial<Record<AdviceCode, string>>> = {
  'classic-4x4': {
    cooler_needed: 'the radiator tank alone leaves the pan over its limit, and a front core holds it',
    lockup_unproven: 'it peaks 3 K lower where it may lock',
    unlocked_other_gear_cooler: 'it climbs unlocked, and 5 mph less is 4 K cooler',
  },
  'diesel-pickup': { no_cooler_needed: 'both places stay fine, unlocked as well' },
  'midsize-4x4': {
    cooler_needed: 'unlocked, its small front core leaves the pan just over its limit',
    lockup_unproven: 'locked, it stays under it',
    unlocked_other_gear_cooler: 'it climbs unlocked, and 5 mph less is 3 K cooler',
  },
}

describe.each(ARCHETYPES)('$id as the form starts it', ({ id }) => {
  const request = requestFor({ archetype: id })

  it('gets the advice that is true of it and no other', () => {
    expect(codes(advise(request)).sort()).toEqual(Object.keys(BY_DEFAULT[id]).sort())
  })

  it('locked and light on the flat, it is told that no cooler is needed', () => {
    const easy = requestFor({
      archetype: id,
      load: {},
      control: { lockupSeen: 'yes' },
      duty: { ambientC: 30 },
      segments: [{ kind: 'steady', speedMps: 27, grade: 0, durationS: 3600 }],
    })
    expect(codes(advise(easy)).filter((code) => code !== 'over_cooled')).toEqual(['no_cooler_needed'])
  })
})

describe('advice about limits', () => {
  it('goes by the limits of the shop, not by the usual ones', () => {
    const stricter = requestFor({
      archetype: 'diesel-pickup',
      limits: (usual) => ({ ...usual, hotLine: { sustainedC: 95, briefC: 120 } }),
    })
    const found = find(stricter, 'hot_line_over_limit_pan_fine')
    expect(found?.limit?.si).toBe(95)
    expect(answerOf(stricter).judged.warnings).toEqual([])
    const laxer = requestFor({
      archetype: 'diesel-pickup',
      demo: 'soft-sand',
      limits: (usual) => ({ ...usual, hotLine: { sustainedC: 160, briefC: 180 } }),
    })
    expect(answerOf(laxer).judged.warnings.map(({ code }) => code)).toContain('hot_line_over_limit_pan_fine')
    expect(find(laxer, 'hot_line_over_limit_pan_fine')).toBeUndefined()
  })

  it('says either that a cooler is needed, that none is, or that none helps', () => {
    for (const [, difference] of cases) {
      const request = requestFor(difference)
      if (request.answers.kind === 'refusal') continue
      const { judged } = request.answers
      const targets = targetsOfLimits(request.limits)
      const holds = judged.peakSumpC <= targets.sumpC && judged.peakCoolerInletC <= targets.coolerInletC
      const said = codes(advise(request))
      const about = said.filter((code) => /^(no_)?cooler_(needed|fixes)|^no_cooler/.test(code))
      const isVoid = said.includes('coolant_over_limit')
      expect(about).toHaveLength(holds && isVoid ? 0 : 1)
      expect(about.includes('no_cooler_needed')).toBe(holds && !isVoid)
    }
  })

  it('never calls good news what rests on boiling coolant', () => {
    const request = requestFor({ ...MADE_FOR.front_cores_heat_coolant })
    expect(codes(advise(request))).toContain('coolant_over_limit')
    expect(codes(advise(request))).not.toContain('no_cooler_needed')
  })
})

describe('advice about the oil flow', () => {
  it.each([
    [0.0079, 'passes'],
    [0.005, 'watch'],
    [0.0045, 'ease-off'],
  ] as const)('a bore of %d m: %s', (boreM, severity) => {
    const found = find(
      requestFor({ values: [{ path: 'cooling.lines.innerDiameterM', value: boreM }] }),
      'cooler_flow_low',
    )
    expect(found?.severity ?? 'passes').toBe(severity)
  })
})

describe('advice about ratings', () => {
  it('sees that a condition is missing, and gives no answer until it is there', () => {
    const request = requestFor({
      archetype: 'diesel-pickup',
      without: ['cooling.coolers.1.rating.airVelocityMps'],
    })
    expect(request.answers.kind).toBe('refusal')
    const found = find(request, 'rating_lacks_conditions')
    expect(found?.severity).toBe('stop')
    expect(found?.at).toBe('cooling.coolers.1')
    expect(found?.text.join('')).toContain('air speed')
    const [usual] = found ? remediesFor(request, found) : []
    expect(usual?.effect.problem).toBeNull()
    // As it left the works: the rating was at the reference point.
    expect(usual?.effect.sumpC.after).toBe(
      answerOf(requestFor({ archetype: 'diesel-pickup' })).judged.peakSumpC,
    )
  })

  it('names just the condition that nobody gave', () => {
    const origin = 'maker' as const
    const request = requestFor({
      archetype: 'diesel-pickup',
      values: [
        { path: 'cooling.coolers.1.rating.heatW', value: 5200, origin },
        { path: 'cooling.coolers.1.rating.inletDifferenceK', value: 55.56, origin },
        { path: 'cooling.coolers.1.rating.oilFlowM3S', value: 1.26e-4, origin },
      ],
    })
    const text = find(request, 'rating_lacks_conditions')?.text.join('')
    expect(text).toContain('nobody gave the air speed of')
  })

  it('is content with a rating whose conditions were given', () => {
    const origin = 'maker' as const
    const request = requestFor({
      archetype: 'diesel-pickup',
      values: [
        { path: 'cooling.coolers.1.rating.heatW', value: 5200, origin },
        { path: 'cooling.coolers.1.rating.inletDifferenceK', value: 55.56, origin },
        { path: 'cooling.coolers.1.rating.oilFlowM3S', value: 1.26e-4, origin },
        { path: 'cooling.coolers.1.rating.airVelocityMps', value: 4, origin },
      ],
    })
    expect(codes(advise(request))).toEqual(['no_cooler_needed'])
  })

  it.each([
    ['Max tow 30,000 lb', true],
    ['Cooler, 26000 lbs', true],
    ['Towing class III', true],
    ['Trans cooler 24,000 GVWR', true],
    ['Eleven-plate cooler 12,000 BTU/h', false],
    ['Cooler 4 × 11 in', false],
  ])('tells a weight class by its name: %s', (name, isClass) => {
    const request = requestFor({
      archetype: 'diesel-pickup',
      values: [{ path: 'cooling.coolers.1.name', value: name }],
    })
    expect(codes(advise(request)).includes('weight_class_rating')).toBe(isClass)
  })

  it('finds no weight class in the demo catalogue', () => {
    for (const { name } of DEMO_CATALOGUE) {
      const request = requestFor({
        archetype: 'diesel-pickup',
        values: [{ path: 'cooling.coolers.1.name', value: name }],
      })
      expect(codes(adviseAtOnce(request))).not.toContain('weight_class_rating')
    }
  })

  it('says of an impossible radiator what its air could carry', () => {
    const request = requestFor({ values: [{ path: 'cooling.radiator.rating.heatW', value: 900_000 }] })
    const found = find(request, 'rating_impossible')
    expect(found?.at).toBe('cooling.radiator')
    expect(found?.limit?.si).toBeLessThan(900_000)
    expect(found?.limit?.si).toBeGreaterThan(0)
  })

  it('leaves the ratings of a set-up with coolers of its own alone', () => {
    const stock = MADE_FOR.weight_class_rating
    expect(codes(advise(requestFor({ ...stock, change: { coolers: [] } })))).not.toContain(
      'weight_class_rating',
    )
  })
})

describe('advice about the shift style', () => {
  const economy = (speedMps: number, grade: number, trailerMassKg: number): Difference => ({
    values: [{ path: 'transmission.shiftStyle', value: 'economy' }],
    load: { trailerMassKg, trailerDragAreaM2: 2 },
    control: { lockupSeen: 'yes' },
    duty: { ambientC: 10 },
    segments: [{ kind: 'steady', speedMps, grade, distanceM: 4000 }],
  })

  it('is a note where all is fine, with the heat of both', () => {
    const request = requestFor(economy(15, 0.02, 0))
    const found = find(request, 'unlocked_other_gear_cooler')
    expect(answerOf(request).judgement.judgement).toBe('fine')
    expect(found?.severity).toBe('note')
    expect(found?.value?.quantity).toBe('heatRate')
    expect(found?.remedies.map(({ id }) => id)).toEqual(['tow'])
  })

  it('is a comparison of temperatures where it is not', () => {
    const request = requestFor(economy(20, 0.06, 1500))
    const found = find(request, 'unlocked_other_gear_cooler')
    expect(found?.severity).toBe('watch')
    expect(found?.value?.quantity).toBe('temperature')
    expect(found?.remedies.map(({ id }) => id)).toContain('tow')
  })
})

describe('a drive the truck cannot do', () => {
  it.each([
    ['cannot_pull_away', { kind: 'stopGo', speedMps: 4, stopsPerKm: 8, grade: 0.35, durationS: 300 }],
    ['cannot_hold_cruise', { kind: 'stopGo', speedMps: 33, stopsPerKm: 0.05, grade: 0.02, durationS: 300 }],
  ] as [string, Segment][])('%s says so and what would do', (code, segment) => {
    const request = requestFor({ segments: [segment] })
    expect(request.answers).toMatchObject({ kind: 'refusal', code })
    const found = find(request, 'cannot_climb')
    expect(found?.at).toBe('duty.segments.0')
    expect(found?.remedies.length).toBeGreaterThan(0)
    const [worked] = found ? remediesFor(request, found).filter(({ effect }) => effect.problem === null) : []
    expect(worked?.id).toBe(code === 'cannot_pull_away' ? 'low-range' : 'slow-down')
  })
})

describe('advice about winter', () => {
  it('is a note in summer and more than that in the cold', () => {
    const mild = requestFor({
      archetype: 'diesel-pickup',
      load: {},
      control: { lockupSeen: 'yes' },
      demo: 'long-descent',
    })
    expect(find(mild, 'over_cooled')?.severity).toBe('note')
    expect(find(requestFor(MADE_FOR.over_cooled), 'over_cooled')?.severity).toBe('watch')
  })
})

describe('the cost of advice', () => {
  it.each(cases)('%s: nothing at once, seven runs at most with trials', (_, difference) => {
    const request = requestFor(difference)
    adviseAtOnce(request)
    expect(countRuns(request)).toBe(0)
    advise(request)
    const runs = countRuns(request)
    expect(runs).toBeLessThanOrEqual(7)
    advise(request)
    expect(countRuns(request)).toBe(runs)
  })
})
