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
 * Example (computed here): 39.1 W/(m² K) at 8 m/s.
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
  axle: LoneBody = { endC: 0, timeS: 1 }
  transferCase: LoneBody = { endC: 0, timeS: 1 }
  /** Heats after calibration [W]; drag at the reference viscosity. */
  converterW = 0
  fixedW = 0
  spinReferenceW = 0
  engineToCoolantW = 0
  panConductance = 0
  caseConductance = 0

  private readonly system: CoolingSystem

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
    const transferPerArea = surfaceHeatTransfer(CASE_WIND_SHARE * airSpeed)
    const caseTransfer = transferPerArea * masses.caseAreaM2
    this.panConductance = PAN_SHARE * caseTransfer
    this.caseConductance = (1 - PAN_SHARE) * caseTransfer
    this.axle = this.loneBody(
      point.axleW,
      surfaceHeatTransfer(AXLE_WIND_SHARE * airSpeed) * masses.axle.surfaceM2,
      masses.axle.heatCapacityJK,
    )
    this.transferCase = this.loneBody(
      point.transferCaseW,
      transferPerArea * masses.transferCase.surfaceM2,
      masses.transferCase.heatCapacityJK,
    )
  }

  private loneBody(heatW: number, conductance: number, heatCapacityJK: number): LoneBody {
    return { endC: this.underbodyC + heatW / conductance, timeS: heatCapacityJK / conductance }
  }

  /** Temperature rates [K/s] of the four coupled temperatures. */
  rates(temperatures: Float64Array, rates: Float64Array): void {
    const sumpC = temperatures[SUMP]!
    const converterC = temperatures[CONVERTER]!
    const caseC = temperatures[CASE]!
    const coolantC = temperatures[COOLANT]!
    const { circuit, masses } = this
    circuit.evaluate(sumpC, converterC, coolantC)
    const { oilCapacityRate, spinFactor } = circuit.loopState
    const toCase = OIL_CASE_CONDUCTANCE_W_K * (sumpC - caseC)
    const sumpW =
      this.fixedW +
      this.spinReferenceW * spinFactor +
      oilCapacityRate * (circuit.returnC - sumpC) -
      this.panConductance * (sumpC - this.underbodyC) -
      toCase
    const sumpCapacity = oilDensity(masses.oil, sumpC) * masses.fluidVolumeM3 * oilHeatCapacity(sumpC)
    rates[SUMP] = sumpW / sumpCapacity
    rates[CONVERTER] =
      (this.converterW - oilCapacityRate * (converterC - sumpC)) / masses.converterHeatCapacityJK
    rates[CASE] = (toCase - this.caseConductance * (caseC - this.underbodyC)) / masses.caseHeatCapacityJK
    rates[COOLANT] =
      (this.engineToCoolantW + circuit.tankHeatW - circuit.radiatorHeatW) / masses.coolantHeatCapacityJK
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
      heatCoolersW: circuit.heatCoolersW,
      coolerHeatW: Array.from(circuit.coolerHeatW),
      heatPanCaseW:
        this.panConductance * (sumpC - this.underbodyC) + this.caseConductance * (caseC - this.underbodyC),
      heatEngineToCoolantW: this.engineToCoolantW,
      heatRadiatorW: circuit.radiatorHeatW,
      faceVelocityMps: circuit.air.faceVelocityMps,
      thermostatOpen: circuit.thermostatOpen,
      radiatorOutC: circuit.radiatorOutC,
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
