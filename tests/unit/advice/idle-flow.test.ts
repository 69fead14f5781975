import { describe, expect, it } from 'vitest'
import { predictIdleFlow, QUART_LIMITS_S } from '../../../shared/advice'
import { FLOW_TEST_OIL_C } from '../../../shared/advice/idle-flow'
import { ARCHETYPES } from '../../../shared/build-sheet/archetypes'
import { coolerPressureDrop, makeCoolerUnit } from '../../../shared/heat/coolers'
import { kinematicViscosity, makeOil, oilDensity } from '../../../shared/heat/fluids'
import { churchillFrictionFactor } from '../../../shared/heat/friction'
import type { HeatInput } from '../../../shared/schemas/heat-input'

const inputOf = (archetype: (typeof ARCHETYPES)[number]): HeatInput => ({
  build: archetype.build,
  duty: { ambientC: 20, altitudeM: 0, segments: [{ kind: 'idle', durationS: 60 }] },
})

describe.each(ARCHETYPES)('the flow test of $id', (archetype) => {
  const input = inputOf(archetype)
  const { flowM3S, quartS } = predictIdleFlow(input)

  it('uses up the pressure of the feed at idle', () => {
    const { cooling, transmission, engine } = archetype.build
    const oil = makeOil(transmission.fluid)
    const viscosity = kinematicViscosity(oil, FLOW_TEST_OIL_C)
    const { innerDiameterM: d, lengthM, fittingsK = 6, roughnessM = 1e-5 } = cooling.lines
    const velocity = flowM3S / ((Math.PI / 4) * d * d)
    const reynolds = (velocity * d) / (viscosity * 1e-6)
    const friction = churchillFrictionFactor(reynolds, roughnessM / d)
    const line =
      ((friction * lengthM) / d + fittingsK) * 0.5 * oilDensity(oil, FLOW_TEST_OIL_C) * velocity * velocity
    const coolers = cooling.coolers.reduce(
      (sum, cooler) => sum + coolerPressureDrop(makeCoolerUnit(oil, cooler, ''), flowM3S, viscosity),
      0,
    )
    const feed = cooling.feed!
    const orifice = feed.pressureMaxPa * (flowM3S / feed.openFlowM3S) ** 2
    const available = feed.pressureMaxPa * Math.min(1, engine.idleRpm / feed.saturationRpm)
    // The loop is read from a table; 1 % in pressure is half a percent in flow.
    expect(Math.abs((orifice + line + coolers) / available - 1)).toBeLessThan(0.01)
  })

  it('passes in a stock truck', () => {
    expect(quartS).toBeLessThan(QUART_LIMITS_S.bulletin)
    // 1 US quart = 231/4 in³ (NIST SP 811, appendix B.8).
    expect(quartS * flowM3S).toBeCloseTo((231 / 4) * 0.0254 ** 3, 12)
  })
})

it('gives the quart in 20 s that is three quarters of a gallon a minute', () => {
  // Common practice: 0.75 gal/min for a quart in 20 s, 0.5 for 30 s. A gallon is four quarts: arithmetic.
  expect((60 / QUART_LIMITS_S.bulletin) * 0.25).toBe(0.75)
  expect((60 / QUART_LIMITS_S.manual) * 0.25).toBe(0.5)
})
