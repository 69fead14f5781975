import type { Stage } from '../schemas/build'
import type { Control } from '../schemas/control'
import type { Build, Load } from '../schemas/heat-input'
import type { Limits } from '../schemas/limits'
import type { BuildSheet, SheetValue } from '../schemas/sheet'
import {
  feetToMeters,
  milesPerHourToMetersPerSecond,
  milesToMeters,
  poundsToKilograms,
} from '../units/conversions'
import { toModelCooler } from './catalogue'
import { DEMO_CATALOGUE } from './demo-catalogue'
import { type DemoDutyKey, getDemoDuty } from './demo-duties'
import { createSheetFromFacts, type EightFacts, type ScenarioDraft, TRAILER_SHAPES } from './facts'
import { createGenericCooler } from './generic-cooler'
import { createStandingSetups, type SetupDraft } from './setups'
import { deriveBuild, setSheetValue } from './sheet'

/** Invented customers and their trucks, at every stage of the job. Ids are made by whoever stores them. */

export interface DemoCustomer {
  name: string
  phone: string
  email: string
}

/** Everything a seed needs to insert one build; the first scenario is the one the list shows. */
export interface DemoBuild {
  name: string
  stage: Stage
  customer: DemoCustomer
  sheet: BuildSheet
  control: Control
  limits: Limits
  scenarios: ScenarioDraft[]
  setups: SetupDraft[]
}

interface DemoTruck {
  name: string
  stage: Stage
  customer: DemoCustomer
  facts: EightFacts
  /** What was measured or looked up since the call. */
  known?: SheetValue[]
  control?: Partial<Control>
  /** Drive cycles besides, or before, the hill of the facts. */
  duties: { key: DemoDutyKey; load: Load; first?: boolean }[]
  /** What else was considered, from the build as it is. */
  considered?: (build: Build) => SetupDraft[]
}

const mph = milesPerHourToMetersPerSecond
const boat = (massLb: number): Load => ({
  trailerMassKg: Math.round(poundsToKilograms(massLb)),
  trailerDragAreaM2: TRAILER_SHAPES.boat.dragAreaM2,
})
const box = (massLb: number): Load => ({
  trailerMassKg: Math.round(poundsToKilograms(massLb)),
  trailerDragAreaM2: TRAILER_SHAPES.box.dragAreaM2,
})
const flat = (massLb: number): Load => ({
  trailerMassKg: Math.round(poundsToKilograms(massLb)),
  trailerDragAreaM2: TRAILER_SHAPES.flat.dragAreaM2,
})

function partNamed(name: string) {
  const part = DEMO_CATALOGUE.find((one) => one.name === name)
  if (part === undefined || part.construction === 'in-tank')
    throw new RangeError(`no demo cooler in air named ${name}`)
  return part
}

/** The build as it is with one more part, last in the loop. */
function withPart(build: Build, partName: string): SetupDraft {
  const cooler = toModelCooler(partNamed(partName), 'ahead-of-condenser')
  return {
    name: `With ${partName}`,
    kind: 'custom',
    change: { coolers: [...build.cooling.coolers, cooler] },
  }
}

