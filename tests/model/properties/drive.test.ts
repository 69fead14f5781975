import { describe, expect, it } from 'vitest'
import type { HeatInput, Segment } from '#shared/schemas/heat-input'
import type { SegmentResult } from '#shared/heat/types'
import { arbitraryInput } from '../../support/arbitrary-truck'
import { answered, holdsFor, PROPERTY_TIMEOUT_MS } from '../../support/properties'

/** Laws of the operating point. Forces, pump and drag are written here from their equations, not taken from the model. */

const CRR = { pavement: 0.01, gravel: 0.02, dirt: 0.035, rock: 0.06, mud: 0.15, sand: 0.2 }
const G = 9.80665

/** Force at the tires of a steady segment at the speed it is driven. */
function forceOf(input: HeatInput, segment: Segment & { kind: 'steady' }, speed: number): number {
  const { build, load, duty } = input
  const mass = build.vehicle.massKg + (load?.cargoMassKg ?? 0) + (load?.trailerMassKg ?? 0)
  const dragArea = build.vehicle.dragAreaM2 + (load?.trailerDragAreaM2 ?? 0)
  const pressure = 101325 * (1 - 2.25577e-5 * duty.altitudeM) ** 5.25588
  const density = pressure / (287.05 * (duty.ambientC + 273.15))
  const angle = Math.atan(segment.grade)
  const rolling = segment.rollingResistance ?? CRR[segment.surface ?? 'pavement']
  const air = speed + (segment.headwindMps ?? 0)
  return (
    mass * G * (Math.sin(angle) + rolling * Math.cos(angle)) + 0.5 * density * dragArea * air * Math.abs(air)
  )
}

const ratedTorque = ({ build }: HeatInput) =>
  build.transmission.ratedInputTorqueNm ?? build.engine.peakTorqueNm
const heatScale = (input: HeatInput) => input.calibration?.heatScale ?? 1
const coolantRatio = ({ build }: HeatInput) =>
  build.engine.coolantHeatRatio ?? (build.engine.fuel === 'petrol' ? 0.95 : 0.65)

/** Power of the engine, from the heat it gives its coolant. */
const enginePower = (input: HeatInput, segment: SegmentResult) =>
  (segment.end.heatEngineToCoolantW - 4000) / coolantRatio(input)

/** Spin loss as the operating point charges it, at 8 mm²/s. */
function spinAtReference(input: HeatInput, turbineRpm: number): number {
  return 0.005 * ratedTorque(input) * (1 + (0.4 * turbineRpm) / 1000) * ((turbineRpm * Math.PI) / 30)
}

const steady = arbitraryInput({ kinds: ['steady'], maxSegments: 2 })

