import { Circuit } from './circuit'
import { loopTable } from './cooling-system'
import type { CoolingSystem } from './cooling-system'
import type { LoopSource } from './loop-flow'
import { oilDensity, oilHeatCapacity } from './fluids'
import type { OperatingPoint } from './operating-point'
import type { Calibrated, ThermalMasses } from './resolve'
import type { HeatSources, State } from './types'

/** The balances of the six temperatures at one operating point. */

/** Conductance between oil and case metal [W/K]. Judgement. */
export const OIL_CASE_CONDUCTANCE_W_K = 250
/** Heat an engine gives its coolant at no load [W]. Judgement. */
const IDLE_COOLANT_HEAT_W = 4000
/** Share of the case's surface that is pan. Judgement. */
const PAN_SHARE = 0.4
/** Share of road air speed that reaches transmission and axle. Judgement. */
const CASE_WIND_SHARE = 0.4
const AXLE_WIND_SHARE = 0.7

/** The four temperatures that depend on each other, in this order: sump, converter, case, coolant [°C]. */
export const SUMP = 0
export const CONVERTER = 1
export const CASE = 2
export const COOLANT = 3
export const COUPLED = 4

/**
 * Heat transfer of a case in under-body air, radiation included.
 * Equation: h = 10 + 5.5 (k u)^0.8, k the share of road air speed u that reaches it.
 * @param localSpeed - k u [m/s]
 * @returns h [W/(m² K)]
 * Source: form of a turbulent boundary layer (Incropera et al., 6th ed., equation 7.38) plus free convection and
 * radiation; fitted to an estimate of 7-35 W/K for 0.7 m² at 0-65 mph (judgement).
 * Example (computed here): 39.0 W/(m² K) at 8 m/s.
 */
export function surfaceHeatTransfer(localSpeed: number): number {
  return localSpeed > 0 ? 10 + 5.5 * Math.exp(0.8 * Math.log(localSpeed)) : 10
}

/** A body that meets only its own heat and the air: T follows an exponential to its end value. */
export interface LoneBody {
  endC: number
  /** Time constant [s]. */
  timeS: number
}

export function loneBodyAt(body: LoneBody, startC: number, elapsedS: number): number {
  return body.endC + (startC - body.endC) * Math.exp(-elapsedS / body.timeS)
}

/** One operating point with everything that turns temperatures into heat flows; `set` moves it to another point. */
export class ThermalPoint {
  readonly circuit: Circuit
  readonly masses: ThermalMasses
  readonly heatScale: number
  readonly underbodyC: number
  /** Heats after calibration [W]; drag at the reference viscosity. */
  converterW = 0
  fixedW = 0
  spinReferenceW = 0
  engineToCoolantW = 0
  panConductance = 0
  caseConductance = 0

  private readonly system: CoolingSystem
  private point: OperatingPoint | undefined
  private airSpeed = 0

  constructor(
    point: OperatingPoint | undefined,
    system: CoolingSystem,
    masses: ThermalMasses,
    calibration: Calibrated,
  ) {
    this.system = system
    this.masses = masses
    this.heatScale = calibration.heatScale
    this.underbodyC = system.site.underbodyC
    this.circuit = new Circuit(system)
    if (point !== undefined) this.set(point)
  }

  /** Moves to an operating point; its loop states come from `source`, by default the table of its feed share. */
  set(point: OperatingPoint, source: LoopSource = loopTable(this.system, point.feedShare)): void {
    const { masses, heatScale } = this
    const airSpeed = Math.max(0, point.speedMps + point.headwindMps)
    this.circuit.configure(airSpeed, point.engineSpeed, source)
    this.converterW = heatScale * point.converterW
    this.fixedW = heatScale * (point.gearW + point.shiftW + point.pumpW)
    this.spinReferenceW = heatScale * point.spinW
    this.engineToCoolantW = IDLE_COOLANT_HEAT_W + masses.coolantHeatRatio * point.enginePowerW
    const caseTransfer = surfaceHeatTransfer(CASE_WIND_SHARE * airSpeed) * masses.caseAreaM2
    this.panConductance = PAN_SHARE * caseTransfer
    this.caseConductance = (1 - PAN_SHARE) * caseTransfer
    this.point = point
    this.airSpeed = airSpeed
  }

