import { describe, expect, it } from 'vitest'
import {
  advise,
  ADVICE_BUDGET,
  adviseInFull,
  type AdviceCode,
  applyRemedy,
  countRuns,
  remediesFor,
} from '../../../shared/advice'
import type { AdviceRequest, Effect, TriedRemedy } from '../../../shared/advice/types'
import { judgeAnswer } from '../../../shared/build-sheet/limits'
import { deriveInputs } from '../../../shared/build-sheet/setups'
import { BuildSheetSchema } from '../../../shared/schemas/sheet'
import { DutySchema, LoadSchema } from '../../../shared/schemas/heat-input'
import { SetupChangeSchema } from '../../../shared/schemas/setup'
import { estimate } from '../../../shared/heat'
import { type Answer, computeAnswer, type Refusal } from '../../../shared/workbench/answer'
import { climbOfInput, gradeHeld } from '../../../shared/workbench/grade-evidence'
import { findHill } from '../../../shared/workbench/hill'
import { MADE_FOR, requestFor } from './requests'

/** The answer with a remedy as the workbench would compute it after somebody said "do it". */
function freshAnswer(request: AdviceRequest, { what }: TriedRemedy): Answer | Refusal {
  const { sheet, scenario, setup } = applyRemedy(request, what)
  return computeAnswer({
    sheet,
    scenario,
    control: request.control,
    limits: request.limits,
    setup: { id: 'tried', name: 'Tried', change: setup?.change ?? {} },
    others: [],
  })
}

const highest = (values: readonly number[]) =>
  values.reduce((most, value) => Math.max(most, value), -Infinity)

function numbersOf(effect: Effect): (number | null)[] {
  const { judgement: _, problem: __, ...changes } = effect
  return Object.values(changes).flatMap(({ before, after }) => [before, after])
}

const cases = Object.entries(MADE_FOR) as [AdviceCode, (typeof MADE_FOR)[AdviceCode]][]

describe.each(cases)('remedies of %s', (code, difference) => {
  const request = requestFor(difference)
  const advice = advise(request).find((one) => one.code === code)
  const tried = advice === undefined ? [] : remediesFor(request, advice)

  it('are there', () => {
    expect(tried.length).toBeGreaterThan(0)
    expect(new Set(tried.map(({ id }) => id)).size).toBe(tried.length)
  })

  it('come to what a fresh answer with them comes to', () => {
    for (const remedy of tried) {
      const fresh = freshAnswer(request, remedy)
      const { effect } = remedy
      if (fresh.kind === 'refusal') {
        expect(effect.problem).toBe(fresh.issues[0]?.message ?? fresh.message)
        expect(effect.sumpC.after).toBeNull()
        continue
      }
      expect(effect.problem).toBeNull()
      expect(effect.sumpC.after).toBe(fresh.judged.peakSumpC)
      expect(effect.coolerInletC.after).toBe(fresh.judged.peakCoolerInletC)
      expect(effect.coolantC.after).toBe(highest(fresh.judged.series.coolantC))
      expect(effect.judgement.after).toBe(judgeAnswer(fresh.judged, request.limits).judgement)
    }
  })

  it('start from the answer as it stands', () => {
    const { answers } = request
    for (const { effect } of tried) {
      expect(effect.sumpC.before).toBe(answers.kind === 'answer' ? answers.judged.peakSumpC : null)
      expect(effect.judgement.before).toBe(answers.kind === 'answer' ? answers.judgement.judgement : null)
    }
  })

  it('hold no number that is none', () => {
    for (const { effect } of tried)
      for (const number of numbersOf(effect)) expect(number === null || Number.isFinite(number)).toBe(true)
  })

  it('can be saved as they are', () => {
    for (const { what } of tried) {
      if (what.kind === 'set-up') SetupChangeSchema.parse(what.change)
      if (what.kind === 'scenario') {
        if (what.load) LoadSchema.parse(what.load)
        if (what.duty) DutySchema.parse(what.duty)
      }
      BuildSheetSchema.parse(applyRemedy(request, what).sheet)
    }
  })

  it('leave the request as it was', () => {
    const before = structuredClone({ ...request })
    for (const { what } of tried) applyRemedy(request, what)
    expect(request).toEqual(before)
  })
})

