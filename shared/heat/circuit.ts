import { RATING_AIR_DENSITY_KG_M3 } from './air'
import { emptyAirSide, updateAirSide } from './air-side'
import type { AirSide } from './air-side'
import { makeChain, solveChain } from './chain'
import type { Chain } from './chain'
import type { CoolingSystem, Window } from './cooling-system'
import { airCapacityRate } from './coolers'
import { exchangerConductance } from './effectiveness'
import type { ExchangerConductance } from './effectiveness'
import { COOLANT_HEAT_CAPACITY_J_M3_K } from './fluids'
import { makeLoopState } from './loop-flow'
import type { LoopSource, LoopState } from './loop-flow'

/** Oil loop, coolers and radiator solved together at one instant. */

/** Coolant flow rises with engine speed up to this multiple of its rating. Judgement. */
const LARGEST_COOLANT_FACTOR = 1.5
/** Split of the radiator's thermal resistance and its exponents: air 0.8 (to the -0.5), coolant 0.2 (to the -0.8). Judgement. */
const RADIATOR_AIR_SHARE = 0.8
const RADIATOR_COOLANT_EXPONENT = 0.8
/** Step of temperature in the slopes [K]. */
const NUDGE_K = 1e-3

/** How far a wax element has opened, 0 to 1. */
export function openShare(window: Window, tempC: number): number {
  return Math.min(1, Math.max(0, (tempC - window.openC) / (window.fullC - window.openC)))
}

/** Opening per kelvin; 0 where it is shut or fully open. */
function openSlope(window: Window, share: number): number {
  return share > 0 && share < 1 ? 1 / (window.fullC - window.openC) : 0
}

const power = (base: number, exponent: number) => Math.exp(exponent * Math.log(base))

/** How the heats of the circuit answer to sump, hot line and coolant, in this order [W/K]; and the loop to the sump. */
export interface CircuitSlopes {
  coolers: Float64Array
  tank: Float64Array
  radiator: Float64Array
  oilCapacityRate: number
  spinFactor: number
}

/**
 * One operating point's cooling circuit. `configure` sets the point, `evaluate` solves it for three temperatures and
 * leaves the answer in the fields. Conductances depend on the sump temperature and the bypass (oil side) and on the
 * thermostat (coolant side) only, and are kept from call to call while those do not change; what is left is linear.
 */
export class Circuit {
  readonly loopState: LoopState
  readonly air: AirSide
  returnC = 0
  thermostatOpen = 0
  bypassShare = 1
  readonly chain: Chain
  readonly slopes: CircuitSlopes = {
    coolers: new Float64Array(3),
    tank: new Float64Array(3),
    radiator: new Float64Array(3),
    oilCapacityRate: 0,
    spinFactor: 0,
  }

  private readonly system: CoolingSystem
  private source: LoopSource | undefined
  private readonly count: number
  private readonly hasTank: boolean
  private coolantFactor = 0
  private fullCoolantRate = 0
  /** Sink-side resistance and capacity rate per cooler: air now, coolant at full thermostat. */
  private readonly fullSinkTerm: Float64Array
  private readonly airRate: Float64Array
  private radiatorAirTerm = 0
  private radiatorFullCoolantTerm = 0
  /** Per cooler: scaled UA at the rating, oil side's share of its resistance, exponent of flow in it. */
  private readonly uaRated: Float64Array
  private readonly oilShare: Float64Array
  private readonly flowExponent: Float64Array
  /** Resistances, conductances and capacity rates as last used, per cooler. */
  private readonly sinkTerm: Float64Array
  private readonly oilTerm: Float64Array
  private readonly ua: Float64Array
  private readonly oilRate: Float64Array
  private coolantPower = 1
  private radiatorUa = 0
  private readonly radiator: ExchangerConductance = {
    conductance: 0,
    overUa: 0,
    overRateA: 0,
    overRateB: 0,
  }
  private readonly exchangers: ExchangerConductance[]
  private keptSumpC = NaN
  private usedSumpC = NaN
  private keptBypass = NaN
  private keptOpen = NaN
  private readonly nudged: Chain
  private readonly nudgedLoop: LoopState

