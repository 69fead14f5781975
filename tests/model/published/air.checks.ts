import {
  AIR_HEAT_CAPACITY_J_KG_K,
  airDensity,
  naturalTorqueShare,
  pressureAtAltitude,
} from '#shared/heat/air'
import { feetToMeters, pascalsToPsi } from '#shared/units/conversions'
import {
  expectDeviation,
  expectRelative,
  expected,
  input,
  type PublishedEntry,
  type TopicChecks,
} from '../../support/published'

const NO_TRANSPORT = 'the model has no viscosity or conductivity of air: coolers are scaled from ratings'

/** The standard atmosphere at a geopotential altitude. The duty gives the air temperature, so T is only an input here. */
function atmosphere(entry: PublishedEntry) {
  const pressure = pressureAtAltitude(input(entry, 'H_geopotential_m'))
  expectRelative(pressure, expected(entry, 'p_Pa'), entry.tolerance, 'pressure')
  // 287.05 for 287.05287 J/(kg K) alone is 1.0e-5.
  expectRelative(
    airDensity(pressure, expected(entry, 'T_K') - 273.15),
    expected(entry, 'rho_kg_m3'),
    2e-5,
    'density',
  )
}

/** Table A.4 quotes density at 1 bar; the model's heat capacity is one constant. */
function tableA4(measuredHeatCapacity: number) {
  return (entry: PublishedEntry) => {
    expectRelative(
      airDensity(1e5, input(entry, 'T_K') - 273.15),
      expected(entry, 'rho_table_kg_m3'),
      entry.tolerance,
      'density',
    )
    expectDeviation(
      AIR_HEAT_CAPACITY_J_KG_K,
      expected(entry, 'cp_J_kgK'),
      measuredHeatCapacity,
      'heat capacity',
    )
  }
}

function derate(entry: PublishedEntry) {
  const factor = expected(entry, 'cf')
  const share = naturalTorqueShare(input(entry, 'p_Pa'), input(entry, 'T_C'))
  expectRelative(share, Math.min(1, 1 / factor), entry.tolerance, 'share of torque kept')
}

export const air: TopicChecks = {
  checks: {
    'atm-0': atmosphere,
    'atm-1000': atmosphere,
    'atm-2000': atmosphere,
    'atm-3000': atmosphere,
    'atm-ip-1': (entry) =>
      expectRelative(
        pascalsToPsi(pressureAtAltitude(feetToMeters(input(entry, 'Z_ft')))),
        expected(entry, 'p_psia'),
        entry.tolerance,
        'pressure',
      ),
    'airrho-2': (entry) =>
      expectRelative(
        airDensity(input(entry, 'p_Pa'), input(entry, 'T_K') - 273.15),
        expected(entry, 'rho_dry_kg_m3'),
        entry.tolerance,
        'density',
      ),
    // The model leaves humidity out: its dry air is 1.0 % denser than this hot, damp one.
    'airrho-moist-2': (entry) => {
      const pressure = pressureAtAltitude(input(entry, 'altitude_m'))
      expectRelative(pressure, expected(entry, 'p_Pa'), entry.tolerance, 'pressure')
      expectDeviation(
        airDensity(pressure, input(entry, 'T_C')),
        expected(entry, 'rho_moist_kg_m3'),
        0.01,
        'density',
      )
    },
    'air-a4-250': tableA4(0),
    'air-a4-350': tableA4(-0.003),
    'air-a4-400': tableA4(-0.0079),
    'j1349-reference': derate,
    'j1349-1': derate,
    'j1349-2': derate,
    'j1349-3': derate,
  },
  notApplicable: {
    'air-suth-250': NO_TRANSPORT,
    'air-suth-300': NO_TRANSPORT,
    'air-suth-350': NO_TRANSPORT,
    'air-suth-400': NO_TRANSPORT,
  },
}