const SHOP_ONE: DemoTruck[] = [
  {
    name: 'Short 4×4 on 33s, boat to the lake',
    stage: 'call',
    customer: { name: 'Orrin Pallister', phone: '+1 555 0101', email: 'orrin.pallister@example.test' },
    facts: {
      archetype: 'classic-4x4',
      truckMassKg: Math.round(poundsToKilograms(5100)),
      trailerMassKg: Math.round(poundsToKilograms(3400)),
      trailerShape: 'boat',
      weightSource: 'guess',
      tireCode: '33x12.50R15',
      axleRatio: 4.1,
      lockupProven: 'unknown',
      hill: { grade: 0.05, lengthM: Math.round(milesToMeters(3)), speedMps: mph(45) },
      ambientC: 35,
      altitudeM: Math.round(feetToMeters(900)),
      coolers: { inTank: true, extras: [] },
    },
    duties: [{ key: 'boat-ramp', load: boat(3400) }],
  },
  {
    name: 'One-ton diesel, two horses and hay',
    stage: 'sized',
    customer: { name: 'Maribel Tansley', phone: '+1 555 0102', email: 'maribel.tansley@example.test' },
    facts: {
      archetype: 'diesel-pickup',
      truckMassKg: Math.round(poundsToKilograms(8450)),
      trailerMassKg: Math.round(poundsToKilograms(11_800)),
      trailerShape: 'box',
      weightSource: 'scale-ticket',
      tireCode: 'LT275/70R18',
      axleRatio: 3.73,
      lockupProven: 'yes',
      hill: { grade: 0.06, lengthM: Math.round(milesToMeters(7)), speedMps: mph(45) },
      ambientC: 38,
      altitudeM: Math.round(feetToMeters(4200)),
      coolers: { inTank: true, extras: [{ kind: 'stock' }] },
    },
    known: [
      { path: 'engine.peakTorqueNm', value: 1095, typed: '808', unit: 'lb·ft', origin: 'maker' },
      { path: 'converter.stallRpm', value: 1920, typed: '1920', unit: 'rev/min', origin: 'measured' },
    ],
    control: {
      generationsMatch: 'yes',
      lockupCommand: 'controller',
      loadSignal: 'yes',
      brakeSwitchWired: 'yes',
    },
    duties: [{ key: 'rating-grade', load: box(11_800), first: true }],
  },
  {
    name: 'Mid-size V6 with a travel trailer',
    stage: 'quoted',
    customer: {
      name: 'Desmond Quillfeather',
      phone: '+1 555 0103',
      email: 'desmond.quillfeather@example.test',
    },
    facts: {
      archetype: 'midsize-4x4',
      truckMassKg: Math.round(poundsToKilograms(5250)),
      trailerMassKg: Math.round(poundsToKilograms(4000)),
      trailerShape: 'box',
      weightSource: 'placard',
      tireCode: '265/70R17',
      axleRatio: 3.73,
      lockupProven: 'unknown',
      hill: { grade: 0.06, lengthM: Math.round(milesToMeters(5)), speedMps: mph(45) },
      ambientC: 38,
      altitudeM: Math.round(feetToMeters(3600)),
      coolers: { inTank: true, extras: [{ kind: 'stock' }] },
    },
    control: { generationsMatch: 'yes', lockupCommand: 'controller' },
    duties: [
      { key: 'august-pass', load: box(4000), first: true },
      { key: 'highway-tow', load: box(4000) },
    ],
    considered: (build) => [
      withPart(build, 'Plate core 280 × 190 × 38'),
      withPart(build, 'Thick plate core 381 × 203 × 51'),
    ],
  },
  {
    name: 'Rock crawler, four-speed swap',
    stage: 'in-work',
    customer: { name: 'Tamsin Okoro-Vale', phone: '+1 555 0104', email: 'tamsin.okoro-vale@example.test' },
    facts: {
      archetype: 'classic-4x4',
      truckMassKg: Math.round(poundsToKilograms(5480)),
      trailerMassKg: 0,
      trailerShape: 'none',
      weightSource: 'scale-ticket',
      tireCode: '35x12.50R15',
      axleRatio: 4.88,
      lockupProven: 'no',
      hill: { grade: 0.08, lengthM: Math.round(milesToMeters(2)), speedMps: mph(35) },
      ambientC: 34,
      altitudeM: Math.round(feetToMeters(5600)),
      coolers: {
        inTank: false,
        extras: [{ kind: 'generic', construction: 'tube-fin', position: 'remote', size: 'medium' }],
      },
    },
    known: [
      { path: 'converter.stallRpm', value: 2100, typed: '2100', unit: 'rev/min', origin: 'measured' },
      { path: 'transferCase.lowRatio', value: 4, typed: '4.0', origin: 'maker' },
      { path: 'cooling.lines.innerDiameterM', value: 0.0095, typed: '3/8', unit: 'in', origin: 'measured' },
      { path: 'cooling.lines.lengthM', value: 6.4, typed: '21', unit: 'ft', origin: 'measured' },
    ],
    control: { generationsMatch: 'no', lockupCommand: 'switch', loadSignal: 'no', brakeSwitchWired: 'no' },
    duties: [
      { key: 'rocks-low-range', load: { cargoMassKg: 90 }, first: true },
      { key: 'hot-town', load: {} },
    ],
    considered: () => [
      {
        name: 'Large plate-fin core with a fan',
        kind: 'custom',
        change: {
          coolers: [
            createGenericCooler({ construction: 'plate-fin', position: 'remote', size: 'large', fan: true }),
          ],
        },
      },
      { name: 'Lock-up switch wired and proven', kind: 'custom', change: { lockup: 'always' } },
    ],
  },
  {
    name: 'Diesel service truck over the divide',
    stage: 'road-test',
    customer: {
      name: 'Birchwater Well Service',
      phone: '+1 555 0105',
      email: 'office@birchwater.example.test',
    },
    facts: {
      archetype: 'diesel-pickup',
      truckMassKg: Math.round(poundsToKilograms(10_150)),
      trailerMassKg: Math.round(poundsToKilograms(5200)),
      trailerShape: 'flat',
      weightSource: 'scale-ticket',
      tireCode: 'LT285/75R18',
      axleRatio: 4.1,
      lockupProven: 'yes',
      hill: { grade: 0.07, lengthM: Math.round(milesToMeters(6)), speedMps: mph(40) },
      ambientC: 31,
      altitudeM: Math.round(feetToMeters(8100)),
      coolers: { inTank: true, extras: [{ kind: 'stock' }] },
    },
    known: [
      { path: 'converter.stallRpm', value: 1870, typed: '1870', unit: 'rev/min', origin: 'measured' },
      { path: 'cooling.feed.openFlowM3S', value: 2.4e-4, typed: '3.8', unit: 'gal/min', origin: 'measured' },
      { path: 'cooling.stack.blockedFraction', value: 0.1, typed: '10', unit: '%', origin: 'measured' },
    ],
    control: {
      generationsMatch: 'yes',
      lockupCommand: 'controller',
      loadSignal: 'yes',
      brakeSwitchWired: 'yes',
    },
    duties: [{ key: 'long-descent', load: flat(5200) }],
  },
  {
    name: 'Mid-size for dunes and desert tracks',
    stage: 'done',
    customer: {
      name: 'Calloway Brandt-Ruiz',
      phone: '+1 555 0106',
      email: 'calloway.brandt-ruiz@example.test',
    },
    facts: {
      archetype: 'midsize-4x4',
      truckMassKg: Math.round(poundsToKilograms(5620)),
      trailerMassKg: 0,
      trailerShape: 'none',
      weightSource: 'scale-ticket',
      tireCode: 'LT285/70R17',
      axleRatio: 4.56,
      lockupProven: 'yes',
      hill: { grade: 0.07, lengthM: Math.round(milesToMeters(4)), speedMps: mph(55) },
      ambientC: 43,
      altitudeM: Math.round(feetToMeters(600)),
      coolers: {
        inTank: true,
        extras: [
          {
            kind: 'catalogue',
            coolerId: partNamed('Deep bar core 406 × 191 × 51').id,
            position: 'ahead-of-condenser',
          },
        ],
      },
    },
    known: [
      { path: 'converter.stallRpm', value: 2200, typed: '2200', unit: 'rev/min', origin: 'measured' },
      { path: 'cooling.feed.openFlowM3S', value: 1.7e-4, typed: '2.7', unit: 'gal/min', origin: 'measured' },
    ],
    control: {
      generationsMatch: 'yes',
      lockupCommand: 'controller',
      loadSignal: 'yes',
      brakeSwitchWired: 'yes',
    },
    duties: [
      { key: 'soft-sand', load: { cargoMassKg: 120 }, first: true },
      { key: 'winter-short-trips', load: {} },
    ],
  },
]