  constructor(system: CoolingSystem) {
    const { coolers, loop } = system
    this.system = system
    this.count = coolers.length
    this.air = emptyAirSide(this.count)
    this.loopState = makeLoopState(this.count)
    this.nudgedLoop = makeLoopState(this.count)
    this.fullSinkTerm = new Float64Array(this.count)
    this.airRate = new Float64Array(this.count)
    this.uaRated = Float64Array.from(coolers, (cooler) => cooler.uaRatedWK * system.coolerScale)
    this.oilShare = Float64Array.from(coolers, (cooler) => 1 - cooler.airShare)
    this.flowExponent = Float64Array.from(coolers, (cooler) => cooler.law.flowExponent)
    this.sinkTerm = new Float64Array(this.count)
    this.oilTerm = new Float64Array(this.count)
    this.ua = new Float64Array(this.count)
    this.oilRate = new Float64Array(this.count)
    this.exchangers = coolers.map(() => ({
      conductance: 0,
      overUa: 0,
      overRateA: 0,
      overRateB: 0,
    }))
    const isTank = Uint8Array.from(coolers, (cooler) => (cooler.position === 'radiator-tank' ? 1 : 0))
    const inStack = Uint8Array.from(coolers, (cooler) => (cooler.inStack ? 1 : 0))
    const opensGroup = new Uint8Array(this.count)
    for (const group of loop.groups) opensGroup[group[0]!] = 1
    this.hasTank = isTank.includes(1)
    this.chain = makeChain(isTank, inStack, opensGroup, this.air.coolerAirC)
    this.nudged = makeChain(isTank, inStack, opensGroup, this.air.coolerAirC)
  }

  /**
   * Sets the operating point.
   * @param airSpeed - max(0, v + w) [m/s]
   * @param engineSpeed - [rad/s]
   * @param source - loop states over sump temperature at the point's feed share
   */
  configure(airSpeed: number, engineSpeed: number, source: LoopSource): void {
    const { site, cooling, coolers, radiator, condenserW } = this.system
    const { air, chain, nudged } = this
    this.source = source
    this.keptSumpC = this.usedSumpC = this.keptBypass = this.keptOpen = NaN
    updateAirSide(air, site, cooling, coolers, condenserW, airSpeed, engineSpeed)
    chain.stackRate = nudged.stackRate = air.stackCapacityRate
    chain.behindCondenserC = nudged.behindCondenserC = air.behindCondenserC
    this.coolantFactor = Math.min(LARGEST_COOLANT_FACTOR, engineSpeed / radiator.pumpSpeed)
    const fullFlow = this.coolantFactor * radiator.ratedCoolantFlowM3S
    this.fullCoolantRate = fullFlow * COOLANT_HEAT_CAPACITY_J_M3_K
    const densityRatio = site.airDensityKgM3 / RATING_AIR_DENSITY_KG_M3
    for (let index = 0; index < this.count; index++) {
      const cooler = coolers[index]!
      const tank = chain.isTank[index] === 1
      const velocity = air.coolerVelocityMps[index]!
      const ratio = tank
        ? fullFlow / cooler.ratedCoolantFlowM3S
        : (velocity * densityRatio) / cooler.ratedAirVelocityMps
      this.fullSinkTerm[index] = cooler.airShare * power(ratio, -cooler.law.airExponent)
      this.airRate[index] = tank ? 0 : airCapacityRate(site.airDensityKgM3, cooler.faceAreaM2, velocity)
    }
    this.radiatorAirTerm =
      RADIATOR_AIR_SHARE / Math.sqrt((air.faceVelocityMps * densityRatio) / radiator.ratedAirVelocityMps)
    this.radiatorFullCoolantTerm =
      (1 - RADIATOR_AIR_SHARE) * power(this.coolantFactor, -RADIATOR_COOLANT_EXPONENT)
  }

  /** Reads flow and oil properties at a sump temperature into `loopState`. */
  readLoop(sumpC: number): void {
    if (sumpC === this.keptSumpC) return
    this.source?.read(sumpC, this.loopState)
    this.keptSumpC = sumpC
  }

  /**
   * Solves oil loop, coolers and radiator.
   * @param sumpC - sump [°C]
   * @param inletC - hot line [°C]
   * @param coolantC - coolant [°C]
   */
  evaluate(sumpC: number, inletC: number, coolantC: number): void {
    this.readLoop(sumpC)
    this.solve(sumpC, inletC, coolantC)
  }

