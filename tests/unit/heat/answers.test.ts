import { describe, expect, it } from 'vitest'
import { AppError } from '#shared/errors'
import {
  estimate,
  findGradeHeld,
  listWarningCodes,
  replay,
  restateAtReferencePoint,
  sizing,
  sweep,
} from '#shared/heat'
import { conductanceOfRating, exchangerHeat } from '#shared/heat/coolers'
import { makeOil, kinematicViscosity } from '#shared/heat/fluids'
import { gradesFromAltitude } from '#shared/heat/trace'
import type { MakerRating } from '#shared/heat/types'
import type { Trace } from '#shared/schemas/estimate'
import type { HeatInput, Segment } from '#shared/schemas/heat-input'
import { plainTruck } from '../../support/plain-truck'

const climb: Segment = { kind: 'steady', speedMps: 18, grade: 0.05, durationS: 900 }
const start = { sumpC: 75, coolantC: 90, axleC: 60 }
const truck = (segments: Segment[] = [climb]) => plainTruck({ segments, start })

/** The truck with something about it changed. */
function changed(change: (input: HeatInput) => void, segments?: Segment[]): HeatInput {
  const input = truck(segments)
  change(input)
  return input
}

describe('an estimate', () => {
  it('leaves its input as typed', () => {
    const input = truck()
    const kept = structuredClone(input)
    estimate(input)
    expect(input).toEqual(kept)
  })

  it('has a point every ten seconds or less, every second on request, and at each segment end', () => {
    const input = truck([climb, { kind: 'idle', durationS: 33.5 }])
    const { series } = estimate(input)
    expect(series.timeS.slice(0, 3)).toEqual([0, 10, 20])
    expect(series.timeS.slice(-6)).toEqual([890, 900, 910, 920, 930, 933.5])
    expect(estimate(input, { stepS: 1 }).series.timeS).toHaveLength(901 + 34)
    for (const column of Object.values(series)) expect(column).toHaveLength(series.timeS.length)
  })

  it('gives the same return line from a parabola as solved', () => {
    const input = changed((each) => {
      each.build.cooling.bypass = { openC: 85, fullC: 110 }
    })
    const fine = estimate(input, { stepS: 0.5 }).series
    // so short a segment that every point of it is solved
    for (const index of [40, 400, 1000, 1700]) {
      const at = fine.timeS[index] ?? NaN
      const cut = changed(
        (each) => {
          each.build.cooling.bypass = { openC: 85, fullC: 110 }
        },
        [{ ...climb, durationS: at } as Segment],
      )
      const end = estimate(cut).segments[0]?.end.coolerReturnC ?? NaN
      expect(Math.abs((fine.coolerReturnC[index] ?? NaN) - end)).toBeLessThan(0.1)
    }
  })

  it('refuses a drive too long to answer, by name', () => {
    const endless = truck([{ kind: 'steady', speedMps: 1, grade: 0, distanceM: 5e6 }])
    expect(() => estimate(endless)).toThrow(AppError)
    expect(() => estimate(truck([{ kind: 'idle', durationS: 500_000 }]), { stepS: 1 })).toThrow(AppError)
  })

  it('names the segment it cannot drive', () => {
    const input = truck([climb, { kind: 'steady', speedMps: 9, grade: 0.98, durationS: 60 }])
    let error: unknown
    try {
      estimate(input)
    } catch (caught) {
      error = caught
    }
    expect((error as AppError).code).toBe('cannot_climb_grade')
    expect((error as AppError).details.issues?.[0]?.path).toBe('duty.segments.1')
  })

  it('lets a hot converter age the fluid in it', () => {
    const shares = [0, 0.35, 1].map(
      (oilShare) =>
        estimate(
          changed((input) => {
            input.build.converter.oilShare = oilShare
          }),
        ).fluidDamage,
    )
    const sumpOnly = estimate(truck()).fluidDamageSumpOnly
    expect(shares[0]).toBeCloseTo(sumpOnly, 12)
    expect(shares[1]).toBeCloseTo(0.65 * sumpOnly + 0.35 * (shares[2] ?? NaN), 12)
  })
})

