import { findSheetValue } from '../build-sheet/sheet'
import { formatGiven } from '../charts/formats'
import type { BuildSheet } from '../schemas/sheet'
import type { Quantity, UnitSystem } from '../units/display'

/** One field of the build sheet as a person meets it. */
export type SheetFieldSpec =
  | { kind: 'number'; path: string; label: string; quantity: Quantity; hint?: string; optional?: boolean }
  | {
      kind: 'choice'
      path: string
      label: string
      options: readonly { value: string; label: string }[]
      hint?: string
    }
  | { kind: 'flag'; path: string; label: string; hint?: string }

/** A section of the sheet that is nothing but fields. */
export interface SheetSectionSpec {
  id: string
  title: string
  fields: readonly SheetFieldSpec[]
  /** What stands beside the title while it is closed. */
  summary: (sheet: BuildSheet, system: UnitSystem) => string
}

type NumberSpec = Extract<SheetFieldSpec, { kind: 'number' }>
const number = (
  path: string,
  label: string,
  quantity: Quantity,
  more: Pick<NumberSpec, 'hint' | 'optional'> = {},
): NumberSpec => ({ kind: 'number', path, label, quantity, ...more })

const given = (sheet: BuildSheet, path: string, quantity: Quantity, system: UnitSystem): string => {
  const value = findSheetValue(sheet, path)?.value
  return typeof value === 'number' ? formatGiven(value, quantity, system) : ''
}
const joined = (...parts: string[]): string => parts.filter((part) => part !== '').join(', ')

const ENGINE: SheetSectionSpec = {
  id: 'engine',
  title: 'Engine',
  summary: (sheet, system) =>
    joined(
      findSheetValue(sheet, 'engine.fuel')?.value === 'diesel' ? 'diesel' : 'gasoline',
      given(sheet, 'engine.peakTorqueNm', 'torque', system),
      given(sheet, 'engine.peakPowerW', 'power', system),
    ),
  fields: [
    {
      kind: 'choice',
      path: 'engine.fuel',
      label: 'Fuel',
      options: [
        { value: 'petrol', label: 'Gasoline' },
        { value: 'diesel', label: 'Diesel' },
      ],
    },
    {
      kind: 'choice',
      path: 'engine.induction',
      label: 'Air',
      options: [
        { value: 'natural', label: 'Naturally aspirated: loses power with altitude' },
        { value: 'forced', label: 'Turbo or blower: counted without loss' },
      ],
    },
    number('engine.peakTorqueNm', 'Peak torque', 'torque'),
    number('engine.peakTorqueRpm', 'Speed of peak torque', 'rotation'),
    number('engine.peakPowerW', 'Peak power', 'power'),
    number('engine.peakPowerRpm', 'Speed of peak power', 'rotation'),
    number('engine.idleRpm', 'Idle', 'rotation'),
    number('engine.redlineRpm', 'Redline', 'rotation'),
    number('engine.coolantHeatRatio', 'Heat to coolant per power', 'number', {
      optional: true,
      hint: 'Gasoline about 0.95, diesel about 0.65',
    }),
  ],
}

const CONVERTER: SheetSectionSpec = {
  id: 'converter',
  title: 'Converter',
  summary: (sheet, system) =>
    joined(
      `stall ${given(sheet, 'converter.stallRpm', 'rotation', system)}`,
      findSheetValue(sheet, 'converter.lockup.fitted')?.value === true
        ? `locks from gear ${String(findSheetValue(sheet, 'converter.lockup.minGear')?.value ?? '')}`
        : 'no lock-up clutch',
    ),
  fields: [
    number('converter.stallRpm', 'Stall speed', 'rotation', {
      hint: 'At full throttle against the brakes, with this engine',
    }),
    number('converter.stallTorqueRatio', 'Torque ratio at stall', 'number', { hint: 'Usually 1.8 to 2.3' }),
    number('converter.couplingPoint', 'Coupling point, speed ratio', 'number', {
      optional: true,
      hint: 'Usually 0.88',
    }),
    { kind: 'flag', path: 'converter.lockup.fitted', label: 'Lock-up clutch fitted' },
    number('converter.lockup.minGear', 'Lowest gear that locks', 'number'),
    number('converter.lockup.minSpeedMps', 'Lowest speed that locks', 'speed'),
    number('converter.lockup.maxTurbineTorqueNm', 'Most torque the clutch holds', 'torque', {
      optional: true,
      hint: 'At the turbine; left out, it holds whatever comes',
    }),
    number('converter.lockup.slipRpm', 'Slip when locked', 'rotation', {
      optional: true,
      hint: '0 for a clutch that locks solid',
    }),
    number('converter.oilShare', 'Share of the oil in the converter', 'share', {
      optional: true,
      hint: 'Usually 35 %',
    }),
  ],
}

