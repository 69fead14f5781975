import { describe, expect, it } from 'vitest'
import { createDefaultFacts, createSheetFromFacts } from '../../../shared/build-sheet/facts'
import { DEMO_CATALOGUE } from '../../../shared/build-sheet/demo-catalogue'
import { targetsOfLimits } from '../../../shared/build-sheet/limits'
import type { GradePoint } from '../../../shared/charts/grade-chart'
import type { Control } from '../../../shared/schemas/control'
import type { Duty } from '../../../shared/schemas/heat-input'
import { computeAnswer, type Answer } from '../../../shared/workbench/answer'
import { driveCycleData, gradeChartData, heatBudgetData } from '../../../shared/workbench/chart-data'
import { computeQuickDepth, DEPTH_STAGES, type Depth } from '../../../shared/workbench/depth'
import { computeGradeEvidence } from '../../../shared/workbench/grade-evidence'
import { findHill } from '../../../shared/workbench/hill'
import type { DepthRequest } from '../../../shared/workbench/request'
import { runEvidence, type EvidenceNews } from '../../../shared/workbench/run-evidence'

function requestFor(
  lockupSeen: Control['lockupSeen'] = 'unknown',
  change: Partial<DepthRequest> = {},
): DepthRequest {
  const draft = createSheetFromFacts(createDefaultFacts('midsize-4x4'))
  const [asItIs, differently] = draft.setups
  return {
    sheet: draft.sheet,
    control: { ...draft.control, lockupSeen },
    limits: draft.limits,
    scenario: draft.scenario,
    setup: { id: 'a', name: asItIs?.name ?? '', change: {} },
    others: [{ id: 'b', name: differently?.name ?? '', change: differently?.change ?? {} }],
    coolers: [...DEMO_CATALOGUE],
    ...change,
  }
}
function answerFor(request: DepthRequest): Answer {
  const answer = computeAnswer(request)
  if (answer.kind === 'refusal') throw new Error(answer.message)
  return answer
}
const depthOf = (request: DepthRequest): Partial<Depth> => {
  const answer = answerFor(request)
  const grades = computeGradeEvidence(request, answer)
  return Object.assign({}, ...DEPTH_STAGES.map((stage) => stage(request, answer, grades))) as Partial<Depth>
}

describe('the answer', () => {
  it('is judged unlocked, with the locked beside it, until lock-up was seen on the road', () => {
    for (const seen of ['unknown', 'no'] as const) {
      const answer = answerFor(requestFor(seen))
      expect(answer.judgedBy).toBe('unlocked')
      expect(answer.judged.segments.some(({ locked }) => locked)).toBe(false)
      expect(answer.ifLocked?.segments.some(({ locked }) => locked)).toBe(true)
    }
    const proven = answerFor(requestFor('yes'))
    expect(proven.judgedBy).toBe('locked')
    expect(proven.ifLocked).toBeNull()
    expect(proven.judged.segments.some(({ locked }) => locked)).toBe(true)
  })

  it('says what the model says where there is none, and at which field', () => {
    const request = requestFor()
    const answer = computeAnswer({
      ...request,
      scenario: { ...request.scenario, load: { trailerMassKg: 290_000 } },
    })
    expect(answer).toMatchObject({
      kind: 'refusal',
      code: 'cannot_climb_grade',
      message: 'cannot climb this grade',
    })
    const values = request.sheet.values.map((value) =>
      value.path === 'engine.idleRpm' ? { ...value, value: 4000 } : value,
    )
    const bad = computeAnswer({ ...request, sheet: { ...request.sheet, values } })
    expect(bad.kind === 'refusal' && bad.issues.map(({ path }) => path)).toContain('engine.peakTorqueRpm')
  })
})

describe('the hill', () => {
  const duty = (segments: Duty['segments']): Duty => ({ ambientC: 30, altitudeM: 0, segments })

  it('is the steepest steady stretch, the longest of equals', () => {
    const hill = findHill(
      duty([
        { kind: 'steady', speedMps: 25, grade: 0, durationS: 600 },
        { kind: 'steady', speedMps: 20, grade: 0.06, distanceM: 2000 },
        { kind: 'steady', speedMps: 18, grade: 0.06, durationS: 500, topGear: 3, surface: 'gravel' },
        { kind: 'stopGo', speedMps: 12, grade: 0.1, stopsPerKm: 2, durationS: 300 },
      ]),
    )
    expect(hill).toEqual({
      index: 2,
      speedMps: 18,
      grade: 0.06,
      distanceM: 9000,
      road: { topGear: 3, surface: 'gravel' },
    })
  })

  it('lends its speed only, where everything is flat, and a usual one where nothing is steady', () => {
    const flat = findHill(duty([{ kind: 'steady', speedMps: 25, grade: 0, durationS: 600 }]))
    expect(flat).toMatchObject({ index: 0, speedMps: 25, grade: undefined, distanceM: undefined })
    const idle = findHill(duty([{ kind: 'idle', durationS: 600 }]))
    expect(idle).toMatchObject({ index: undefined, speedMps: 20.1168 })
  })
})

