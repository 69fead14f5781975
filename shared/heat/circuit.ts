import { RATING_AIR_DENSITY_KG_M3 } from './air'
import { emptyAirSide, updateAirSide } from './air-side'
import type { AirSide } from './air-side'
import type { CoolingSystem, Window } from './cooling-system'
import { airCapacityRate } from './coolers'
import { crossFlowEffectiveness } from './effectiveness'
import { COOLANT_HEAT_CAPACITY_J_M3_K } from './fluids'
import { makeLoopState } from './loop-flow'
import type { LoopSource, LoopState } from './loop-flow'

/** Oil loop, coolers and radiator solved together at one instant. */

/** Coolant flow rises with engine speed up to this multiple of its rating. Judgement. */
const LARGEST_COOLANT_FACTOR = 1.5
/** Split of the radiator's thermal resistance and its exponents: air 0.8 (^-0.5), coolant 0.2 (^-0.8). Judgement. */
const RADIATOR_AIR_SHARE = 0.8
const RADIATOR_AIR_EXPONENT = 0.5
const RADIATOR_COOLANT_EXPONENT = 0.8

/** How far a wax element has opened, 0 to 1. */
export function openShare(window: Window, tempC: number): number {
  return Math.min(1, Math.max(0, (tempC - window.openC) / (window.fullC - window.openC)))
}

const power = (base: number, exponent: number) => Math.exp(exponent * Math.log(base))

/**
 * One operating point's cooling circuit. `configure` sets the point, `evaluate` solves it for three temperatures and
 * leaves the answer in the fields. Conductances depend on the sump temperature and the bypass (oil side) and on the thermostat (coolant side)
 * only, and are kept from call to call while those do not change; what is left is linear in the temperatures.
 */
export class Circuit {
  /** Heat of each cooler from oil to its sink [W]. */
  readonly coolerHeatW: Float64Array
  readonly loopState: LoopState
  readonly air: AirSide
  heatCoolersW = 0
  tankHeatW = 0
  radiatorHeatW = 0
  returnC = 0
  radiatorOutC = 0
  thermostatOpen = 0
  bypassShare = 1

  private readonly system: CoolingSystem
  private source: LoopSource | undefined
  private coolantFactor = 0
  /** Air-side (or coolant-side, at full thermostat) resistance terms and capacity rates per cooler. */
  private readonly sinkTerm: Float64Array
  private readonly sinkRate: Float64Array
  private radiatorAirTerm = 0
  private radiatorCoolantTerm = 0
  private readonly isTank: Uint8Array
  private readonly inStack: Uint8Array
  private readonly hasTank: boolean
  /** ε C_min of each cooler [W/K]. */
  private readonly conductance: Float64Array
  /** Capacity rate of the oil through each cooler [W/K]. */
  private readonly oilRate: Float64Array
  private keptSumpC = NaN
  private usedSumpC = NaN
  private keptBypass = NaN
  private keptOpen = NaN
  private keptTankOpen = NaN
  private coolantRate = 0
  private coolantPower = 0
  private radiatorConductance = 0

  constructor(system: CoolingSystem) {
    const { coolers } = system
    const count = coolers.length
    this.system = system
    this.air = emptyAirSide(count)
    this.loopState = makeLoopState(count)
    this.coolerHeatW = new Float64Array(count)
    this.conductance = new Float64Array(count)
    this.oilRate = new Float64Array(count)
    this.sinkTerm = new Float64Array(count)
    this.sinkRate = new Float64Array(count)
    this.isTank = Uint8Array.from(coolers, (cooler) => (cooler.position === 'radiator-tank' ? 1 : 0))
    this.inStack = Uint8Array.from(coolers, (cooler) => (cooler.inStack ? 1 : 0))
    this.hasTank = this.isTank.includes(1)
  }

