import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it } from 'vitest'
import type { DriveCycleData } from '#shared/charts/drive-cycle-chart'
import type { GradeChartData, GradePoint } from '#shared/charts/grade-chart'
import DriveCycleChart from '~/components/charts/DriveCycleChart.vue'
import GradeTemperatureChart from '~/components/charts/GradeTemperatureChart.vue'
import HeatBudget from '~/components/charts/HeatBudget.vue'

/** The cells of a row, as they are read one after the other. */
const cells = (row: { findAll: (selector: string) => { text: () => string }[] }) =>
  row
    .findAll('th, td')
    .map((cell) => plain(cell.text()))
    .join(' ')
const plain = (text: string) => text.replaceAll('\u00a0', ' ').replace(/\s+/g, ' ').trim()

const point = (percent: number, sumpC: number, locked = false): GradePoint => ({
  grade: percent / 100,
  sumpC,
  coolerInletC: sumpC + 20,
  speedMps: 20.1168,
  speedHeld: true,
  gear: 3,
  locked,
})
const grades: GradeChartData = {
  series: [
    {
      id: 'now',
      name: 'Unlocked',
      kind: 'present',
      points: [point(0, 70), point(4, 90), point(8, 120)],
      band: [0, 4, 8].map((percent) => ({
        grade: percent / 100,
        sumpC: { low: 60 + 5 * percent, high: 80 + 6 * percent },
        coolerInletC: { low: 80 + 5 * percent, high: 100 + 6 * percent },
      })),
    },
    {
      id: 'locks',
      name: 'If it locks',
      kind: 'other-lock',
      points: [point(0, 65, true), point(4, 72, true), point(4.01, 90), point(8, 120)],
    },
  ],
  limits: {
    sumpC: [{ rung: 'ease-off', fromC: 104, name: 'Ease off' }],
    coolerInletC: [{ rung: 'ease-off', fromC: 121, name: 'Ease off' }],
  },
  speedMps: 20.1168,
  climbM: 8046.72,
  held: { grade: 0.058, endedBy: 'sumpC', maxGrade: 0.45 },
  hillGrade: 0.04,
  maxGrade: 0.08,
}

describe('the grade chart', () => {
  const mount = () =>
    mountSuspended(GradeTemperatureChart, { props: { data: grades, system: 'us' as const } })

  it('is titled by what it says, and named and described to whoever does not see it', async () => {
    const chart = await mount()
    const svg = chart.get('svg[role=img]')
    expect(plain(chart.get(`[id="${svg.attributes('aria-labelledby')}"]`).text())).toBe(
      'Holds 5.8 % at 45 mph for 5 mi; steeper, the pan is too hot',
    )
    expect(plain(chart.get(`[id="${svg.attributes('aria-describedby')}"]`).text())).toMatch(
      /^From 0 % to 8 % the pan goes/,
    )
  })

  it('draws the band, the limits by name, the break of lock-up, and each curve in a dash of its own', async () => {
    const text = plain((await mount()).get('svg[role=img]').text())
    for (const name of ['Ease off 219', 'Ease off 250', 'lock-up ends', 'Unlocked', 'If it locks', '% grade'])
      expect(text).toContain(name)
    const chart = await mount()
    expect(chart.findAll('path[fill="var(--wash)"]').length).toBe(2)
    const dashes = chart.findAll('g[stroke-dasharray]').map((one) => one.attributes('stroke-dasharray'))
    expect(new Set(dashes)).toEqual(new Set(['7 4']))
  })

  it('is read point by point with the keys of a slider, in words', async () => {
    const chart = await mount()
    const cursor = chart.get('input[type=range]')
    expect(plain(cursor.attributes('aria-valuetext') ?? '')).toBe(
      '4 %: Unlocked: pan 194 °F, to-cooler line 230 °F, gear 3, unlocked. If it locks: pan 162 °F, to-cooler line 198 °F, gear 3, locked',
    )
    await cursor.setValue('2')
    expect(plain(cursor.attributes('aria-valuetext') ?? '')).toMatch(
      /^2 %: Unlocked: pan 176 °F, to-cooler line 212 °F/,
    )
  })

  it('has the very points as a table, one key away', async () => {
    const chart = await mount()
    expect(chart.find('table caption').exists()).toBe(false)
    const details = chart.get('details').element as HTMLDetailsElement
    details.open = true
    await chart.get('details').trigger('toggle')
    const rows = chart.findAll('details tbody tr').map(cells)
    expect(rows).toHaveLength(2 + 3 + 4)
    expect(rows[2]).toBe('4 % 194 °F 230 °F 3 unlocked 45 mph')
  })

  it('speaks the other units as soon as they are chosen', async () => {
    const chart = await mount()
    await chart.setProps({ system: 'metric' })
    expect(plain(chart.get('h3').text())).toBe(
      'Holds 5.8 % at 72.4 km/h for 8.05 km; steeper, the pan is too hot',
    )
    expect(chart.get('svg[role=img]').text()).toContain('°C')
  })
})

