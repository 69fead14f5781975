import { describe, expect, it } from 'vitest'
import { AppError } from '#shared/errors'
import { capacityFactor, torqueRatio } from '#shared/heat/converter'
import {
  CALM_SHARE,
  anyGearHolds,
  brakedState,
  chooseGear,
  coastingState,
  demandAtOutput,
  lockedState,
  unlockedState,
} from '#shared/heat/gear-choice'
import { operatingPoint, roadPoint } from '#shared/heat/operating-point'
import { resolveInput } from '#shared/heat/resolve'
import type { Powertrain } from '#shared/heat/resolve'
import { roadForce } from '#shared/heat/road-load'
import type { Segment, StopGoSegment } from '#shared/schemas/heat-input'
import { plainTruck } from '../../support/plain-truck'

const idle = { kind: 'idle', durationS: 10 } as const
const powertrainOf = (change: (input: ReturnType<typeof plainTruck>) => void = () => undefined) => {
  const input = plainTruck({ segments: [idle] })
  change(input)
  return resolveInput(input).powertrain
}
const powertrain = powertrainOf()
const high = powertrain.transferCase.high
const demand = (force: number, speedMps: number) => demandAtOutput(powertrain, high, force, speedMps)
const choose = (truck: Powertrain, force: number, speedMps: number, topGear = 4) =>
  chooseGear(truck, demand(force, speedMps), topGear, CALM_SHARE)

describe('gear choice', () => {
  it('takes the highest gear that holds locked', () => {
    const state = choose(powertrain, 900, 26)
    expect(state).toMatchObject({ gear: 4, locked: true })
    expect(choose(powertrain, 900, 26, 3)).toMatchObject({ gear: 3, locked: true })
  })

  it('does not lock below the gear, speed, torque or turbine speed that lock-up needs', () => {
    expect(lockedState(powertrain, demand(900, 26), 2)).toBeUndefined()
    expect(lockedState(powertrain, demand(900, 16.9), 3)).toBeUndefined()
    const limited = powertrainOf((input) => {
      const { lockup } = input.build.converter
      if (lockup !== undefined) lockup.maxTurbineTorqueNm = 60
    })
    expect(lockedState(limited, demand(900, 26), 4)).toBeUndefined()
    expect(lockedState(powertrain, demand(900, 17.1), 4)).toBeUndefined()
    expect(
      lockedState(
        powertrainOf((input) => {
          input.build.converter.lockup = { fitted: false }
        }),
        demand(900, 26),
        4,
      ),
    ).toBeUndefined()
  })

  it('slips a locked converter by its slip and makes heat of it', () => {
    const slipping = powertrainOf((input) => {
      const { lockup } = input.build.converter
      if (lockup !== undefined) lockup.slipRpm = 40
    })
    const state = lockedState(slipping, demand(900, 26), 4)
    expect((state?.impellerSpeed ?? NaN) - (state?.turbineSpeed ?? NaN)).toBeCloseTo((40 * Math.PI) / 30, 9)
    expect(state?.converterW).toBeCloseTo(((state?.turbineTorque ?? NaN) * 40 * Math.PI) / 30, 6)
  })

  it('keeps the tall gear under the economy style, and not under the tow style', () => {
    const heat = (state: ReturnType<typeof choose>) =>
      state === undefined ? NaN : state.converterW + state.gearW + state.spinW + state.pumpW
    let taller = 0
    for (let force = 3000; force < 5000; force += 25) {
      const [tow, economy] = [
        choose(powertrain, force, 24),
        choose({ ...powertrain, economy: true }, force, 24),
      ]
      if (tow === undefined || economy === undefined || tow.locked) continue
      expect(economy.gear).toBeGreaterThanOrEqual(tow.gear)
      if (economy.gear === tow.gear) continue
      taller++
      expect(heat(tow)).toBeLessThan(heat(economy))
    }
    expect(taller).toBeGreaterThan(3)
  })

  it('finds a gear exactly where one holds', () => {
    for (let force = 500; force < 30_000; force *= 1.13)
      for (const speedMps of [1, 6, 15, 24, 40])
        expect(anyGearHolds(powertrain, demand(force, speedMps), 4)).toBe(
          choose(powertrain, force, speedMps) !== undefined,
        )
  })

  it('lets the brakes take what an idling engine gives beyond the need', () => {
    const creeping = demand(300, 0.8)
    const state = unlockedState(powertrain, creeping, 1)
    const { converter, idleSpeed } = powertrain
    expect(state.impellerSpeed).toBe(idleSpeed)
    const torque = converter.stallCapacity * capacityFactor(state.speedRatio) * idleSpeed ** 2
    expect(state.impellerTorque).toBeCloseTo(torque, 9)
    expect(state.turbineTorque).toBeCloseTo(
      torque * torqueRatio(state.speedRatio, converter.stallTorqueRatio, converter.couplingPoint),
      9,
    )
  })

  it('coasts in the highest gear allowed with drag and pump only', () => {
    const state = coastingState(powertrain, high, 25, 3)
    expect(state).toMatchObject({
      gear: 3,
      locked: false,
      converterW: 0,
      gearW: 0,
      axleW: 0,
      impellerTorque: 0,
    })
    expect(state.spinW).toBeGreaterThan(0)
    expect(coastingState(powertrain, high, 0, 4)).toMatchObject({
      impellerSpeed: powertrain.idleSpeed,
      speedRatio: 0,
      spinW: 0,
    })
  })

  it('turns all engine power into heat on the brakes', () => {
    const state = brakedState(powertrain, 200)
    expect(state.converterW).toBeCloseTo(powertrain.converter.stallCapacity * 200 ** 3, 6)
    expect(state.gear).toBe(1)
  })
})