describe('remedies that mend what they are for', () => {
  const after = (code: AdviceCode, id: string) => {
    const request = requestFor(MADE_FOR[code])
    const advice = advise(request).find((one) => one.code === code)
    const remedy = advice && remediesFor(request, advice).find((one) => one.id === id)
    if (remedy === undefined) throw new Error(`no remedy ${id} of ${code}`)
    return remedy.effect
  }

  it('a wider line passes the flow test', () => {
    const { idleQuartS } = after('cooler_flow_low', 'wider-line')
    expect(idleQuartS?.before).toBeGreaterThan(30)
    expect(idleQuartS?.after).toBeLessThan(20)
  })

  it('a bypass warms a winter pan', () => {
    const { settledSumpC } = after('over_cooled', 'fit-bypass')
    expect(settledSumpC?.after ?? 0).toBeGreaterThan((settledSumpC?.before ?? 0) + 10)
  })

  it('low range climbs what nothing else does', () => {
    const { problem, speedMps } = after('cannot_climb', 'low-range')
    expect(problem).toBeNull()
    expect(speedMps).toEqual({ before: null, after: 3 })
  })

  it('a core of the size that is offered holds the limits', () => {
    const { judgement } = after('cooler_needed', 'add-large')
    expect(judgement.before).toBe('stop')
    expect(['fine', 'watch']).toContain(judgement.after)
  })

  it('cores moved away from the radiator cool the coolant', () => {
    const { coolantC } = after('front_cores_heat_coolant', 'move-front-cores')
    expect(coolantC.after).toBeLessThan((coolantC.before ?? 0) - 2)
  })

  it('what runs cooler does run cooler', () => {
    const request = requestFor(MADE_FOR.unlocked_other_gear_cooler)
    const advice = advise(request).find(({ code }) => code === 'unlocked_other_gear_cooler')
    for (const { effect } of advice ? remediesFor(request, advice) : [])
      expect(effect.sumpC.after).toBeLessThan(effect.sumpC.before ?? 0)
  })
})

describe('the grade that is held', () => {
  it('is worked out when asked for, before and after', () => {
    const request = requestFor()
    const advice = advise(request).find(({ code }) => code === 'cooler_needed')
    if (advice === undefined) throw new Error('no advice')
    const [first] = remediesFor(request, advice, { gradeHeld: true })
    if (first === undefined || request.answers.kind === 'refusal') throw new Error('no remedy')
    const { input } = request.answers
    const held = (of: typeof input) =>
      gradeHeld(of, findHill(of.duty), climbOfInput(of), request.limits).grade
    const changed = deriveInputs({ ...applyRemedy(request, first.what), control: request.control }).judged
    expect(first.effect.gradeHeld).toEqual({ before: held(input), after: held(changed) })
    expect(first.effect.gradeHeld?.after ?? 0).toBeGreaterThan(first.effect.gradeHeld?.before ?? 0)
    expect(remediesFor(request, advice)[0]?.effect.gradeHeld).toBeUndefined()
  })
})

describe('a full advice', () => {
  it.each(cases)('%s stays within its budget of runs', (_, difference) => {
    const request = requestFor(difference)
    const all = adviseInFull(request)
    expect(countRuns(request)).toBeLessThanOrEqual(ADVICE_BUDGET)
    expect(all.map(({ code }) => code)).toEqual(advise(request).map(({ code }) => code))
  })

  it('leaves what a small budget does not reach for later', () => {
    const request = requestFor(MADE_FOR.speed_not_held)
    const all = adviseInFull(request, 0)
    const runs = countRuns(request)
    const open = all.flatMap(({ remedies }) => remedies).filter(({ effect }) => effect === null)
    expect(open.length).toBeGreaterThan(0)
    for (const advice of all)
      for (const { effect } of remediesFor(request, advice)) expect(effect).toBeDefined()
    expect(countRuns(request)).toBeGreaterThan(runs)
  })

  it('takes the locked answer as it came, without a run', () => {
    const request = requestFor(MADE_FOR.lockup_unproven)
    const advice = advise(request).find(({ code }) => code === 'lockup_unproven')
    const runs = countRuns(request)
    const [lock] = advice ? remediesFor(request, advice) : []
    expect(countRuns(request)).toBe(runs)
    const locked = deriveInputs({ ...request, setup: { change: { lockup: 'always' } } }).judged
    expect(lock?.effect.sumpC.after).toBe(estimate(locked).peakSumpC)
  })
})