describe('temperature versus grade', () => {
  const request = requestFor()
  const grades = computeGradeEvidence(request, answerFor(request))
  const curve = (kind: string) => grades.series.find((series) => series.kind === kind)?.points ?? []

  it('draws the judged truck, the same if it locked, and the same on a climb that never ends', () => {
    expect(grades.series.map(({ kind }) => kind)).toEqual(['present', 'other-lock', 'endless'])
    expect(
      computeGradeEvidence(requestFor('yes'), answerFor(requestFor('yes'))).series.map(({ kind }) => kind),
    ).toEqual(['present', 'endless'])
  })

  it('agrees with the answer at the grade of the hill, from the same foot of the hill', () => {
    const at = (grade: number): GradePoint | undefined =>
      curve('present').find((point) => Math.abs(point.grade - grade) < 1e-9)
    const answer = answerFor(request)
    // The drive cycle's hill at 6 %: its end is the top of the climb.
    expect(at(0.06)?.sumpC).toBeCloseTo(answer.judged.segments[1]?.end.sumpC ?? Number.NaN, 1)
    expect(at(0.06)?.coolerInletC).toBeCloseTo(answer.judged.segments[1]?.end.coolerInletC ?? Number.NaN, 1)
  })

  it('finds the end of lock-up to a hundredth of a percent of grade', () => {
    const points = curve('other-lock')
    const jumps = points.flatMap((point, index) => {
      const before = points[index - 1]
      return before && before.locked !== point.locked ? [point.grade - before.grade] : []
    })
    expect(jumps.length).toBeGreaterThan(0)
    for (const gap of jumps) expect(gap).toBeLessThan(1e-4)
  })

  it('ends the grade that is held where the curve crosses the limit that ends it', () => {
    const { grade, endedBy } = grades.held
    expect(endedBy).toBe('sumpC')
    const targets = targetsOfLimits(request.limits)
    const points = curve('present')
    const right = points.find((point) => point.grade >= (grade ?? 0))
    const left = points[points.indexOf(right as GradePoint) - 1]
    expect(left?.sumpC).toBeLessThanOrEqual(targets.sumpC + 0.1)
    expect(right?.sumpC).toBeGreaterThanOrEqual(targets.sumpC - 0.1)
  })
})