describe('a sweep', () => {
  it('says where a grade cannot be climbed and goes on', () => {
    const { points } = sweep({ input: truck(), speedMps: 15, grades: [0.03, 1.4, 0.04] })
    expect(points[1]).toEqual({ grade: 1.4, error: 'cannot climb this grade' })
    expect(points[2]).toMatchObject({ grade: 0.04, speedHeld: true })
  })

  it('does not depend on the order of its grades', () => {
    const grades = [0, 0.02, 0.04, 0.06, 0.08]
    const up = sweep({ input: truck(), speedMps: 18, grades }).points
    const down = sweep({ input: truck(), speedMps: 18, grades: grades.toReversed() }).points.toReversed()
    up.forEach((point, index) => {
      const other = down[index]
      if (!('sumpC' in point) || other === undefined || !('sumpC' in other)) throw new Error('no answer')
      expect(point.sumpC).toBeCloseTo(other.sumpC, 5)
    })
  })

  it('is the equilibrium and the end of the same drive', () => {
    const [segment] = estimate(truck()).segments
    const [rest] = sweep({ input: truck(), speedMps: 18, grades: [0.05] }).points
    const [top] = sweep({
      input: truck(),
      speedMps: 18,
      grades: [0.05],
      climb: { distanceM: 18 * 900, start },
    }).points
    expect(rest).toMatchObject({ gear: segment?.gear, locked: segment?.locked })
    expect((rest as { sumpC: number }).sumpC).toBeCloseTo(segment?.equilibrium?.sumpC ?? NaN, 4)
    expect((top as { coolerInletC: number }).coolerInletC).toBeCloseTo(segment?.end.coolerInletC ?? NaN, 4)
  })
})

describe('the grade held', () => {
  const limits = { sumpC: 95 }

  it('is the steepest that keeps its limit, and every gentler one does', () => {
    const { grade, endedBy } = findGradeHeld({ input: truck(), speedMps: 18, limits })
    expect(endedBy).toBe('sumpC')
    const grades = Array.from({ length: 41 }, (_, index) => ((grade ?? NaN) * index) / 40)
    for (const point of sweep({ input: truck(), speedMps: 18, grades }).points) {
      expect(point).toMatchObject({ speedHeld: true })
      expect((point as { sumpC: number }).sumpC).toBeLessThanOrEqual(95 + 1e-3)
    }
    const [next] = sweep({ input: truck(), speedMps: 18, grades: [(grade ?? NaN) + 1e-5] }).points
    expect((next as { sumpC: number }).sumpC).toBeGreaterThan(95)
  })

  it('ends with the speed where the limits are far away', () => {
    const far = { sumpC: 400, coolerInletC: 900 }
    const { grade, endedBy } = findGradeHeld({ input: truck(), speedMps: 18, limits: far })
    expect(endedBy).toBe('speed')
    const [held, lost] = sweep({
      input: truck(),
      speedMps: 18,
      grades: [(grade ?? NaN) - 1e-7, (grade ?? NaN) + 1e-5],
    }).points
    expect(held).toMatchObject({ speedHeld: true })
    expect(lost).toMatchObject({ speedHeld: false })
  })

  it('says when nothing ends it, and when not even the flat is held', () => {
    const gentle = { input: truck(), speedMps: 12, limits: {}, maxGrade: 0.02 }
    expect(findGradeHeld(gentle)).toEqual({ grade: 0.02, endedBy: 'none' })
    expect(findGradeHeld({ input: truck(), speedMps: 18, limits: { sumpC: 20 } })).toEqual({
      grade: null,
      endedBy: 'sumpC',
    })
    expect(findGradeHeld({ input: truck(), speedMps: 80, limits: {} })).toEqual({
      grade: null,
      endedBy: 'speed',
    })
  })

  it('climbs further where the climb is short', () => {
    const endless = findGradeHeld({ input: truck(), speedMps: 18, limits }).grade ?? NaN
    const short = findGradeHeld({
      input: truck(),
      speedMps: 18,
      limits,
      climb: { distanceM: 2000, start },
    }).grade
    expect(short).toBeGreaterThan(endless)
  })
})

describe('sizing', () => {
  const request = {
    input: truck(),
    construction: 'plate-fin',
    position: 'ahead-of-condenser',
    basis: 'equilibrium',
  } as const

  it('asks for nothing where the targets hold already', () => {
    expect(sizing({ ...request, targets: { sumpC: 250 } })).toEqual({ faceAreaM2: 0, heatW: 0, uaWK: 0 })
  })

  it('names the target that decides', () => {
    const rest = estimate(truck()).segments[0]?.equilibrium
    const [sumpC, coolerInletC] = [rest?.sumpC ?? NaN, rest?.coolerInletC ?? NaN]
    expect(sizing({ ...request, targets: { sumpC: sumpC - 6, coolerInletC } }).decidedBy).toBe('sumpC')
    expect(sizing({ ...request, targets: { sumpC, coolerInletC: coolerInletC - 6 } }).decidedBy).toBe(
      'coolerInletC',
    )
  })

  it('refuses what no single core does, naming the target', () => {
    let error: unknown
    try {
      sizing({ ...request, targets: { sumpC: 20 } })
    } catch (caught) {
      error = caught
    }
    expect((error as AppError).message).toBe('no single cooler of this kind holds the target')
    expect((error as AppError).details.issues?.[0]?.path).toBe('targets.sumpC')
    expect((error as AppError).details.facts).toEqual({ decidedBy: 'sumpC' })
  })
})

