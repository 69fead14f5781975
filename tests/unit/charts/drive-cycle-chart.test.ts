import { describe, expect, it } from 'vitest'
import {
  drawDriveCycle,
  driveCycleSummary,
  driveCycleTitle,
  readCycleAt,
  roadProfile,
  timeUnitFor,
  type DriveCycleData,
} from '../../../shared/charts/drive-cycle-chart'
import { chartFormats } from '../../../shared/charts/formats'

const formats = chartFormats('us')
const plain = (text: string) => text.replaceAll('\u00a0', ' ')
const times = Array.from({ length: 61 }, (_, index) => index * 40)
const data: DriveCycleData = {
  series: {
    timeS: times,
    sumpC: times.map((timeS) => 80 + 40 * Math.exp(-(((timeS - 1600) / 400) ** 2))),
    coolerInletC: times.map((timeS) => 90 + 60 * Math.exp(-(((timeS - 1600) / 400) ** 2))),
    coolantC: times.map(() => 95),
  },
  segments: [
    { name: 'Flat', durationS: 1200, distanceM: 30_000, grade: 0, peakSumpC: 95, peakCoolerInletC: 110 },
    {
      name: 'Climb 6 %',
      durationS: 600,
      distanceM: 12_000,
      grade: 0.06,
      peakSumpC: 120,
      peakCoolerInletC: 150,
    },
    { name: 'Down', durationS: 600, distanceM: 12_000, grade: -0.05, peakSumpC: 115, peakCoolerInletC: 130 },
  ],
  limits: {
    sumpC: [{ rung: 'ease-off', fromC: 104, name: 'Ease off' }],
    coolerInletC: [{ rung: 'ease-off', fromC: 121, name: 'Sustained' }],
  },
}

describe('drive cycle chart', () => {
  it('builds the road from grade and length, not from speed', () => {
    const road = roadProfile(data.segments)
    expect(road.map(({ x }) => x)).toEqual([0, 1200, 1800, 2400])
    expect(road[1]?.y).toBe(0)
    // Rise over run of 0.06 along 12,000 m of road: 12,000 · sin(atan 0.06).
    expect(road[2]?.y).toBeCloseTo(718.71, 1)
    expect(road[3]?.y).toBeCloseTo(718.71 - 599.25, 1)
  })

  it('counts time in a unit that gives small numbers', () => {
    expect(timeUnitFor(60).unit).toBe('s')
    expect(timeUnitFor(2400).unit).toBe('min')
    expect(timeUnitFor(20_000).unit).toBe('h')
  })

  it('is titled by where it gets hottest and summed up in one sentence', () => {
    expect(plain(driveCycleTitle(data, formats))).toBe(
      'Hottest on “Climb 6 %”: pan 248 °F, to-cooler line 302 °F',
    )
    expect(plain(driveCycleSummary(data, formats))).toBe(
      'Over 40 min in 3 stretches the pan starts at 176 °F, peaks at 248 °F and ends at 177 °F.',
    )
  })

  it('keeps all of it inside the drawing at every width', () => {
    for (const width of [320, 358, 720, 1100]) {
      const drawing = drawDriveCycle(data, { width, formats })
      expect(drawing.plotWidth).toBeGreaterThan(150)
      expect(drawing.plot.top + drawing.plot.height).toBeLessThan(drawing.height)
      for (const { label } of drawing.curves) {
        expect(label.x).toBeLessThan(width)
        expect(label.fromY).toBeGreaterThanOrEqual(drawing.plot.top)
      }
      expect(new Set(drawing.curves.map(({ dash }) => dash)).size).toBe(3)
      expect(drawing.limits).toHaveLength(2)
    }
  })

  it('reads the drive at one moment', () => {
    const reading = readCycleAt(data, 1600)
    expect(reading.segment?.name).toBe('Climb 6 %')
    expect(reading.sumpC).toBeCloseTo(120, 6)
    expect(reading.coolerInletC).toBeCloseTo(150, 6)
  })

  it('draws a flat road, one point, and nothing at all without failing', () => {
    const empty = { ...data, segments: [], series: { timeS: [], sumpC: [], coolerInletC: [], coolantC: [] } }
    expect(drawDriveCycle(empty, { width: 358, formats }).profile.climbText).toBe('Flat')
    expect(driveCycleTitle(empty, formats)).toBe('Nothing is driven yet')
    expect(driveCycleSummary(empty, formats)).toContain('no drive cycle')
  })
})