  /** The same with the loop as last read, for temperatures a moment later. */
  evaluateWithLoopKept(inletC: number, coolantC: number): void {
    this.solve(this.keptSumpC, inletC, coolantC)
  }

  private solve(sumpC: number, inletC: number, coolantC: number): void {
    const { bypass, radiator } = this.system
    const { chain } = this
    const share = bypass === null ? 1 : openShare(bypass, inletC)
    const open = openShare(radiator.thermostat, coolantC)
    const oilChanged = sumpC !== this.usedSumpC || share !== this.keptBypass
    const openChanged = open !== this.keptOpen
    this.bypassShare = share
    this.thermostatOpen = open
    if (openChanged) this.updateRadiator(open)
    if (oilChanged) this.updateOilSide(share)
    if (this.hasTank && (oilChanged || openChanged)) this.updateTanks()
    this.usedSumpC = sumpC
    this.keptBypass = share
    this.keptOpen = open
    solveChain(chain, inletC, coolantC)
    this.returnC = inletC - chain.heatCoolersW / this.loopState.oilCapacityRate
  }

  private updateRadiator(open: number): void {
    const { chain } = this
    chain.coolantRate = open * this.fullCoolantRate
    if (open === 0) {
      chain.radiatorConductance = 0
      return
    }
    this.coolantPower = open === 1 ? 1 : power(open, -RADIATOR_COOLANT_EXPONENT)
    this.radiatorUa =
      this.system.radiator.uaRatedWK /
      (this.radiatorAirTerm + this.radiatorFullCoolantTerm * this.coolantPower)
    exchangerConductance(this.radiatorUa, chain.coolantRate, chain.stackRate, this.radiator)
    chain.radiatorConductance = this.radiator.conductance
  }

  /** Oil side of every cooler, and the conductance of those in air. */
  private updateOilSide(share: number): void {
    const { chain, loopState, oilRate, oilTerm, sinkTerm } = this
    const rate = loopState.oilCapacityRate * share
    const throttled = share > 0 && share < 1
    chain.oilRate = rate
    for (let index = 0; index < this.count; index++) {
      oilRate[index] = rate * loopState.shares[index]!
      const term = this.oilShare[index]! * loopState.oilSide[index]!
      oilTerm[index] = throttled ? term * power(share, -this.flowExponent[index]!) : term
      if (chain.isTank[index] === 1) continue
      sinkTerm[index] = this.fullSinkTerm[index]!
      this.updateConductance(index, this.airRate[index]!)
    }
  }

  private updateTanks(): void {
    const { chain } = this
    for (let index = 0; index < this.count; index++) {
      if (chain.isTank[index] !== 1) continue
      this.sinkTerm[index] = this.fullSinkTerm[index]! * this.coolantPower
      this.updateConductance(index, chain.coolantRate)
    }
  }

  private updateConductance(index: number, sinkRate: number): void {
    const { system, chain } = this
    const oilRate = this.oilRate[index]!
    const ua =
      (system.coolers[index]!.uaRatedWK * system.coolerScale) / (this.sinkTerm[index]! + this.oilTerm[index]!)
    this.ua[index] = ua
    if (oilRate > 0 && sinkRate > 0) {
      const exchanger = this.exchangers[index]!
      exchangerConductance(ua, oilRate, sinkRate, exchanger)
      chain.conductance[index] = exchanger.conductance
    } else chain.conductance[index] = 0
  }

  /**
   * Slopes of the heats at the temperatures last evaluated: conductances are moved along their tangents and the chain
   * is solved again, so that no transcendental function is asked a second time.
   */
  updateSlopes(sumpC: number, inletC: number, coolantC: number): void {
    const { chain, nudged, loopState, nudgedLoop, slopes } = this
    const { bypass, radiator } = this.system
    nudgedLoop.volumeFlow = loopState.volumeFlow
    this.source?.read(sumpC + NUDGE_K, nudgedLoop)
    slopes.oilCapacityRate = (nudgedLoop.oilCapacityRate - loopState.oilCapacityRate) / NUDGE_K
    slopes.spinFactor = (nudgedLoop.spinFactor - loopState.spinFactor) / NUDGE_K
    nudged.coolantRate = chain.coolantRate
    nudged.radiatorConductance = chain.radiatorConductance
    const bypassSlope = bypass === null ? 0 : openSlope(bypass, this.bypassShare)
    const openingSlope = openSlope(radiator.thermostat, this.thermostatOpen)
    this.nudgeSump()
    this.bookSlopes(0, inletC, coolantC)
    this.nudgeBypass(NUDGE_K * bypassSlope)
    this.bookSlopes(1, inletC + NUDGE_K, coolantC)
    this.nudgeThermostat(NUDGE_K * openingSlope)
    this.bookSlopes(2, inletC, coolantC + NUDGE_K)
  }

