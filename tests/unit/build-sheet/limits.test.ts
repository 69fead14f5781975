import { describe, expect, it } from 'vitest'
import {
  createDefaultLimits,
  judge,
  judgeAnswer,
  JUDGEMENT_WORDS,
  ladderOfPlace,
  targetsOfLimits,
  worseJudgement,
} from '../../../shared/build-sheet/limits'
import { LimitsSchema } from '../../../shared/schemas/limits'

/** °F to °C, written out here so that the test does not lean on the code it tests. */
const f = (fahrenheit: number) => ((fahrenheit - 32) * 5) / 9

describe('the ladder', () => {
  const limits = createDefaultLimits()

  it('is one the program stores', () => {
    expect(LimitsSchema.safeParse(limits).success).toBe(true)
  })

  // Default limits: common practice; a trade article and two service manuals.
  it.each([
    ['sump', 199, 'fine'],
    ['sump', 200.1, 'watch'],
    ['sump', 219, 'watch'],
    ['sump', 220.1, 'ease-off'],
    ['sump', 239, 'ease-off'],
    ['sump', 240.1, 'stop'],
    ['hotLine', 229, 'fine'],
    ['hotLine', 231, 'watch'],
    ['hotLine', 250.1, 'ease-off'],
    ['hotLine', 299, 'ease-off'],
    ['hotLine', 300.1, 'stop'],
    ['return', 199, 'fine'],
    ['return', 241, 'stop'],
  ] as const)('calls %s at %d °F %s', (place, tempF, judgement) => {
    expect(judge(f(tempF), place, limits)).toBe(judgement)
  })

  it('begins each rung at its temperature', () => {
    expect(judge(limits.ladder.watchC, 'sump', limits)).toBe('watch')
    expect(judge(limits.ladder.stopC, 'sump', limits)).toBe('stop')
  })

  it('belongs to the place of the gauge', () => {
    const moved = {
      ...limits,
      gaugePlace: 'hotLine' as const,
      ladder: { watchC: 110, easeOffC: 118, stopC: 130 },
    }
    expect(ladderOfPlace('hotLine', moved)).toEqual(moved.ladder)
    expect(judge(119, 'hotLine', moved)).toBe('ease-off')
    // The pan falls back on its own sustained and brief limits.
    expect(judge(f(221), 'sump', moved)).toBe('ease-off')
    expect(judge(f(201), 'sump', moved)).toBe('watch')
    expect(judge(f(199), 'sump', moved)).toBe('fine')
  })

  it('takes the worse of several', () => {
    expect(worseJudgement('fine', 'stop', 'watch')).toBe('stop')
    expect(worseJudgement('watch', 'ease-off')).toBe('ease-off')
    expect(worseJudgement()).toBe('fine')
    expect(JUDGEMENT_WORDS['ease-off']).toBe('ease off')
  })
})

describe('an answer', () => {
  const limits = createDefaultLimits()

  it('is judged by the place that is worse off', () => {
    const byHotLine = judgeAnswer({ peakSumpC: f(190), peakCoolerInletC: f(305) }, limits)
    expect(byHotLine).toMatchObject({ judgement: 'stop', decidedBy: 'hotLine' })
    expect(byHotLine.sump.judgement).toBe('fine')
    const byPan = judgeAnswer({ peakSumpC: f(230), peakCoolerInletC: f(240) }, limits)
    expect(byPan).toMatchObject({ judgement: 'ease-off', decidedBy: 'sump' })
  })

  it('says how far it is from where ease off begins', () => {
    const { sump, hotLine } = judgeAnswer({ peakSumpC: f(202), peakCoolerInletC: f(268) }, limits)
    expect(sump.marginK).toBeCloseTo(18 / 1.8, 9)
    expect(hotLine.marginK).toBeCloseTo(-18 / 1.8, 9)
  })

  it('at one rung is decided by the smaller margin', () => {
    expect(judgeAnswer({ peakSumpC: f(205), peakCoolerInletC: f(248) }, limits).decidedBy).toBe('hotLine')
    expect(judgeAnswer({ peakSumpC: f(219), peakCoolerInletC: f(232) }, limits).decidedBy).toBe('sump')
  })

  it('is sized for the temperatures at which ease off begins', () => {
    const targets = targetsOfLimits(limits)
    expect(targets.sumpC).toBeCloseTo(f(220), 9)
    expect(targets.coolerInletC).toBeCloseTo(f(250), 9)
  })
})