describe('a part restated at the reference point', () => {
  /** What a part of known conductance and air share would carry elsewhere, by the laws of stacked plates. */
  function ratingAt(uaWK: number, airShare: number, conditions: Omit<MakerRating, 'heatW'>): MakerRating {
    const oil = makeOil({ class: 'atf-standard' })
    const oilInC = conditions.oilInC ?? 93.3
    const viscosity = kinematicViscosity(oil, oilInC) / kinematicViscosity(oil, 93.3)
    const air = (conditions.airVelocityMps / 4) ** -0.5
    const oilSide = (1.26e-4 / conditions.oilFlowM3S) ** 0.55 * viscosity ** 0.2
    const oilRate = (855 - 0.62 * (oilInC - 15)) * conditions.oilFlowM3S * (1800 + 4 * oilInC)
    const airRate = 1.184 * 0.05 * conditions.airVelocityMps * 1006
    const ua = uaWK / (airShare * air + (1 - airShare) * oilSide)
    return { ...conditions, heatW: exchangerHeat(ua, oilRate, airRate, conditions.inletDifferenceK) }
  }
  const conditions = [
    { inletDifferenceK: 50, oilFlowM3S: 1e-4, airVelocityMps: 3, pressureDropPa: 2e4 },
    { inletDifferenceK: 70, oilFlowM3S: 2e-4, airVelocityMps: 3, pressureDropPa: 6e4 },
    { inletDifferenceK: 60, oilFlowM3S: 1.5e-4, airVelocityMps: 8, pressureDropPa: 4e4, oilInC: 110 },
  ]
  const part = (ratings: MakerRating[]) =>
    ({ construction: 'stacked-plate', faceAreaM2: 0.05, ratings }) as const

  it('gives back the conductance and air share its ratings were made from', () => {
    const restated = restateAtReferencePoint(part(conditions.map((each) => ratingAt(140, 0.62, each))))
    expect(restated.uaWK).toBeCloseTo(140, 3)
    expect(restated.airShare).toBeCloseTo(0.62, 4)
    for (const { misfit, marked } of restated.misfits) {
      expect(misfit).toBeCloseTo(0, 6)
      expect(marked).toBe(false)
    }
  })

  it('marks a rating that does not fit the others', () => {
    const ratings = conditions.map((each) => ratingAt(140, 0.62, each))
    const odd = ratings[1]
    if (odd !== undefined) odd.heatW *= 1.45
    const more = ratingAt(140, 0.62, {
      inletDifferenceK: 40,
      oilFlowM3S: 1.26e-4,
      airVelocityMps: 5,
      pressureDropPa: 3e4,
    })
    const restated = restateAtReferencePoint(part([...ratings, more]))
    expect(restated.misfits[1]?.marked).toBe(true)
    expect(restated.warnings.map(({ code }) => code)).toContain('rating_misfit')
  })

  it('names an impossible rating', () => {
    const impossible = { ...ratingAt(140, 0.6, conditions[0] as Omit<MakerRating, 'heatW'>), heatW: 60_000 }
    expect(() => restateAtReferencePoint(part([impossible]))).toThrow(
      'rating is beyond what its air and oil flow can carry',
    )
  })

  it('says when oil flow is the limit', () => {
    const big = { construction: 'stacked-plate', faceAreaM2: 0.3, ratings: [] as MakerRating[] } as const
    const oilRate = (855 - 0.62 * 78.3) * 1.26e-4 * (1800 + 4 * 93.3)
    const heatW = 0.9 * oilRate * 55.56
    const rating = {
      heatW,
      inletDifferenceK: 55.56,
      oilFlowM3S: 1.26e-4,
      airVelocityMps: 4,
      pressureDropPa: 2e4,
    }
    expect(
      conductanceOfRating({ ...rating, capacityRateA: oilRate, capacityRateB: 1.184 * 0.3 * 4 * 1006 }),
    ).toBeGreaterThan(0)
    const restated = restateAtReferencePoint({ ...big, ratings: [rating] })
    expect(restated.limitedByOilFlow).toBe(true)
    expect(restated.warnings.map(({ code }) => code)).toEqual(['limited_by_oil_flow'])
  })
})