describe('driving steadily', () => {
  it(
    'engine power is losses, work at the wheels and, only at idle, brakes',
    () =>
      holdsFor(300, steady, (input) => {
        answered(input).segments.forEach((segment, index) => {
          const asked = input.duty.segments[index] as Segment & { kind: 'steady' }
          const force = forceOf(input, asked, segment.speedMps)
          const { heat } = segment
          const scale = heatScale(input)
          const turbineRpm = segment.speedRatio * segment.engineRpm
          const power = enginePower(input, segment)
          if (force <= 0) {
            // Coasting: the road turns the transmission, the engine only the pump.
            expect(heat.converterW).toBe(0)
            expect(heat.gearW).toBe(0)
            expect(heat.axleW).toBe(0)
            expect(heat.transferCaseW).toBe(0)
            expect(power).toBeCloseTo(heat.pumpW / scale, 3)
            expect(segment.gear).toBe(asked.topGear ?? input.build.transmission.gears.length)
            return
          }
          const losses =
            (heat.converterW + heat.gearW + heat.pumpW) / scale +
            spinAtReference(input, turbineRpm) +
            heat.axleW +
            heat.transferCaseW
          const brakes = power - losses - force * segment.speedMps
          const slack = 1e-6 * power
          if (segment.engineRpm > input.build.engine.idleRpm * (1 + 1e-9))
            expect(Math.abs(brakes)).toBeLessThan(slack)
          else expect(brakes).toBeGreaterThan(-slack)
        })
      }),
    PROPERTY_TIMEOUT_MS,
  )

  it(
    'no converter makes power: heat is not negative, SR and TR·SR do not pass 1',
    () =>
      holdsFor(300, arbitraryInput({ maxSegments: 2 }), (input) => {
        const { stallTorqueRatio, couplingPoint } = input.build.converter
        for (const segment of answered(input).segments) {
          for (const [name, value] of Object.entries(segment.heat))
            expect(value, name).toBeGreaterThanOrEqual(name === 'converterW' ? -1e-9 : 0)
          expect(segment.speedRatio).toBeGreaterThanOrEqual(0)
          expect(segment.speedRatio).toBeLessThanOrEqual(1 + 1e-12)
          const torqueRatio =
            1 + (stallTorqueRatio - 1) * Math.max(0, 1 - segment.speedRatio / (couplingPoint ?? 0.88))
          if (!segment.locked) expect(torqueRatio * segment.speedRatio).toBeLessThanOrEqual(1 + 1e-12)
        }
      }),
    PROPERTY_TIMEOUT_MS,
  )

  it(
    'a state that is kept respects gears, lock-up, engine speed and torque',
    () =>
      holdsFor(200, steady, (input) => {
        const { engine, converter, transmission } = input.build
        answered(input).segments.forEach((segment, index) => {
          const asked = input.duty.segments[index] as Segment & { kind: 'steady' }
          expect(segment.gear).toBeLessThanOrEqual(asked.topGear ?? transmission.gears.length)
          expect(segment.speedMps).toBeLessThanOrEqual(asked.speedMps)
          expect(segment.speedHeld).toBe(segment.speedMps === asked.speedMps)
          if (forceOf(input, asked, segment.speedMps) <= 0) return
          expect(segment.engineRpm).toBeLessThanOrEqual(0.95 * engine.redlineRpm * (1 + 1e-9))
          expect(segment.engineRpm).toBeGreaterThanOrEqual(engine.idleRpm * (1 - 1e-9))
          const turbineRpm = segment.speedRatio * segment.engineRpm
          if (segment.gear > 1) expect(turbineRpm).toBeGreaterThanOrEqual(1100 * (1 - 1e-9))
          if (segment.locked) {
            expect(converter.lockup?.fitted).toBe(true)
            expect(segment.gear).toBeGreaterThanOrEqual(converter.lockup?.minGear ?? 1)
            expect(segment.speedMps).toBeGreaterThanOrEqual(converter.lockup?.minSpeedMps ?? 0)
            expect(turbineRpm).toBeGreaterThanOrEqual(1200 * (1 - 1e-9))
            expect(segment.engineRpm - turbineRpm).toBeCloseTo(converter.lockup?.slipRpm ?? 0, 6)
          } else if (segment.gear > 1) expect(segment.speedRatio).toBeGreaterThanOrEqual(0.8 * (1 - 1e-9))
        })
      }),
    PROPERTY_TIMEOUT_MS,
  )
})

describe('standing', () => {
  it(
    'on the brakes all engine power is heat in converter and pump',
    () =>
      holdsFor(100, arbitraryInput({ kinds: ['stall', 'idle'], maxSegments: 2 }), (input) => {
        answered(input).segments.forEach((segment, index) => {
          const asked = input.duty.segments[index] as Segment
          const braked = asked.kind === 'stall' || (asked.kind === 'idle' && asked.inGear === true)
          const { heat } = segment
          expect(segment.speedMps).toBe(0)
          expect(segment.distanceM).toBe(0)
          expect(heat.gearW + heat.axleW + heat.transferCaseW + heat.shiftW).toBe(0)
          expect(heat.spinW).toBe(0)
          const power = enginePower(input, segment)
          expect((heat.converterW + heat.pumpW) / heatScale(input) / power).toBeCloseTo(1, 9)
          if (!braked) expect(heat.converterW).toBe(0)
          if (braked) expect(segment.gear).toBe(1)
          expect(segment.engineRpm).toBeGreaterThanOrEqual(input.build.engine.idleRpm * (1 - 1e-9))
        })
      }),
    PROPERTY_TIMEOUT_MS,
  )

  it(
    'more throttle stalls faster and hotter',
    () =>
      holdsFor(60, arbitraryInput({ kinds: ['stall'], maxSegments: 1 }), (input) => {
        const runs = [0.2, 0.5, 0.8, 1].map((throttle) => {
          const segments = [{ kind: 'stall' as const, throttle, durationS: 5 }]
          return answered({ ...input, duty: { ...input.duty, segments } }).segments[0] as SegmentResult
        })
        for (let index = 1; index < runs.length; index++) {
          const [less, more] = [runs[index - 1] as SegmentResult, runs[index] as SegmentResult]
          expect(more.engineRpm).toBeGreaterThanOrEqual(less.engineRpm * (1 - 1e-9))
          expect(more.heat.converterW).toBeGreaterThanOrEqual(less.heat.converterW * (1 - 1e-9))
        }
      }),
    PROPERTY_TIMEOUT_MS,
  )
})
