import { describe, expect, it } from 'vitest'
import { ARCHETYPE_IDS, ARCHETYPES, findArchetype } from '../../../shared/build-sheet/archetypes'
import { parseTireCode } from '../../../shared/build-sheet/tire-code'
import { BuildSchema } from '../../../shared/schemas/heat-input'

describe.each(ARCHETYPES.map((archetype) => [archetype.id, archetype] as const))('%s', (id, archetype) => {
  const { build, weights } = archetype

  it('is one the model takes', () => {
    const parsed = BuildSchema.safeParse(build)
    expect(parsed.error?.issues).toBeUndefined()
  })

  it('rolls on its stock tire, geared by its stock axle', () => {
    expect(build.vehicle.tyreRadiusM).toBeCloseTo(parseTireCode(archetype.stockTireCode).rollingRadiusM, 3)
    expect(build.axle.ratio).toBe(archetype.stockAxleRatio)
  })

  it('has weights that rise from empty to loaded to the most it may weigh', () => {
    expect(weights.curbKg).toBeLessThan(weights.loadedKg)
    expect(weights.loadedKg).toBeLessThan(weights.grossKg)
    expect(build.vehicle.massKg).toBe(weights.loadedKg)
  })

  // Ranges usual for light trucks: common practice, no source, unless named.
  it('lies within what is usual for its kind', () => {
    const { engine, converter, transmission, transferCase, axle, vehicle, cooling } = build
    const torqueAtPeakPower = engine.peakPowerW / ((engine.peakPowerRpm * 2 * Math.PI) / 60)
    // Power peaks above the torque peak, with less torque, but not less than half of it.
    expect(torqueAtPeakPower).toBeLessThan(engine.peakTorqueNm)
    expect(torqueAtPeakPower).toBeGreaterThan(0.6 * engine.peakTorqueNm)
    // Drag coefficient 0.38 to 0.55 times 2.6 to 3.6 m².
    expect(vehicle.dragAreaM2).toBeGreaterThan(0.95)
    expect(vehicle.dragAreaM2).toBeLessThan(1.9)
    // Capacity factor stallRpm/sqrt(torque) of light-truck converters: 50 to 120 rpm/√(N·m).
    const capacity = converter.stallRpm / Math.sqrt(engine.peakTorqueNm)
    expect(capacity).toBeGreaterThan(50)
    expect(capacity).toBeLessThan(120)
    expect(converter.stallTorqueRatio).toBeGreaterThanOrEqual(1.7)
    expect(converter.stallTorqueRatio).toBeLessThanOrEqual(2.3)
    const ratios = transmission.gears.map(({ ratio }) => ratio)
    expect(ratios[0]).toBeGreaterThan(2.4)
    expect(ratios[0]).toBeLessThan(4.2)
    expect(ratios).toContain(1)
    expect(ratios.at(-1)).toBeGreaterThan(0.58)
    expect(ratios.at(-1)).toBeLessThan(0.8)
    for (const { efficiency } of transmission.gears) {
      expect(efficiency).toBeGreaterThanOrEqual(0.94)
      expect(efficiency).toBeLessThanOrEqual(0.99)
    }
    // Direct drive turns no gear under load: no other gear loses less.
    const direct = transmission.gears.find(({ ratio }) => ratio === 1)?.efficiency ?? 0
    expect(Math.max(...transmission.gears.map(({ efficiency }) => efficiency))).toBe(direct)
    // 10 to 16 L with converter and coolers filled.
    expect(transmission.fluidVolumeM3).toBeGreaterThan(0.009)
    expect(transmission.fluidVolumeM3).toBeLessThan(0.017)
    expect(transferCase.lowRatio).toBeGreaterThan(2)
    expect(transferCase.lowRatio).toBeLessThan(4.1)
    expect(axle.ratio).toBeGreaterThan(3)
    expect(axle.ratio).toBeLessThan(5)
    expect(cooling.coolers[0]).toMatchObject({ construction: 'in-tank', position: 'radiator-tank' })
    // A radiator at its rating takes 45 to 80 % of what its air could carry.
    const { faceAreaM2, rating } = cooling.radiator
    const airCarries = 1.184 * faceAreaM2 * rating.airVelocityMps * 1006 * rating.inletDifferenceK
    expect(rating.heatW / airCarries).toBeGreaterThan(0.45)
    expect(rating.heatW / airCarries).toBeLessThan(0.8)
  })

  it('is found by its id and says what it is in plain words', () => {
    expect(findArchetype(id)).toBe(archetype)
    expect(archetype.words.length).toBeGreaterThan(40)
    expect(archetype.words).not.toMatch(/[!]/)
  })
})

describe('the archetypes', () => {
  it('are the three that a new build starts from', () => {
    expect(ARCHETYPES.map(({ id }) => id)).toEqual([...ARCHETYPE_IDS])
    expect(
      ARCHETYPES.map(({ build }) => [
        build.transmission.gears.length,
        build.engine.fuel,
        build.engine.induction,
      ]),
    ).toEqual([
      [4, 'petrol', 'natural'],
      [6, 'diesel', 'forced'],
      [5, 'petrol', 'natural'],
    ])
    expect(findArchetype('flying-carpet')).toBeUndefined()
  })
})