  private bookSlopes(column: number, inletC: number, coolantC: number): void {
    const { chain, nudged, slopes } = this
    solveChain(nudged, inletC, coolantC)
    slopes.coolers[column] = (nudged.heatCoolersW - chain.heatCoolersW) / NUDGE_K
    slopes.tank[column] = (nudged.tankHeatW - chain.tankHeatW) / NUDGE_K
    slopes.radiator[column] = (nudged.radiatorHeatW - chain.radiatorHeatW) / NUDGE_K
  }

  /** Sump a moment warmer: flow, oil-side resistance and capacity rate of every cooler move. */
  private nudgeSump(): void {
    const { chain, nudged, loopState, nudgedLoop } = this
    const share = this.bypassShare
    nudged.oilRate = nudgedLoop.oilCapacityRate * share
    for (let index = 0; index < this.count; index++) {
      const termStep = this.oilTerm[index]! * (nudgedLoop.oilSide[index]! / loopState.oilSide[index]! - 1)
      const rateStep = nudged.oilRate * nudgedLoop.shares[index]! - this.oilRate[index]!
      nudged.conductance[index] =
        chain.conductance[index]! + this.conductanceStep(index, termStep, rateStep, 0)
    }
  }

  /** Bypass a moment wider. */
  private nudgeBypass(step: number): void {
    const { chain, nudged } = this
    const share = this.bypassShare
    nudged.oilRate = chain.oilRate
    if (step === 0) {
      nudged.conductance.set(chain.conductance)
      return
    }
    nudged.oilRate *= 1 + step / share
    for (let index = 0; index < this.count; index++) {
      const termStep = (-this.flowExponent[index]! * this.oilTerm[index]! * step) / share
      const rateStep = (this.oilRate[index]! * step) / share
      nudged.conductance[index] =
        chain.conductance[index]! + this.conductanceStep(index, termStep, rateStep, 0)
    }
  }

  /** Thermostat a moment wider: coolant flow through radiator and tanks. */
  private nudgeThermostat(step: number): void {
    const { chain, nudged } = this
    nudged.oilRate = chain.oilRate
    nudged.conductance.set(chain.conductance)
    if (step === 0) return
    const open = this.thermostatOpen
    const rateStep = this.fullCoolantRate * step
    for (let index = 0; index < this.count; index++) {
      if (chain.isTank[index] !== 1) continue
      const termStep = (-this.system.coolers[index]!.law.airExponent * this.sinkTerm[index]! * step) / open
      nudged.conductance[index]! += this.conductanceStep(index, termStep, 0, rateStep)
    }
    nudged.coolantRate = chain.coolantRate + rateStep
    const termStep =
      -RADIATOR_COOLANT_EXPONENT * this.radiatorFullCoolantTerm * this.coolantPower * (step / open)
    const uaStep = (-this.radiatorUa * this.radiatorUa * termStep) / this.system.radiator.uaRatedWK
    nudged.radiatorConductance =
      chain.radiatorConductance + this.radiator.overUa * uaStep + this.radiator.overRateA * rateStep
  }

  /** Change of one cooler's conductance for small changes of its resistance and capacity rates. */
  private conductanceStep(index: number, termStep: number, oilStep: number, sinkStep: number): number {
    const { chain } = this
    if (chain.conductance[index] === 0) return 0
    const ua = this.ua[index]!
    const uaStep = (-ua * ua * termStep) / this.uaRated[index]!
    const exchanger = this.exchangers[index]!
    return exchanger.overUa * uaStep + exchanger.overRateA * oilStep + exchanger.overRateB * sinkStep
  }

  /** Heat of each cooler from oil to its sink [W]. */
  coolerHeats(): number[] {
    const { heatA, heatB, radiatorOutC } = this.chain
    return Array.from(heatA, (a, index) => a + heatB[index]! * radiatorOutC)
  }
}