const SHOP_TWO: DemoTruck[] = [
  {
    name: 'Town 4×4 that runs hot in traffic',
    stage: 'sized',
    customer: {
      name: 'Lettice Farrow-Hale',
      phone: '+1 555 0151',
      email: 'lettice.farrow-hale@example.test',
    },
    facts: {
      archetype: 'classic-4x4',
      truckMassKg: Math.round(poundsToKilograms(4900)),
      trailerMassKg: 0,
      trailerShape: 'none',
      weightSource: 'placard',
      tireCode: '31x10.50R15',
      axleRatio: 3.73,
      lockupProven: 'yes',
      hill: { grade: 0.06, lengthM: Math.round(milesToMeters(3)), speedMps: mph(50) },
      ambientC: 43,
      altitudeM: Math.round(feetToMeters(1200)),
      coolers: { inTank: true, extras: [] },
    },
    known: [
      { path: 'cooling.stack.blockedFraction', value: 0.25, typed: '25', unit: '%', origin: 'measured' },
    ],
    control: { lockupCommand: 'pressure' },
    duties: [{ key: 'hot-town', load: {}, first: true }],
  },
  {
    name: 'Diesel hauler, flat deck',
    stage: 'call',
    customer: { name: 'Harlan Vossbrink', phone: '+1 555 0152', email: 'harlan.vossbrink@example.test' },
    facts: {
      archetype: 'diesel-pickup',
      truckMassKg: Math.round(poundsToKilograms(8100)),
      trailerMassKg: Math.round(poundsToKilograms(13_500)),
      trailerShape: 'flat',
      weightSource: 'guess',
      tireCode: 'LT275/70R18',
      axleRatio: 3.73,
      lockupProven: 'unknown',
      hill: { grade: 0.07, lengthM: Math.round(milesToMeters(6)), speedMps: mph(45) },
      ambientC: 36,
      altitudeM: Math.round(feetToMeters(1500)),
      coolers: { inTank: true, extras: [{ kind: 'stock' }] },
    },
    duties: [{ key: 'highway-tow', load: flat(13_500) }],
  },
]

function createDemoBuild(truck: DemoTruck): DemoBuild {
  const draft = createSheetFromFacts(truck.facts, { catalogue: DEMO_CATALOGUE })
  const sheet = (truck.known ?? []).reduce(setSheetValue, draft.sheet)
  const build = deriveBuild(sheet)
  const scenarioOf = ({ key, load }: DemoTruck['duties'][number]): ScenarioDraft => {
    const { name, duty } = getDemoDuty(key)
    return { name, load, duty }
  }
  const scenarios = [
    ...truck.duties.filter(({ first }) => first === true).map(scenarioOf),
    draft.scenario,
    ...truck.duties.filter(({ first }) => first !== true).map(scenarioOf),
  ]
  return {
    name: truck.name,
    stage: truck.stage,
    customer: truck.customer,
    sheet,
    control: { ...draft.control, ...truck.control },
    limits: draft.limits,
    scenarios,
    setups: [
      ...createStandingSetups({ build, scenario: scenarios[0] ?? draft.scenario }),
      ...(truck.considered?.(build) ?? []),
    ],
  }
}

/** The builds of a demo shop: six at different stages in the first, two in the second. */
export function createDemoBuilds(shop: 'one' | 'two'): DemoBuild[] {
  return (shop === 'one' ? SHOP_ONE : SHOP_TWO).map(createDemoBuild)
}
