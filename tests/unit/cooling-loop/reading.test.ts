import { describe, expect, it } from 'vitest'
import { ARCHETYPES } from '../../../shared/build-sheet/archetypes'
import { createGenericCooler } from '../../../shared/build-sheet/generic-cooler'
import { readLoop } from '../../../shared/cooling-loop/reading'
import { estimate } from '../../../shared/heat'
import type { Cooler, HeatInput } from '../../../shared/schemas/heat-input'

const diesel = ARCHETYPES.find(({ id }) => id === 'diesel-pickup')?.build
if (!diesel) throw new Error('the diesel pickup is an archetype')
const build = diesel
const [tank, front] = build.cooling.coolers as [Cooler, Cooler]
const behind: Cooler = {
  ...createGenericCooler({ construction: 'tube-fin', position: 'behind-condenser', size: 'medium' }),
  parallelWithPrevious: true,
}
const remote = createGenericCooler({
  construction: 'plate-fin',
  position: 'remote',
  size: 'small',
  fan: true,
})

function read(coolers: Cooler[], more: { bypass?: { openC: number; fullC: number }; kind?: 'stopGo' } = {}) {
  const input: HeatInput = {
    build: {
      ...build,
      cooling: { ...build.cooling, coolers, ...(more.bypass ? { bypass: more.bypass } : {}) },
    },
    load: { trailerMassKg: 6000, trailerDragAreaM2: 2.5 },
    duty: {
      ambientC: 38,
      altitudeM: 1200,
      airConditioning: true,
      segments: [
        more.kind === 'stopGo'
          ? { kind: 'stopGo', speedMps: 9, stopsPerKm: 2, durationS: 1500, headwindMps: -2 }
          : { kind: 'steady', speedMps: 18, grade: 0.07, durationS: 1500, headwindMps: 3 },
      ],
    },
  }
  const [segment] = estimate(input).segments
  if (!segment) throw new Error('one segment was asked for')
  return { input, segment, state: segment.end, reading: readLoop(input, { index: 0, segment }, segment.end) }
}

describe('the loop in numbers', () => {
  it.each([
    ['in series', [tank, front, remote], undefined],
    ['side by side', [tank, front, behind, remote], undefined],
    ['behind a bypass that is half open', [tank, front], { openC: 60, fullC: 140 }],
    ['behind a bypass that is open', [front], { openC: 150, fullC: 170 }],
    ['without a cooler', [], undefined],
  ] as const)('ends at the model’s own return temperature: %s', (_, coolers, bypass) => {
    const { reading, state } = read([...coolers], { bypass })
    const last = reading.afterGroupC.at(-1) ?? reading.inletC
    const mixed = reading.throughShare * last + (1 - reading.throughShare) * reading.inletC
    expect(mixed).toBeCloseTo(state.coolerReturnC, 6)
    expect(reading.inletC).toBe(state.coolerInletC)
    expect(reading.coolerHeatW).toEqual(state.coolerHeatW)
    if (bypass?.openC === 60) expect(reading.throughShare).toBeGreaterThan(0.1)
    if (bypass?.openC === 60) expect(reading.throughShare).toBeLessThan(0.9)
    if (bypass?.openC === 150) expect(reading.throughShare).toBe(0)
  })

  it('cools where heat is taken, group by group', () => {
    const { reading } = read([tank, front, behind, remote])
    expect(reading.afterGroupC).toHaveLength(3)
    const before = [reading.inletC, ...reading.afterGroupC]
    const heats = [[0], [1, 2], [3]].map((members) =>
      members.reduce((sum, index) => sum + (reading.coolerHeatW[index] ?? 0), 0),
    )
    heats.forEach((heatW, group) => {
      const drop = (before[group] ?? 0) - (before[group + 1] ?? 0)
      expect(Math.sign(drop)).toBe(Math.sign(heatW))
    })
  })

  it.each(['steady', 'stopGo'] as const)('warms the air by the heat that goes into it: %s', (kind) => {
    const { reading, state, segment } = read([tank, front, behind, remote], kind === 'stopGo' ? { kind } : {})
    // ISO 2533 and the ideal gas (287.05 J/(kg K)), cp 1006 J/(kg K): the air side in its own arithmetic.
    const density = (101325 * (1 - 2.25577e-5 * 1200) ** 5.25588) / (287.05 * (38 + 273.15))
    const perKelvin = density * build.cooling.radiator.faceAreaM2 * state.faceVelocityMps * 1006
    const airSpeed = Math.max(0, segment.speedMps + (kind === 'stopGo' ? -2 : 3))
    expect(reading.air.outsideC).toBe(38)
    expect(reading.air.aheadC).toBeCloseTo(38 + 8 * Math.max(0, 1 - airSpeed / 8), 9)
    expect(reading.air.behindCondenserC - reading.air.aheadC).toBeCloseTo(7000 / perKelvin, 9)
    const stackW = (state.coolerHeatW[1] ?? 0) + (state.coolerHeatW[2] ?? 0)
    expect(reading.air.atRadiatorC - reading.air.behindCondenserC).toBeCloseTo(stackW / perKelvin, 9)
    expect(reading.air.underbodyC).toBe(38 + 15)
  })
})