  /**
   * Sets the operating point.
   * @param airSpeed - max(0, v + w) [m/s]
   * @param engineSpeed - [rad/s]
   * @param source - loop states over sump temperature at the point's feed share
   */
  configure(airSpeed: number, engineSpeed: number, source: LoopSource): void {
    const { site, cooling, coolers, radiator, condenserW } = this.system
    const { air } = this
    this.source = source
    this.keptSumpC = this.usedSumpC = this.keptBypass = this.keptOpen = this.keptTankOpen = NaN
    updateAirSide(air, site, cooling, coolers, condenserW, airSpeed, engineSpeed)
    this.coolantFactor = Math.min(LARGEST_COOLANT_FACTOR, engineSpeed / radiator.pumpSpeed)
    const densityRatio = site.airDensityKgM3 / RATING_AIR_DENSITY_KG_M3
    for (let index = 0; index < coolers.length; index++) {
      const cooler = coolers[index]!
      if (this.isTank[index] === 1) {
        const fullFlow = this.coolantFactor * radiator.ratedCoolantFlowM3S
        this.sinkTerm[index] =
          cooler.airShare * power(fullFlow / cooler.ratedCoolantFlowM3S, -cooler.law.airExponent)
        continue
      }
      const velocity = air.coolerVelocityMps[index]!
      this.sinkTerm[index] =
        cooler.airShare *
        power((velocity * densityRatio) / cooler.ratedAirVelocityMps, -cooler.law.airExponent)
      this.sinkRate[index] = airCapacityRate(site.airDensityKgM3, cooler.faceAreaM2, velocity)
    }
    this.radiatorAirTerm =
      RADIATOR_AIR_SHARE *
      power((air.faceVelocityMps * densityRatio) / radiator.ratedAirVelocityMps, -RADIATOR_AIR_EXPONENT)
    this.radiatorCoolantTerm =
      (1 - RADIATOR_AIR_SHARE) * power(this.coolantFactor, -RADIATOR_COOLANT_EXPONENT)
  }

  /**
   * Solves oil loop, coolers and radiator.
   * @param sumpC - sump [°C]
   * @param inletC - hot line [°C]
   * @param coolantC - coolant [°C]
   * Source: energy balances of each exchanger; the chain is linear in the radiator's outlet temperature.
   */
  evaluate(sumpC: number, inletC: number, coolantC: number): void {
    const { bypass, radiator } = this.system
    this.bypassShare = bypass === null ? 1 : openShare(bypass, inletC)
    this.thermostatOpen = openShare(radiator.thermostat, coolantC)
    this.readLoop(sumpC)
    const oilChanged = sumpC !== this.usedSumpC || this.bypassShare !== this.keptBypass
    this.usedSumpC = sumpC
    if (this.thermostatOpen !== this.keptOpen) this.updateRadiator()
    if (oilChanged) this.updateAirCoolers()
    if (this.hasTank && (oilChanged || this.thermostatOpen !== this.keptTankOpen)) this.updateTanks()
    this.keptBypass = this.bypassShare
    this.solveChain(inletC, coolantC)
  }

  /** Reads flow and oil properties at a sump temperature into `loopState`. */
  readLoop(sumpC: number): void {
    if (sumpC === this.keptSumpC) return
    this.source?.read(sumpC, this.loopState)
    this.keptSumpC = sumpC
  }

  private updateRadiator(): void {
    const { radiator } = this.system
    const open = this.thermostatOpen
    this.keptOpen = open
    this.coolantRate = open * this.coolantFactor * radiator.ratedCoolantFlowM3S * COOLANT_HEAT_CAPACITY_J_M3_K
    if (open === 0) {
      this.radiatorConductance = 0
      return
    }
    this.coolantPower = Math.exp(-RADIATOR_COOLANT_EXPONENT * Math.log(open))
    const ua = radiator.uaRatedWK / (this.radiatorAirTerm + this.radiatorCoolantTerm * this.coolantPower)
    const smaller = Math.min(this.coolantRate, this.air.stackCapacityRate)
    const larger = Math.max(this.coolantRate, this.air.stackCapacityRate)
    this.radiatorConductance = crossFlowEffectiveness(ua / smaller, smaller / larger) * smaller
  }

