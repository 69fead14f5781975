import type { Duty } from '../schemas/heat-input'

/** Invented drive cycles a shop keeps at hand; SI, temperatures in °C. */

export const DEMO_DUTY_KEYS = [
  'rating-grade',
  'august-pass',
  'hot-town',
  'rocks-low-range',
  'soft-sand',
  'boat-ramp',
  'long-descent',
  'winter-short-trips',
  'highway-tow',
] as const
export type DemoDutyKey = (typeof DEMO_DUTY_KEYS)[number]

export interface DemoDuty {
  key: DemoDutyKey
  name: string
  words: string
  duty: Duty
}

/** A truck that was driven before the cycle begins. */
const warmStart = (ambientC: number) => ({ sumpC: ambientC + 42, coolantC: 92, axleC: ambientC + 30 })

export const DEMO_DUTIES: readonly DemoDuty[] = [
  {
    key: 'rating-grade',
    name: 'Long grade at 40 mph',
    // Common practice for tow ratings: about 11 mi of 3 to 7 %, 100 °F and more, air conditioning at its most, 40 mph.
    words:
      'Eleven miles of 3 to 7 % at 40 mph, 104 °F, air conditioning on: the kind of grade tow ratings are proven on.',
    duty: {
      ambientC: 40,
      altitudeM: 750,
      airConditioning: true,
      start: warmStart(40),
      segments: [
        { kind: 'steady', speedMps: 24.6, grade: 0, durationS: 900 },
        { kind: 'steady', speedMps: 17.88, grade: 0.04, distanceM: 3200 },
        { kind: 'steady', speedMps: 17.88, grade: 0.06, distanceM: 3200 },
        { kind: 'steady', speedMps: 17.88, grade: 0.03, distanceM: 2400 },
        { kind: 'steady', speedMps: 17.88, grade: 0.07, distanceM: 4000 },
        { kind: 'steady', speedMps: 17.88, grade: 0.05, distanceM: 2500 },
        { kind: 'steady', speedMps: 17.88, grade: 0.06, distanceM: 2400 },
        { kind: 'idle', durationS: 300 },
      ],
    },
  },
  {
    key: 'august-pass',
    name: 'Over the pass in August',
    words: 'Five miles of 6 % at 45 mph from a highway cruise, 100 °F at the foot, then the flat on top.',
    duty: {
      ambientC: 38,
      altitudeM: 1100,
      airConditioning: true,
      start: warmStart(38),
      segments: [
        { kind: 'steady', speedMps: 26.8, grade: 0, durationS: 1200 },
        { kind: 'steady', speedMps: 20.1, grade: 0.06, distanceM: 8047 },
        { kind: 'steady', speedMps: 24.6, grade: 0, durationS: 600 },
      ],
    },
  },
  {
    key: 'hot-town',
    name: 'Hot town, stop and go',
    words: 'Forty minutes of lights and lines at 109 °F with the air conditioning on, then a parking lot.',
    duty: {
      ambientC: 43,
      altitudeM: 350,
      airConditioning: true,
      start: warmStart(43),
      segments: [
        { kind: 'stopGo', speedMps: 15.6, stopsPerKm: 1.6, idleS: 22, durationS: 1200 },
        { kind: 'stopGo', speedMps: 8.9, stopsPerKm: 4, grade: 0.01, idleS: 30, durationS: 1200 },
        { kind: 'idle', inGear: true, durationS: 240 },
        { kind: 'idle', durationS: 300 },
      ],
    },
  },
  {
    key: 'rocks-low-range',
    name: 'Rocks in low range',
    words: 'Fifty minutes of ledges at a walking pace in low range, with throttle held against a rock twice.',
    duty: {
      ambientC: 32,
      altitudeM: 1700,
      start: warmStart(32),
      segments: [
        { kind: 'steady', speedMps: 5.4, grade: 0.05, surface: 'dirt', range: 'low', durationS: 900 },
        { kind: 'steady', speedMps: 1.3, grade: 0.12, surface: 'rock', range: 'low', durationS: 1200 },
        { kind: 'stall', throttle: 0.35, range: 'low', durationS: 6 },
        { kind: 'steady', speedMps: 0.9, grade: 0.2, surface: 'rock', range: 'low', durationS: 600 },
        { kind: 'stall', throttle: 0.4, range: 'low', durationS: 5 },
        { kind: 'idle', durationS: 300 },
      ],
    },
  },
  {
    key: 'soft-sand',
    name: 'Soft sand',
    words: 'Tracks and dunes at 106 °F: little air, much throttle, and the converter never locked for long.',
    duty: {
      ambientC: 41,
      altitudeM: 120,
      airConditioning: true,
      start: warmStart(41),
      segments: [
        { kind: 'steady', speedMps: 13.4, grade: 0, surface: 'gravel', durationS: 900 },
        { kind: 'steady', speedMps: 6.7, grade: 0.01, surface: 'sand', durationS: 900 },
        { kind: 'steady', speedMps: 4.5, grade: 0.08, surface: 'sand', durationS: 120 },
        { kind: 'steady', speedMps: 6.7, grade: 0, surface: 'sand', durationS: 600 },
        { kind: 'idle', durationS: 300 },
      ],
    },
  },
  {
    key: 'boat-ramp',
    name: 'Boat ramp',
    words: 'To the lake, waiting in line in gear, then the boat out of the water up a wet 14 % ramp.',
    duty: {
      ambientC: 33,
      altitudeM: 250,
      airConditioning: true,
      start: warmStart(33),
      segments: [
        { kind: 'steady', speedMps: 24.6, grade: 0.005, durationS: 1500 },
        { kind: 'stopGo', speedMps: 6, stopsPerKm: 12, idleS: 40, durationS: 900 },
        { kind: 'idle', inGear: true, durationS: 300 },
        { kind: 'stall', throttle: 0.3, range: 'low', durationS: 4 },
        { kind: 'steady', speedMps: 1.8, grade: 0.14, range: 'low', distanceM: 45 },
        { kind: 'stopGo', speedMps: 13.4, stopsPerKm: 1, durationS: 600 },
      ],
    },
  },
  {
    key: 'long-descent',
    name: 'Up one side, down the other',
    words: 'A 5 % climb of five miles and ten miles of 6 % down. Brake and engine-brake heat is not counted.',
    duty: {
      ambientC: 30,
      altitudeM: 2100,
      airConditioning: true,
      start: warmStart(30),
      segments: [
        { kind: 'steady', speedMps: 24.6, grade: 0.01, durationS: 900 },
        { kind: 'steady', speedMps: 18.8, grade: 0.05, distanceM: 8047 },
        { kind: 'steady', speedMps: 18.8, grade: -0.06, distanceM: 16_093 },
        { kind: 'steady', speedMps: 24.6, grade: 0, durationS: 600 },
      ],
    },
  },
  {
    key: 'winter-short-trips',
    name: 'Short trips in winter',
    words: 'Two errands at 0 °F from a cold start, with the engine off between them left out.',
    duty: {
      ambientC: -18,
      altitudeM: 400,
      airConditioning: false,
      segments: [
        { kind: 'idle', durationS: 240 },
        { kind: 'stopGo', speedMps: 13.4, stopsPerKm: 1.2, durationS: 540 },
        { kind: 'idle', durationS: 420 },
        { kind: 'steady', speedMps: 20.1, grade: 0, durationS: 480 },
        { kind: 'stopGo', speedMps: 11.2, stopsPerKm: 2, durationS: 420 },
      ],
    },
  },
  {
    key: 'highway-tow',
    name: 'Highway day with a trailer',
    words: 'An hour and a half of rolling interstate at 65 mph against a light wind, 95 °F.',
    duty: {
      ambientC: 35,
      altitudeM: 500,
      airConditioning: true,
      start: warmStart(35),
      segments: [
        { kind: 'steady', speedMps: 29.06, grade: 0.005, headwindMps: 3, durationS: 2400 },
        { kind: 'steady', speedMps: 27.7, grade: 0.025, headwindMps: 3, distanceM: 4000 },
        { kind: 'steady', speedMps: 29.06, grade: -0.015, headwindMps: 3, distanceM: 5000 },
        { kind: 'steady', speedMps: 29.06, grade: 0.005, headwindMps: 3, durationS: 1800 },
        { kind: 'stopGo', speedMps: 13.4, stopsPerKm: 1, durationS: 420 },
      ],
    },
  },
]

/** A drive cycle of the demo by its key. */
export function getDemoDuty(key: DemoDutyKey): DemoDuty {
  const found = DEMO_DUTIES.find((demo) => demo.key === key)
  if (found === undefined) throw new RangeError(`no demo drive cycle ${key}`)
  return found
}