  /** Axle oil: its end value and time constant at this point. */
  get axle(): LoneBody {
    const { surfaceM2, heatCapacityJK } = this.masses.axle
    const conductance = surfaceHeatTransfer(AXLE_WIND_SHARE * this.airSpeed) * surfaceM2
    return this.loneBody(this.point?.axleW ?? 0, conductance, heatCapacityJK)
  }

  /** Transfer-case oil likewise; it sits where the transmission does. */
  get transferCase(): LoneBody {
    const { surfaceM2, heatCapacityJK } = this.masses.transferCase
    const conductance = surfaceHeatTransfer(CASE_WIND_SHARE * this.airSpeed) * surfaceM2
    return this.loneBody(this.point?.transferCaseW ?? 0, conductance, heatCapacityJK)
  }

  private loneBody(heatW: number, conductance: number, heatCapacityJK: number): LoneBody {
    return {
      endC: this.underbodyC + heatW / conductance,
      timeS: heatCapacityJK / conductance,
    }
  }

  /** Temperature rates [K/s] of the four coupled temperatures. */
  rates(temperatures: Float64Array, rates: Float64Array): void {
    this.circuit.evaluate(temperatures[SUMP]!, temperatures[CONVERTER]!, temperatures[COOLANT]!)
    this.fillRates(temperatures, rates)
  }

  /** The same with the oil loop as last read, for temperatures a moment later. */
  ratesWithLoopKept(temperatures: Float64Array, rates: Float64Array): void {
    this.circuit.evaluateWithLoopKept(temperatures[CONVERTER]!, temperatures[COOLANT]!)
    this.fillRates(temperatures, rates)
  }

  private fillRates(temperatures: Float64Array, rates: Float64Array): void {
    const { masses } = this
    const { chain, loopState } = this.circuit
    const sumpC = temperatures[SUMP]!
    const caseC = temperatures[CASE]!
    const toConverter = loopState.oilCapacityRate * (temperatures[CONVERTER]! - sumpC)
    const toCase = OIL_CASE_CONDUCTANCE_W_K * (sumpC - caseC)
    rates[SUMP] =
      (this.fixedW +
        this.spinReferenceW * loopState.spinFactor +
        toConverter -
        chain.heatCoolersW -
        this.panConductance * (sumpC - this.underbodyC) -
        toCase) /
      this.sumpCapacity(sumpC)
    rates[CONVERTER] = (this.converterW - toConverter) / masses.converterHeatCapacityJK
    rates[CASE] = (toCase - this.caseConductance * (caseC - this.underbodyC)) / masses.caseHeatCapacityJK
    rates[COOLANT] =
      (this.engineToCoolantW + chain.tankHeatW - chain.radiatorHeatW) / masses.coolantHeatCapacityJK
  }

  private sumpCapacity(sumpC: number): number {
    return oilDensity(this.masses.oil, sumpC) * this.masses.fluidVolumeM3 * oilHeatCapacity(sumpC)
  }

