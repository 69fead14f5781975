import { describe, expect, it } from 'vitest'
import { DEMO_DUTIES, DEMO_DUTY_KEYS, getDemoDuty } from '../../../shared/build-sheet/demo-duties'
import { DutySchema } from '../../../shared/schemas/heat-input'

describe('the drive cycles of the demo', () => {
  it('are at least eight, each the model takes, each its own', () => {
    expect(DEMO_DUTIES.length).toBeGreaterThanOrEqual(8)
    expect(DEMO_DUTIES.map(({ key }) => key)).toEqual([...DEMO_DUTY_KEYS])
    for (const { duty, name } of DEMO_DUTIES)
      expect(DutySchema.safeParse(duty).error?.issues, name).toBeUndefined()
    expect(new Set(DEMO_DUTIES.map(({ name }) => name)).size).toBe(DEMO_DUTIES.length)
  })

  it('have a rating grade of about 11 miles of 3 to 7 % at 40 mph, 100 °F and air conditioning', () => {
    // Common practice for tow ratings: about 11 mi, 3-7 %, 40 mph, 100 °F and more, A/C at its most.
    const { duty } = getDemoDuty('rating-grade')
    const climbs = duty.segments.flatMap((segment) =>
      segment.kind === 'steady' && segment.grade > 0 ? [segment] : [],
    )
    const miles = climbs.reduce((sum, { distanceM }) => sum + (distanceM ?? 0), 0) / 1609.344
    expect(miles).toBeGreaterThan(10.5)
    expect(miles).toBeLessThan(11.5)
    for (const { grade, speedMps } of climbs) {
      expect(grade).toBeGreaterThanOrEqual(0.03)
      expect(grade).toBeLessThanOrEqual(0.07)
      expect(speedMps / 0.44704).toBeCloseTo(40, 1)
    }
    expect(duty.ambientC).toBeGreaterThan((100 - 32) / 1.8)
    expect(duty.airConditioning).toBe(true)
  })

  it('hold one for each kind of work that burns fluid, and one cold', () => {
    const kinds = DEMO_DUTIES.flatMap(({ duty }) => duty.segments.map((segment) => segment.kind))
    expect(new Set(kinds)).toEqual(new Set(['steady', 'stopGo', 'stall', 'idle']))
    const roads = DEMO_DUTIES.flatMap(({ duty }) => duty.segments)
    expect(roads.some(({ range }) => range === 'low')).toBe(true)
    expect(roads.some(({ surface }) => surface === 'sand')).toBe(true)
    expect(Math.min(...DEMO_DUTIES.map(({ duty }) => duty.ambientC))).toBeLessThan(0)
  })
})
