import { makePchip, pchipAt } from '#shared/heat/pchip'
import {
  expectAbsolute,
  expecteds,
  inputs,
  type PublishedEntry,
  type TopicChecks,
} from '../../support/published'

function interpolates(entry: PublishedEntry) {
  const curve = makePchip(inputs(entry, 'x'), inputs(entry, 'y'))
  const span = Math.max(...inputs(entry, 'y')) - Math.min(...inputs(entry, 'y'))
  inputs(entry, 'at').forEach((at, index) =>
    expectAbsolute(
      pchipAt(curve, at),
      expecteds(entry, 'y')[index] ?? NaN,
      // SciPy's values carry full precision, the printed ones four decimals.
      entry.evidence === 'computed' ? entry.tolerance * span : entry.tolerance,
      `at ${at}`,
    ),
  )
}

export const interpolation: TopicChecks = {
  checks: {
    'pchip-nag': interpolates,
    'pchip-engine': interpolates,
    'pchip-engine-uneven': interpolates,
    'pchip-flat-and-turn': interpolates,
    'pchip-two-points': interpolates,
    'pchip-converter-capacity': interpolates,
  },
  notApplicable: {},
}