  /**
   * Slopes of the rates over the temperatures [1/s], row by row, at temperatures whose rates were just asked.
   * @param temperatures - [°C]
   * @param rates - at those temperatures [K/s]
   * @param slopes - 4 × 4, is written
   */
  jacobian(temperatures: Float64Array, rates: Float64Array, slopes: Float64Array): void {
    const { circuit, masses } = this
    const sumpC = temperatures[SUMP]!
    const converterC = temperatures[CONVERTER]!
    circuit.updateSlopes(sumpC, converterC, temperatures[COOLANT]!)
    const { coolers, tank, radiator, oilCapacityRate: rateSlope, spinFactor } = circuit.slopes
    const rate = circuit.loopState.oilCapacityRate
    const hotSlope = rateSlope * (converterC - sumpC) - rate
    const capacity = this.sumpCapacity(sumpC)
    const capacitySlope = this.sumpCapacity(sumpC + 1) - capacity
    slopes[0] =
      (this.spinReferenceW * spinFactor +
        hotSlope -
        coolers[0]! -
        this.panConductance -
        OIL_CASE_CONDUCTANCE_W_K -
        rates[SUMP]! * capacitySlope) /
      capacity
    slopes[1] = (rate - coolers[1]!) / capacity
    slopes[2] = OIL_CASE_CONDUCTANCE_W_K / capacity
    slopes[3] = -coolers[2]! / capacity
    slopes[4] = -hotSlope / masses.converterHeatCapacityJK
    slopes[5] = -rate / masses.converterHeatCapacityJK
    slopes[6] = 0
    slopes[7] = 0
    slopes[8] = OIL_CASE_CONDUCTANCE_W_K / masses.caseHeatCapacityJK
    slopes[9] = 0
    slopes[10] = -(OIL_CASE_CONDUCTANCE_W_K + this.caseConductance) / masses.caseHeatCapacityJK
    slopes[11] = 0
    slopes[12] = (tank[0]! - radiator[0]!) / masses.coolantHeatCapacityJK
    slopes[13] = (tank[1]! - radiator[1]!) / masses.coolantHeatCapacityJK
    slopes[14] = 0
    slopes[15] = (tank[2]! - radiator[2]!) / masses.coolantHeatCapacityJK
  }

  /** Case metal at rest with a sump temperature [°C]. */
  restingCaseC(sumpC: number): number {
    return (
      (OIL_CASE_CONDUCTANCE_W_K * sumpC + this.caseConductance * this.underbodyC) /
      (OIL_CASE_CONDUCTANCE_W_K + this.caseConductance)
    )
  }

  /** Everything about one instant. */
  stateAt(temperatures: ArrayLike<number>, axleC: number, transferCaseC: number): State {
    const { circuit } = this
    const sumpC = temperatures[SUMP]!
    const coolerInletC = temperatures[CONVERTER]!
    const caseC = temperatures[CASE]!
    const coolantC = temperatures[COOLANT]!
    circuit.evaluate(sumpC, coolerInletC, coolantC)
    const heatSpinW = this.spinReferenceW * circuit.loopState.spinFactor
    return {
      sumpC,
      caseC,
      coolantC,
      axleC,
      transferCaseC,
      coolerInletC,
      coolerReturnC: circuit.returnC,
      coolerFlowM3S: circuit.loopState.volumeFlow,
      heatGeneratedW: this.converterW + this.fixedW + heatSpinW,
      heatSpinW,
      heatCoolersW: circuit.chain.heatCoolersW,
      coolerHeatW: circuit.coolerHeats(),
      heatPanCaseW:
        this.panConductance * (sumpC - this.underbodyC) + this.caseConductance * (caseC - this.underbodyC),
      heatEngineToCoolantW: this.engineToCoolantW,
      heatRadiatorW: circuit.chain.radiatorHeatW,
      faceVelocityMps: circuit.air.faceVelocityMps,
      thermostatOpen: circuit.thermostatOpen,
      radiatorOutC: circuit.chain.radiatorOutC,
    }
  }

  /** Heat sources after calibration, drag as at a state. */
  heatSources(point: OperatingPoint, heatSpinW: number): HeatSources {
    const { heatScale } = this
    return {
      converterW: this.converterW,
      gearW: heatScale * point.gearW,
      spinW: heatSpinW,
      pumpW: heatScale * point.pumpW,
      shiftW: heatScale * point.shiftW,
      axleW: point.axleW,
      transferCaseW: point.transferCaseW,
    }
  }
}