  /** Conductance ε C_min of one cooler for a sink-side resistance and capacity rate. */
  private coolerConductance(index: number, sinkTerm: number, sinkRate: number): number {
    const cooler = this.system.coolers[index]!
    const oilRate = this.oilRate[index]!
    if (oilRate <= 0 || sinkRate <= 0) return 0
    const slow = this.bypassShare === 1 ? 1 : Math.exp(-cooler.law.flowExponent * Math.log(this.bypassShare))
    const oilTerm = (1 - cooler.airShare) * this.loopState.oilSide[index]! * slow
    const ua = (cooler.uaRatedWK * this.system.coolerScale) / (sinkTerm + oilTerm)
    const smaller = Math.min(oilRate, sinkRate)
    return crossFlowEffectiveness(ua / smaller, smaller / Math.max(oilRate, sinkRate)) * smaller
  }

  private updateAirCoolers(): void {
    const rate = this.loopState.oilCapacityRate * this.bypassShare
    for (let index = 0; index < this.conductance.length; index++) {
      this.oilRate[index] = rate * this.loopState.shares[index]!
      if (this.isTank[index] === 1) continue
      this.conductance[index] = this.coolerConductance(index, this.sinkTerm[index]!, this.sinkRate[index]!)
    }
  }

  private updateTanks(): void {
    this.keptTankOpen = this.thermostatOpen
    for (let index = 0; index < this.conductance.length; index++)
      if (this.isTank[index] === 1)
        this.conductance[index] = this.coolerConductance(
          index,
          this.sinkTerm[index]! * this.coolantPower,
          this.coolantRate,
        )
  }

  /**
   * Walks the oil through the groups with every temperature as a + b T_out, T_out the radiator's outlet; closes with
   * the radiator; then books the heats.
   */
  private solveChain(inletC: number, coolantC: number): void {
    const { groups } = this.system.loop
    const { isTank, inStack, conductance, coolerHeatW, air } = this
    const total = this.loopState.oilCapacityRate * this.bypassShare
    let a = inletC
    let b = 0
    let stackHeatA = 0
    let stackHeatB = 0
    if (this.hasTank && this.coolantRate > 0) {
      if (total > 0)
        for (const group of groups) {
          let heatA = 0
          let heatB = 0
          for (const index of group) {
            const g = conductance[index]!
            const tank = isTank[index] === 1
            const qa = g * (a - (tank ? 0 : air.coolerAirC[index]!))
            const qb = g * (b - (tank ? 1 : 0))
            heatA += qa
            heatB += qb
            if (inStack[index] === 1) {
              stackHeatA += qa
              stackHeatB += qb
            }
          }
          a -= heatA / total
          b -= heatB / total
        }
      const share = this.radiatorConductance / this.coolantRate
      const rise = share / air.stackCapacityRate
      const outlet =
        (coolantC * (1 - share) + share * air.behindCondenserC + rise * stackHeatA) /
        Math.max(1e-3, 1 - rise * stackHeatB)
      this.radiatorOutC = outlet
    }
    this.bookCoolers(inletC, total)
    let stackHeat = 0
    for (let index = 0; index < coolerHeatW.length; index++)
      if (inStack[index] === 1) stackHeat += coolerHeatW[index]!
    if (this.coolantRate > 0) {
      const airC = air.behindCondenserC + stackHeat / air.stackCapacityRate
      this.radiatorHeatW = this.radiatorConductance * (coolantC - airC)
      this.radiatorOutC = coolantC - this.radiatorHeatW / this.coolantRate
    } else {
      this.radiatorHeatW = 0
      this.radiatorOutC = coolantC
    }
  }

  private bookCoolers(inletC: number, total: number): void {
    const { isTank, conductance, coolerHeatW, air } = this
    let oilC = inletC
    let heat = 0
    let tankHeat = 0
    for (const group of this.system.loop.groups) {
      let groupHeat = 0
      for (const index of group) {
        const tank = isTank[index] === 1
        const q =
          total > 0 && !(tank && this.coolantRate === 0)
            ? conductance[index]! * (oilC - (tank ? this.radiatorOutC : air.coolerAirC[index]!))
            : 0
        coolerHeatW[index] = q
        groupHeat += q
        if (tank) tankHeat += q
      }
      if (total > 0) oilC -= groupHeat / total
      heat += groupHeat
    }
    this.heatCoolersW = heat
    this.tankHeatW = tankHeat
    this.returnC = inletC - heat / this.loopState.oilCapacityRate
  }
}
