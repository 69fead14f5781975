import { describe, expect, it } from 'vitest'
import { ARCHETYPES } from '../../../shared/build-sheet/archetypes'
import { withoutLockup } from '../../../shared/build-sheet/setups'
import { estimate } from '../../../shared/heat'
import type { Build, Load, Segment } from '../../../shared/schemas/heat-input'

const drive = (build: Build, load: Load, segment: Segment) =>
  estimate({
    build,
    load,
    duty: {
      ambientC: 38,
      altitudeM: 500,
      airConditioning: true,
      start: { sumpC: 85, coolantC: 92, axleC: 70 },
      segments: [segment],
    },
  }).segments[0]!

// What such trucks are seen to do: common practice, no source; a highway tow locked in the 150s to 190s °F, an unlocked
// climb with the hot line past 250 °F.
describe.each(ARCHETYPES.map((archetype) => [archetype.id, archetype] as const))(
  '%s on the road',
  (_id, archetype) => {
    const { build, weights } = archetype
    const cruise: Segment = { kind: 'steady', speedMps: 29, grade: 0, durationS: 3600 }
    const climb: Segment = { kind: 'steady', speedMps: 17.9, grade: 0.06, distanceM: 16_000 }
    const heavy: Load = { trailerMassKg: weights.trailerKg, trailerDragAreaM2: 2.6 }

    it('cruises locked in its top gears with the pan at 60 to 90 °C', () => {
      const { locked, gear, speedHeld, equilibrium } = drive(build, {}, cruise)
      expect({ locked, speedHeld }).toEqual({ locked: true, speedHeld: true })
      expect(gear).toBeGreaterThanOrEqual(build.transmission.gears.length - 1)
      expect(equilibrium?.sumpC).toBeGreaterThan(60)
      expect(equilibrium?.sumpC).toBeLessThan(90)
    })

    it('unlocked, with its heaviest trailer up 6 %, runs the hot line past 120 °C', () => {
      const { peakCoolerInletC, peakSumpC, speedHeld } = drive(withoutLockup(build), heavy, climb)
      expect(speedHeld).toBe(true)
      expect(peakCoolerInletC).toBeGreaterThan(120)
      expect(peakCoolerInletC).toBeLessThan(190)
      expect(peakSumpC).toBeLessThan(peakCoolerInletC)
    })

    it('is no hotter where it may lock', () => {
      const may = drive(build, heavy, climb)
      const never = drive(withoutLockup(build), heavy, climb)
      expect(may.peakCoolerInletC).toBeLessThanOrEqual(never.peakCoolerInletC)
    })

    it('keeps its coolant under 115 °C on that climb', () => {
      const { equilibrium } = drive(build, heavy, climb)
      expect(equilibrium?.coolantC).toBeGreaterThan(85)
      expect(equilibrium?.coolantC).toBeLessThan(115)
    })
  },
)
