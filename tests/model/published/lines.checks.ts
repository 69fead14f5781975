import { churchillFrictionFactor, linePressureDrop, type Line } from '#shared/heat/friction'
import { litersPerMinuteToCubicMetersPerSecond, psiToPascals } from '#shared/units/conversions'
import {
  expectAbsolute,
  expectRelative,
  expected,
  input,
  type PublishedEntry,
  type TopicChecks,
} from '../../support/published'

/** Churchill against its own published values, and against Colebrook, which it approximates. */
function friction(measuredDeviation: number) {
  return (entry: PublishedEntry) => {
    const ours = churchillFrictionFactor(input(entry, 'Re'), input(entry, 'e_over_D'))
    expectRelative(ours, expected(entry, 'f_churchill'), entry.tolerance, 'Churchill')
    expectAbsolute(ours / expected(entry, 'f_colebrook') - 1, measuredDeviation, 0.0001, 'against Colebrook')
  }
}

const flowAt = (line: Line, velocity: number) => velocity * 0.25 * Math.PI * line.innerDiameterM ** 2

const plain = (innerDiameterM: number, lengthM: number, fittingsK = 0, roughnessM = 0): Line => ({
  innerDiameterM,
  lengthM,
  fittingsK,
  roughnessM,
})

function coolerLine(entry: PublishedEntry) {
  const line = plain(input(entry, 'D_m'), input(entry, 'L_m'), 0, input(entry, 'eps_m'))
  const flow = litersPerMinuteToCubicMetersPerSecond(input(entry, 'Q_L_min'))
  const viscosity = input(entry, 'nu_m2_s')
  expectRelative(flow / flowAt(line, 1), expected(entry, 'V_m_s'), entry.tolerance, 'velocity')
  expectRelative(
    churchillFrictionFactor(expected(entry, 'Re'), input(entry, 'eps_m') / line.innerDiameterM),
    expected(entry, 'f_churchill'),
    1e-5,
    'friction factor',
  )
  expectRelative(
    linePressureDrop(line, flow, input(entry, 'rho'), viscosity * 1e6),
    expected(entry, 'dp_Pa'),
    entry.tolerance,
    'pressure drop',
  )
}

/** Laminar flow: the friction factor of all regimes must give Hagen-Poiseuille. */
function laminar(viscosityOf: (entry: PublishedEntry) => number) {
  return (entry: PublishedEntry) => {
    const line = plain(input(entry, 'D_m'), input(entry, 'L_m'))
    const flow = flowAt(line, input(entry, 'V_m_s'))
    const viscosity = viscosityOf(entry)
    expectRelative(
      (input(entry, 'V_m_s') * line.innerDiameterM) / viscosity,
      expected(entry, 'Re'),
      entry.tolerance,
      'Reynolds number',
    )
    const drop = linePressureDrop(line, flow, input(entry, 'rho'), viscosity * 1e6)
    expectRelative(drop, expected(entry, 'dp_Pa'), entry.tolerance, 'pressure drop')
    if (entry.expected['P_W'] !== undefined)
      expectRelative(drop * flow, expected(entry, 'P_W'), entry.tolerance, 'pumping power')
    if (entry.expected['book_dp_psi'] !== undefined)
      expectRelative(drop, psiToPascals(expected(entry, 'book_dp_psi')), 0.005, 'pressure drop of the book')
  }
}

export const lines: TopicChecks = {
  checks: {
    'ff-10000-0': friction(0.0039),
    'ff-100000-0': friction(-0.0064),
    'ff-100000-0.0001': friction(-0.0028),
    'ff-1e+06-0.0001': friction(0.005),
    'pipe-2': laminar((entry) => input(entry, 'mu') / input(entry, 'rho')),
    'pipe-oil-1': laminar((entry) => input(entry, 'nu_m2_s')),
    'pipe-oil-2': laminar((entry) => input(entry, 'nu_m2_s')),
    // A globe valve: its loss coefficient, and the length of line that would lose as much.
    'pipe-oil-3': (entry) => {
      const density = 1000 * input(entry, 'SG')
      const viscosity = input(entry, 'nu_m2_s') * 1e6
      const flow = input(entry, 'Q_m3_s')
      const valve = linePressureDrop(
        plain(input(entry, 'D_m'), 0, input(entry, 'K_globe')),
        flow,
        density,
        viscosity,
      )
      expectRelative(valve / (density * 9.80665), expected(entry, 'h_L_m'), entry.tolerance, 'head lost')
      const line = linePressureDrop(
        plain(input(entry, 'D_m'), expected(entry, 'L_eq_m')),
        flow,
        density,
        viscosity,
      )
      expectRelative(line, valve, entry.tolerance, 'loss of the equivalent length')
    },
    'pipe-atf-100C': coolerLine,
    'pipe-atf-40C': coolerLine,
    'pipe-atf-20C': coolerLine,
  },
  notApplicable: {
    'prv-heat':
      'throttling oil at constant power is not a part of the model: the pump is charged whole at its shaft',
  },
}