describe('the deeper look', () => {
  const request = requestFor()
  const depth = depthOf(request)
  const answer = answerFor(request)

  it('puts a band around both peaks and around the grade that is held', () => {
    expect(depth.bands?.sumpC.low).toBeLessThan(answer.judged.peakSumpC)
    expect(depth.bands?.sumpC.high).toBeGreaterThan(answer.judged.peakSumpC)
    const held = computeGradeEvidence(request, answer).held.grade ?? 0
    expect(depth.heldBand?.low).toBeLessThan(held)
    expect(depth.heldBand?.high).toBeGreaterThan(held)
    expect(depth.gradeBand?.length).toBeGreaterThan(4)
    for (const { sumpC, coolerInletC } of depth.gradeBand ?? []) {
      expect(sumpC.high).toBeGreaterThan(sumpC.low)
      expect(coolerInletC.high).toBeGreaterThan(coolerInletC.low)
    }
  })

  it('narrows the band when the weight was on a scale', () => {
    const values = request.sheet.values.map((value) =>
      value.path === 'vehicle.massKg'
        ? { ...value, origin: 'measured' as const, relativeSpread: 0.005 }
        : value,
    )
    const measured = depthOf({ ...request, sheet: { ...request.sheet, values } })
    const width = (of: Partial<Depth>) => (of.bands?.sumpC.high ?? 0) - (of.bands?.sumpC.low ?? 0)
    expect(width(measured)).toBeLessThan(width(depth))
  })

  it('offers what needs no part, with the temperature of each', () => {
    expect(depth.alternatives?.map(({ id }) => id)).toEqual(['lock', 'drop-a-gear', 'slow-down', 'all'])
    const lock = depth.alternatives?.find(({ id }) => id === 'lock')
    expect(lock?.peakSumpC).toBeCloseTo(answer.ifLocked?.peakSumpC ?? Number.NaN, 9)
    expect(depthOf(requestFor('yes')).alternatives?.some(({ id }) => id === 'lock')).toBe(false)
  })

  it('sizes at every construction and place, and ranks the whole catalogue', () => {
    expect(depth.sizing).toHaveLength(9)
    expect(depth.parts).toHaveLength(24)
    const reach = depth.parts?.map(({ reaches }) => reaches) ?? []
    expect(reach.indexOf(false) === -1 || reach.lastIndexOf(true) < reach.indexOf(false)).toBe(true)
    for (const part of depth.parts ?? []) {
      if (part.marginK === null) continue
      const targets = targetsOfLimits(request.limits)
      const margin = Math.min(
        targets.sumpC - (part.peakSumpC ?? 0),
        targets.coolerInletC - (part.peakCoolerInletC ?? 0),
      )
      expect(part.marginK).toBeCloseTo(margin, 1)
      expect(part.reaches).toBe(margin >= 0)
    }
  })

  it('says that no cooler is needed where none is, and that none would do where none does', () => {
    const flat = requestFor('yes')
    const easy = depthOf({
      ...flat,
      scenario: { ...flat.scenario, load: {}, duty: { ...flat.scenario.duty, ambientC: 10 } },
    })
    expect(easy.sizing?.every(({ faceAreaM2 }) => faceAreaM2 === 0)).toBe(true)
    // Limits under the temperature of the outside air: no cooler in air reaches them.
    const cold = { sustainedC: 30, briefC: 35 }
    const hopeless = depthOf({
      ...request,
      limits: { ...request.limits, sump: cold, ladder: { watchC: 25, easeOffC: 30, stopC: 35 } },
    })
    expect(
      hopeless.sizing?.every(({ problem }) => /the largest single core .* still misses/.test(problem ?? '')),
    ).toBe(true)
    expect(hopeless.parts?.some(({ reaches }) => reaches)).toBe(false)
  })

  it('counts fluid life by three wordings: the quicker it halves, the shorter', () => {
    const hours = depth.fluid?.byHalving.map((one) => one.hours) ?? []
    expect(hours).toHaveLength(3)
    expect([...hours].sort((a, b) => a - b)).toEqual(hours)
    expect(depth.fluid?.byHalving[0]?.halvingK).toBe(10)
  })

  it('sends with the page only what is quick', () => {
    const quick = computeQuickDepth(request, answer, computeGradeEvidence(request, answer))
    expect(Object.keys(quick).sort()).toEqual(['alternatives', 'bands', 'fluid', 'otherCurves', 'setups'])
    expect(quick.bands).toEqual(depth.bands)
    expect(JSON.stringify(quick).length).toBeLessThan(6000)
  })

  it('hands the charts what they draw: every stretch, every watt, the band and the other set-ups', () => {
    const cycle = driveCycleData(answer.judged, answer.input.duty, request.limits)
    expect(cycle.segments.map(({ name }) => name)).toEqual(['Flat', 'Climb 6 %', 'Flat'])
    const budget = heatBudgetData(answer.judged, answer.input.duty, answer.input.build.cooling.coolers, 1)
    const end = answer.judged.segments[1]?.end
    const sources = Object.values(budget?.sources ?? {}).reduce((sum, heatW) => sum + heatW, 0)
    expect(Math.abs(sources - (end?.heatGeneratedW ?? 0))).toBeLessThan(
      0.005 * (end?.heatGeneratedW ?? 0) + 5,
    )
    expect(heatBudgetData(answer.judged, answer.input.duty, [], 9)).toBeNull()
    const chart = gradeChartData(computeGradeEvidence(request, answer), depth.otherCurves, depth.gradeBand)
    expect(chart.series.map(({ kind }) => kind)).toEqual(['present', 'other-lock', 'endless', 'set-up'])
    expect(chart.series[0]?.band).toEqual(depth.gradeBand)
  })
})

describe('working an order out', () => {
  const order = { order: 3, request: requestFor(), brief: false }

  it('brings the grade curve first, then stage by stage the rest, and says when it is done', async () => {
    const news: EvidenceNews[] = []
    let breaths = 0
    await runEvidence(order, {
      emit: (one) => news.push(one),
      breathe: () => Promise.resolve(void (breaths += 1)),
      isStale: () => false,
    })
    expect(news[0]?.grades).toBeDefined()
    expect(news.at(-1)).toEqual({ order: 3, done: true })
    expect(news.flatMap(({ depth }) => Object.keys(depth ?? {}))).toEqual([
      'bands',
      'otherCurves',
      'setups',
      'alternatives',
      'fluid',
      'sizing',
      'gradeBand',
      'heldBand',
      'parts',
    ])
    expect(breaths).toBe(DEPTH_STAGES.length)
  })

  it('gives up between two stages as soon as a later order has come', async () => {
    const news: EvidenceNews[] = []
    await runEvidence(order, {
      emit: (one) => news.push(one),
      breathe: () => Promise.resolve(),
      isStale: () => news.length >= 2,
    })
    expect(news).toHaveLength(2)
    expect(news.some(({ done }) => done)).toBe(false)
  })

  it('stops at the band when only a first look is asked for, and at once when the model refuses', async () => {
    const host = (news: EvidenceNews[]) => ({
      emit: (one: EvidenceNews) => void news.push(one),
      breathe: () => Promise.resolve(),
      isStale: () => false,
    })
    const few: EvidenceNews[] = []
    await runEvidence({ ...order, brief: true }, host(few))
    expect(few.map((one) => Object.keys(one).sort())).toEqual([
      ['grades', 'order'],
      ['depth', 'order'],
      ['done', 'order'],
    ])
    expect(Object.keys(few[1]?.depth ?? {})).toEqual(['bands'])
    const none: EvidenceNews[] = []
    const scenario = { ...order.request.scenario, load: { trailerMassKg: 290_000 } }
    await runEvidence({ ...order, request: { ...order.request, scenario } }, host(none))
    expect(none).toEqual([{ order: 3, done: true }])
  })
})