describe('a replayed log', () => {
  const timeS = Array.from({ length: 301 }, (_, index) => index * 2)
  const log = (more: Partial<Trace> = {}): Trace => ({
    timeS,
    speedMps: timeS.map((t) => 18 + 3 * Math.sin(t / 60)),
    grade: timeS.map(() => 0.03),
    ...more,
  })
  const last = (trace: Trace, input = truck()) => {
    const answer = replay({ input, trace })
    return { ...answer, sumpC: answer.sumpC.at(-1) ?? NaN, coolerInletC: answer.coolerInletC.at(-1) ?? NaN }
  }

  it('reads one value for the whole log like the same value at every sample', () => {
    const once = log({ surface: 'gravel', topGear: 3, headwindMps: 4, range: 'high' })
    const each = log({
      surface: timeS.map(() => 'gravel' as const),
      topGear: timeS.map(() => 3),
      headwindMps: timeS.map(() => 4),
      range: timeS.map(() => 'high' as const),
    })
    expect(replay({ input: truck(), trace: each })).toEqual(replay({ input: truck(), trace: once }))
  })

  it('reads a road from its altitude as from its grade', () => {
    const { speedMps } = log()
    const altitudeM: number[] = [200]
    for (let k = 1; k < timeS.length; k++)
      altitudeM.push((altitudeM[k - 1] ?? NaN) + 0.03 * ((speedMps[k] ?? NaN) + (speedMps[k - 1] ?? NaN)))
    const byAltitude: Trace = { timeS, speedMps, altitudeM }
    expect(last(byAltitude).sumpC).toBeCloseTo(last(log()).sumpC, 6)
  })

  it('keeps a logged gear and makes its heat', () => {
    const second = last(log({ gear: timeS.map(() => 2) }))
    const third = last(log({ gear: timeS.map(() => 3) }))
    expect(second.contradictedSamples).toBe(0)
    expect(second.sumpC).not.toBeCloseTo(third.sumpC, 0)
  })

  it('takes slip from a logged engine speed and gear', () => {
    const turbineRpm = (speed: number) => ((speed / 0.39) * 3.7 * 1.62 * 30) / Math.PI
    const { speedMps } = log()
    const gear = timeS.map(() => 2)
    const inSync = log({ gear, engineRpm: speedMps.map(turbineRpm) })
    const slipping = log({ gear, engineRpm: speedMps.map((speed) => turbineRpm(speed) / 0.85) })
    expect(last(slipping).coolerInletC).toBeGreaterThan(last(inSync).coolerInletC + 5)
  })

  it('leaves out and counts an engine that the wheels outrun', () => {
    const lying = log({ gear: timeS.map(() => 1), engineRpm: timeS.map(() => 1500) })
    const answer = last(lying)
    expect(answer.contradictedSamples).toBe(300)
    expect(answer.sumpC).toBe(last(log()).sumpC)
  })

  it('scales down and counts a demand the engine does not have', () => {
    const speedMps = timeS.map((_, index) => (index === 150 ? 30 : 18))
    const answer = last(log({ speedMps }))
    expect(answer.forceLimitedSamples).toBe(1)
    expect(answer.sumpC).toBeGreaterThan(0)
  })

  it('stands still without heat from the road', () => {
    const standing = last(log({ speedMps: timeS.map(() => 0.05) }))
    expect(standing.sumpC).toBeLessThan(75)
  })
})

describe('grade from altitude', () => {
  const timeS = Array.from({ length: 400 }, (_, index) => index)

  it('is the slope of a plane road, however fast it is driven', () => {
    for (const speed of [0.4, 15, 90]) {
      const speeds = timeS.map(() => speed)
      const grades = gradesFromAltitude(
        timeS,
        speeds,
        timeS.map((t) => 5 + 0.07 * speed * t),
      )
      for (const grade of grades) expect(grade).toBeCloseTo(0.07, 9)
    }
  })

  it('takes noise of the receiver out', () => {
    const noisy = timeS.map((t) => 0.05 * 20 * t + (t % 2 === 0 ? 0.4 : -0.4))
    const grades = gradesFromAltitude(
      timeS,
      timeS.map(() => 20),
      noisy,
    )
    for (const grade of grades.slice(5, -5)) expect(Math.abs(grade - 0.05)).toBeLessThan(0.01)
  })

  it('is flat where nothing moves, and keeps its grade through a stop', () => {
    expect(gradesFromAltitude([0, 1, 2], [0, 0, 0], [5, 5.3, 4.9])).toEqual([0, 0, 0])
    const speeds = timeS.map((t) => (t > 150 && t < 250 ? 0 : 10))
    let travel = 0
    const altitudes = timeS.map((_, k) => {
      if (k > 0) travel += 0.5 * ((speeds[k] ?? 0) + (speeds[k - 1] ?? 0))
      return 0.04 * travel
    })
    for (const grade of gradesFromAltitude(timeS, speeds, altitudes)) expect(grade).toBeCloseTo(0.04, 9)
  })
})

