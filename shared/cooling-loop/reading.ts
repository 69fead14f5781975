import { emptyAirSide, updateAirSide } from '../heat/air-side'
import { oilCapacityRate } from '../heat/coolers'
import { openShare } from '../heat/circuit'
import { makeCoolingSystem } from '../heat/cooling-system'
import { resolveInput } from '../heat/resolve'
import type { SegmentResult, State } from '../heat/types'
import type { HeatInput } from '../schemas/heat-input'
import { groupLoop, markLoop } from './edit'

/** The loop in numbers, at one instant of a drive cycle: what the drawing writes beside its lines. */
export interface LoopReading {
  /** Mark of the loop it was read from: numbers of another are not shown beside it. */
  mark: string
  sumpC: number
  /** The to-cooler line. */
  inletC: number
  returnC: number
  flowM3S: number
  /** Share of the flow that goes through the coolers; less than 1 while a bypass is open. */
  throughShare: number
  /** Oil leaving each group of coolers, before what was bypassed is mixed in. */
  afterGroupC: number[]
  /** Heat each cooler takes from the oil; negative where it warms it. */
  coolerHeatW: number[]
  air: {
    outsideC: number
    /** Ahead of the stack: outside air, warmed by what comes back round at low speed. */
    aheadC: number
    behindCondenserC: number
    /** Reaching the radiator, with the heat of the condenser and of every cooler in the stack. */
    atRadiatorC: number
    underbodyC: number
  }
}

/**
 * Reads the loop of a state the model computed.
 *
 * Equation: T after a group = T before − Σ heat / (share · ρ q c); air behind an exchanger = air before + heat / (ρ A V c).
 *
 * @param input - what was computed
 * @param at - index of the segment the state belongs to, and its result
 * @param state - at that segment's end, or at equilibrium
 * @returns temperatures [°C], heats [W], flow [m³/s]
 * Source: energy balance of each stream; the same properties and air side as the model.
 */
export function readLoop(
  input: HeatInput,
  at: { index: number; segment: Pick<SegmentResult, 'speedMps' | 'engineRpm'> },
  state: State,
): LoopReading {
  const resolved = resolveInput(input)
  const system = makeCoolingSystem(resolved)
  const headwindMps = input.duty.segments[at.index]?.headwindMps ?? 0
  const air = emptyAirSide(system.coolers.length)
  updateAirSide(
    air,
    system.site,
    system.cooling,
    system.coolers,
    system.condenserW,
    Math.max(0, at.segment.speedMps + headwindMps),
    (at.segment.engineRpm * Math.PI) / 30,
  )
  const throughShare = system.bypass === null ? 1 : openShare(system.bypass, state.coolerInletC)
  const through = throughShare * oilCapacityRate(resolved.masses.oil, state.sumpC, state.coolerFlowM3S)
  const heatOf = (index: number) => state.coolerHeatW[index] ?? 0
  let oilC = state.coolerInletC
  const afterGroupC = groupLoop(input.build.cooling.coolers).map((members) => {
    const heatW = members.reduce((sum, index) => sum + heatOf(index), 0)
    if (through > 0) oilC -= heatW / through
    return oilC
  })
  const stackHeatW = system.coolers.reduce(
    (sum, cooler, index) => sum + (cooler.inStack ? heatOf(index) : 0),
    0,
  )
  return {
    mark: markLoop(input.build.cooling.coolers),
    sumpC: state.sumpC,
    inletC: state.coolerInletC,
    returnC: state.coolerReturnC,
    flowM3S: state.coolerFlowM3S,
    throughShare,
    afterGroupC,
    coolerHeatW: [...state.coolerHeatW],
    air: {
      outsideC: system.site.ambientC,
      aheadC: air.stackInC,
      behindCondenserC: air.behindCondenserC,
      atRadiatorC: air.behindCondenserC + stackHeatW / air.stackCapacityRate,
      underbodyC: system.site.underbodyC,
    },
  }
}