describe('the drive cycle chart', () => {
  const data: DriveCycleData = {
    series: {
      timeS: [0, 600, 1200, 1800],
      sumpC: [80, 85, 110, 95],
      coolerInletC: [85, 95, 140, 105],
      coolantC: [90, 92, 100, 93],
    },
    segments: [
      { name: 'Flat', durationS: 600, distanceM: 15_000, grade: 0, peakSumpC: 85, peakCoolerInletC: 95 },
      {
        name: 'Climb 6 %',
        durationS: 600,
        distanceM: 12_000,
        grade: 0.06,
        peakSumpC: 110,
        peakCoolerInletC: 140,
      },
      { name: 'Flat', durationS: 600, distanceM: 15_000, grade: 0, peakSumpC: 110, peakCoolerInletC: 140 },
    ],
    limits: {
      sumpC: [{ rung: 'ease-off', fromC: 104, name: 'Ease off' }],
      coolerInletC: [{ rung: 'ease-off', fromC: 121, name: 'Ease off' }],
    },
  }

  it('writes the temperature along the road and stands at the hottest moment until moved', async () => {
    const chart = await mountSuspended(DriveCycleChart, { props: { data, system: 'us' as const } })
    const text = plain(chart.get('svg[role=img]').text())
    for (const name of [
      '185°',
      '230°',
      'Rises 2,360 ft',
      'pan ease off 219',
      'line ease off 250',
      'Coolant',
      'minutes',
    ])
      expect(text).toContain(name)
    const cursor = chart.get('input[type=range]')
    expect(plain(cursor.attributes('aria-valuetext') ?? '')).toBe(
      '20 min: Climb 6 %: pan 230 °F, to-cooler line 284 °F, coolant 212 °F',
    )
    await cursor.setValue('0')
    expect(plain(cursor.attributes('aria-valuetext') ?? '')).toMatch(/^0 s: Flat: pan 176 °F/)
  })
})

describe('the heat budget', () => {
  it('is its own table: every bar with its word and its number, in and out of one length', async () => {
    const budget = await mountSuspended(HeatBudget, {
      props: {
        system: 'metric' as const,
        data: {
          moment: 'At the end of “2. Climb 6 %”',
          sources: { converterW: 8000, gearW: 2000, spinW: 500, pumpW: 500, shiftW: 0 },
          coolers: [{ name: 'Radiator tank', heatW: 5000 }],
          panCaseW: 1000,
        },
      },
    })
    const rows = budget.findAll('tbody tr').map(cells)
    expect(rows).toEqual([
      'Comes in 11.0 kW',
      'Converter slip 8.00 kW',
      'Gears 2.00 kW',
      'Drag of oil and clutches 0.500 kW',
      'Pump 0.500 kW',
      'Goes out 11.0 kW',
      'Radiator tank 5.00 kW',
      'Pan and case, to the air 1.00 kW',
      'Stays in: warms oil and metal 5.00 kW',
    ])
    // Out is hatched, so that gray print tells it from in.
    expect(budget.findAll('rect[fill^="url("]')).toHaveLength(3)
  })
})