describe('warnings', () => {
  const codes = (input: HeatInput) => estimate(input).warnings.map(({ code }) => code)
  const hot = (input: HeatInput) => {
    input.duty.ambientC = 45
  }

  it('are each in the list, with a place where there is one', () => {
    const listed = listWarningCodes()
    expect(new Set(listed).size).toBe(listed.length)
    const all = estimate(
      changed(hot, [{ kind: 'steady', speedMps: 40, grade: 0.3, durationS: 900 }]),
    ).warnings
    expect(all.length).toBeGreaterThan(1)
    for (const { code, message } of all) {
      expect(listed).toContain(code)
      expect(message.length).toBeGreaterThan(20)
    }
    expect(all.find(({ code }) => code === 'speed_not_held')).toMatchObject({
      at: 'duty.segments.0',
      limit: 40,
    })
    expect(all.find(({ code }) => code === 'grade_above_validated_range')).toMatchObject({ value: 0.3 })
  })

  it('say nothing about an easy drive', () => {
    expect(codes(truck([{ kind: 'steady', speedMps: 26, grade: 0.01, durationS: 600 }]))).toEqual([])
  })

  const CASES: [string, HeatInput][] = [
    [
      'coolant_hot',
      changed(
        (input) => {
          hot(input)
          input.build.cooling.radiator.rating.heatW *= 0.85
        },
        [{ ...climb, grade: 0.055 } as Segment],
      ),
    ],
    [
      'coolant_over_limit',
      changed((input) => {
        hot(input)
        input.build.cooling.radiator.rating.heatW *= 0.4
      }),
    ],
    [
      'hot_line_over_limit_pan_fine',
      changed(
        (input) => {
          input.build.converter.lockup = { fitted: false }
          input.duty.ambientC = 5
          input.build.transmission.shiftStyle = 'economy'
        },
        [
          { kind: 'idle', inGear: true, durationS: 600 },
          { kind: 'stall', throttle: 0.7, durationS: 12 },
        ],
      ),
    ],
    [
      'over_cooled',
      changed(
        (input) => {
          input.duty.ambientC = -20
        },
        [{ kind: 'steady', speedMps: 24, grade: 0, durationS: 600 }],
      ),
    ],
    [
      'cooler_flow_low',
      changed((input) => {
        input.build.cooling.lines.innerDiameterM = 0.003
      }),
    ],
    [
      'bypass_hides_cooler',
      changed(
        (input) => {
          input.build.cooling.bypass = { openC: 60, fullC: 160 }
        },
        [{ kind: 'steady', speedMps: 26, grade: 0.02, durationS: 600 }],
      ),
    ],
    [
      'coolant_heats_oil',
      changed(
        (input) => {
          input.duty.start = { sumpC: 40, coolantC: 95, axleC: 40 }
        },
        [{ kind: 'steady', speedMps: 26, grade: 0.01, durationS: 60 }],
      ),
    ],
    ['temperature_beyond_data', changed(() => undefined, [{ kind: 'stall', throttle: 1, durationS: 120 }])],
    [
      'engine_power_exceeds_torque',
      changed((input) => {
        input.build.engine.peakPowerW *= 2
      }),
    ],
    [
      'limited_by_oil_flow',
      changed((input) => {
        const cooler = input.build.cooling.coolers[1]
        if (cooler?.construction === 'plate-fin') {
          cooler.faceAreaM2 = 0.3
          cooler.rating.heatW = 10_800
        }
      }),
    ],
    [
      'unlocked_other_gear_cooler',
      changed(
        (input) => {
          input.build.transmission.shiftStyle = 'economy'
        },
        [{ kind: 'steady', speedMps: 24, grade: 0.0425, durationS: 300 }],
      ),
    ],
  ]
  it.each(CASES)('%s', (code, input) => {
    expect(codes(input)).toContain(code)
  })
})