const TRANSFER_AXLE: SheetSectionSpec = {
  id: 'transfer-axle',
  title: 'Transfer case and axle',
  summary: (sheet, system) =>
    joined(
      `axle ${given(sheet, 'axle.ratio', 'number', system)}`,
      `low range ${given(sheet, 'transferCase.lowRatio', 'number', system)}`,
    ),
  fields: [
    number('axle.ratio', 'Axle ratio', 'number', { hint: 'On the axle tag or the door label' }),
    number('axle.efficiency', 'Axle efficiency', 'share'),
    number('transferCase.highRatio', 'High range ratio', 'number', {
      hint: '1 unless the high range is geared',
    }),
    number('transferCase.lowRatio', 'Low range ratio', 'number', {
      hint: 'Usually 2 to 4; 1 without a low range',
    }),
    number('transferCase.efficiencyHigh', 'Efficiency in high range', 'share'),
    number('transferCase.efficiencyLow', 'Efficiency in low range', 'share'),
  ],
}

/** Sections made of fields alone; those with lists have components of their own. */
export const SHEET_SECTIONS = { engine: ENGINE, converter: CONVERTER, transferAxle: TRANSFER_AXLE } as const

/** Fields around the loop of coolers: lines, feed, air, radiator. */
export const COOLING_FIELDS: readonly { title: string; fields: readonly SheetFieldSpec[] }[] = [
  {
    title: 'Lines and oil feed',
    fields: [
      number('cooling.lines.innerDiameterM', 'Line bore', 'length', { hint: '3/8 in is 9.5 mm' }),
      number('cooling.lines.lengthM', 'Line length, out and back', 'height'),
      number('cooling.lines.fittingsK', 'Fittings, velocity heads', 'number', {
        optional: true,
        hint: 'Usually 6',
      }),
      number('cooling.feed.openFlowM3S', 'Oil flow with nothing in the way', 'volumeFlow', {
        optional: true,
        hint: 'A timed quart is the best measure',
      }),
      number('cooling.feed.pressureMaxPa', 'Feed pressure', 'pressure', { optional: true }),
      number('cooling.feed.saturationRpm', 'Full feed from', 'rotation', { optional: true }),
    ],
  },
  {
    title: 'Air through the front',
    fields: [
      {
        kind: 'choice',
        path: 'cooling.stack.fan.drive',
        label: 'Fan',
        options: [
          { value: 'engine', label: 'Engine driven' },
          { value: 'electric', label: 'Electric' },
        ],
      },
      number('cooling.stack.fan.faceVelocityMps', 'Air the fan moves', 'airSpeed', {
        hint: 'At the face of the stack; 0 for no fan',
      }),
      number('cooling.stack.ramFraction', 'Share of road speed that gets through', 'share', {
        optional: true,
        hint: 'Usually 18 %',
      }),
      number('cooling.stack.blockedFraction', 'Blocked by winch, lights, mud', 'share', {
        optional: true,
        hint: '0 when clean',
      }),
      number('cooling.underbodyRiseK', 'Air under the body above outside', 'temperatureRise', {
        optional: true,
        hint: 'Usually 27 °F (15 °C)',
      }),
      number('cooling.condenserW', 'Heat of the condenser, A/C on', 'heatRate', { optional: true }),
    ],
  },
  {
    title: 'Radiator',
    fields: [
      number('cooling.radiator.faceAreaM2', 'Face', 'area'),
      number('cooling.radiator.rating.heatW', 'Heat it is rated for', 'heatRate'),
      number('cooling.radiator.rating.inletDifferenceK', 'Coolant above air', 'temperatureRise'),
      number('cooling.radiator.rating.airVelocityMps', 'at an air speed of', 'airSpeed'),
      number('cooling.radiator.rating.coolantFlowM3S', 'and a coolant flow of', 'volumeFlow'),
      number('cooling.radiator.rating.pumpRpm', 'at an engine speed of', 'rotation', { optional: true }),
      number('cooling.radiator.thermostat.openC', 'Thermostat begins to open', 'temperature'),
      number('cooling.radiator.thermostat.fullC', 'Thermostat fully open', 'temperature'),
    ],
  },
]

/** Fields of one cooler of the loop. */
export function coolerFields(at: string, construction: string): SheetFieldSpec[] {
  const rating = `${at}.rating`
  const common: SheetFieldSpec[] = [
    number(`${rating}.heatW`, 'Heat it is rated for', 'heatRate', {
      hint: 'Only with the conditions below; a weight class is not a heat rating',
    }),
    number(
      `${rating}.inletDifferenceK`,
      construction === 'in-tank' ? 'Oil above coolant' : 'Oil above air',
      'temperatureRise',
    ),
    number(`${rating}.oilFlowM3S`, 'at an oil flow of', 'volumeFlow'),
    number(`${rating}.pressureDropPa`, 'with a pressure drop of', 'pressure'),
  ]
  if (construction === 'in-tank')
    return [...common, number(`${rating}.coolantFlowM3S`, 'and a coolant flow of', 'volumeFlow')]
  return [
    number(`${at}.faceAreaM2`, 'Face', 'area'),
    ...common,
    number(`${rating}.airVelocityMps`, 'and an air speed of', 'airSpeed'),
    number(`${at}.blockedFraction`, 'Blocked share of its face', 'share', {
      optional: true,
      hint: '0 when clean',
    }),
  ]
}