const point = (segment: Segment, truck = powertrain) => operatingPoint(truck, segment, 'duty.segments.0')

describe('steady driving', () => {
  it('goes as fast as some gear holds where the speed asked for is too much', () => {
    const segment = { kind: 'steady', speedMps: 30, grade: 0.1, durationS: 60 } as const
    const held = point(segment)
    expect(held.speedHeld).toBe(false)
    const road = roadPoint(powertrain, {}, segment.grade)
    const holdsAt = (speedMps: number) =>
      anyGearHolds(powertrain, demand(roadForce(road.load, speedMps), speedMps), 4)
    expect(holdsAt(held.speedMps)).toBe(true)
    expect(holdsAt(held.speedMps * (1 + 1e-9))).toBe(false)
  })

  it('refuses a wall', () => {
    const climb = () => point({ kind: 'steady', speedMps: 10, grade: 1, durationS: 60 })
    expect(climb).toThrow('cannot climb this grade')
  })

  it('is the same by any name of the surface', () => {
    const base = { kind: 'steady', speedMps: 12, grade: 0.02, durationS: 60 } as const
    expect(point({ ...base, surface: 'dirt' })).toEqual(point({ ...base, rollingResistance: 0.035 }))
    expect(point(base)).toEqual(
      point({ ...base, surface: 'pavement', headwindMps: 0, range: 'high', topGear: 4 }),
    )
  })
})

describe('stop and go', () => {
  const base: StopGoSegment = { kind: 'stopGo', speedMps: 12, stopsPerKm: 2, durationS: 600 }

  it('covers one cycle of road in the time of its phases', () => {
    const cycle = point(base)
    // 500 m: pull away at 1 m/s² to 12 m/s, cruise, coast down at 1.2 m/s², stand 15 s
    const cruiseM = 500 - 12 ** 2 / 2 - 12 ** 2 / 2.4
    expect(cycle.speedMps).toBeCloseTo(500 / (12 + cruiseM / 12 + 10 + 15), 9)
  })

  it('never goes faster than the stops let it', () => {
    const cycle = point({ ...base, speedMps: 30, stopsPerKm: 10 })
    const top = Math.sqrt(100 / (1 / 2 + 1 / 2.4))
    expect(cycle.speedMps).toBeCloseTo(100 / (top + top / 1.2 + 15), 9)
  })

  it('stands in gear or out of it', () => {
    const [inGear, out] = [point(base), point({ ...base, inGear: false })]
    expect(inGear.converterW).toBeGreaterThan(out.converterW)
    const cycleS = 500 / inGear.speedMps
    const braked = brakedState(powertrain, powertrain.idleSpeed)
    expect(inGear.converterW - out.converterW).toBeCloseTo((braked.converterW * 15) / cycleS, 6)
  })

  it('counts a shift for every gear change on the way up', () => {
    const brisk = point({ ...base, speedMps: 22, stopsPerKm: 1 })
    expect(brisk.shiftW).toBeGreaterThan(0)
    const oneGear = point({ ...base, speedMps: 8, topGear: 1 })
    expect(oneGear.shiftW).toBe(0)
  })

  it('shares the feed over the cycle, not the cycle over the feed', () => {
    const cycle = point(base)
    const ofMean = Math.min(1, cycle.engineSpeed / powertrain.feedSaturationSpeed)
    expect(cycle.feedShare).toBeLessThan(1)
    expect(cycle.feedShare).not.toBeCloseTo(ofMean, 3)
  })

  it('refuses what cannot pull away', () => {
    expect(() => point({ ...base, grade: 0.9 })).toThrow('cannot pull away on this grade')
  })

  it('refuses what cannot hold its cruise', () => {
    // 1st only: pulling away is slow but possible, the engine speed of the cruise is beyond reach
    const road = { ...base, speedMps: 34, stopsPerKm: 0.05, accelerationMps2: 0.05, topGear: 1 }
    expect(() => point(road)).toThrow(AppError)
  })
})

describe('a stall test', () => {
  it('is where throttled engine torque meets converter and pump', () => {
    const [half, full] = [0.5, 1].map((throttle) => point({ kind: 'stall', throttle, durationS: 5 }))
    expect(full?.engineSpeed).toBeGreaterThan(half?.engineSpeed ?? NaN)
    // at full throttle and sea level the stall speed of the converter itself
    const atSea = powertrainOf((input) => {
      input.duty.altitudeM = 0
      input.duty.ambientC = 15
    })
    const stall = operatingPoint(atSea, { kind: 'stall', throttle: 1, durationS: 5 }, 'x')
    expect((stall.engineSpeed * 30) / Math.PI).toBeCloseTo(2100, 6)
  })

  it('idles at no throttle', () => {
    expect(point({ kind: 'stall', throttle: 0, durationS: 5 }).engineSpeed).toBe(powertrain.idleSpeed)
  })
})
