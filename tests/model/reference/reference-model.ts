/**
 * A second, plain and slow implementation of the heat model, written from the equations and without reading shared/heat,
 * so that the two can disagree. Nothing is optimised: fixed-step Runge–Kutta, bisection everywhere, no tables.
 * Used only by differential.test.ts.
 */
const G = 9.80665
const R_AIR = 287.05
const CP_AIR = 1006
const COOLANT_RHO_C = 1035 * 3600
const RPM = (2 * Math.PI) / 60

interface Rating {
  heatW: number
  inletDifferenceK: number
  oilFlowM3S: number
  airVelocityMps?: number
  coolantFlowM3S?: number
  pressureDropPa: number
  oilInC?: number
}
interface Cooler {
  construction: 'stacked-plate' | 'plate-fin' | 'tube-fin' | 'in-tank'
  position: 'ahead-of-condenser' | 'behind-condenser' | 'remote' | 'radiator-tank'
  faceAreaM2?: number
  ramFraction?: number
  fanFlowM3S?: number
  blockedFraction?: number
  parallelWithPrevious?: boolean
  airShare?: number
  rating: Rating
}
interface Segment {
  kind: 'steady' | 'stopGo' | 'stall' | 'idle'
  speedMps?: number
  grade?: number
  durationS?: number
  distanceM?: number
  stopsPerKm?: number
  accelerationMps2?: number
  idleS?: number
  inGear?: boolean
  throttle?: number
  surface?: string
  rollingResistance?: number
  headwindMps?: number
  range?: 'high' | 'low'
  topGear?: number
}
export interface ReferenceInput {
  build: {
    vehicle: { massKg: number; dragAreaM2: number; tyreRadiusM: number }
    engine: {
      fuel: 'petrol' | 'diesel'
      induction: 'natural' | 'forced'
      peakTorqueNm: number
      peakTorqueRpm: number
      peakPowerW: number
      peakPowerRpm: number
      idleRpm: number
      redlineRpm: number
      curve?: { rpm: number; torqueNm: number }[]
      coolantHeatRatio?: number
    }
    converter: {
      stallRpm: number
      stallTorqueNm?: number
      stallTorqueRatio: number
      couplingPoint?: number
      heatCapacityJK?: number
      oilShare?: number
      lockup?: {
        fitted: boolean
        minGear: number
        minSpeedMps: number
        maxTurbineTorqueNm?: number
        slipRpm?: number
      }
    }
    transmission: {
      gears: { ratio: number; efficiency: number }[]
      fluid: { class?: string; kv40MmSqS?: number; kv100MmSqS?: number; density15KgM3?: number }
      fluidVolumeM3: number
      dryMassKg: number
      caseAreaM2?: number
      shiftStyle?: 'tow' | 'economy'
      ratedInputTorqueNm?: number
      pump?: { displacementM3PerRev?: number; linePressureMinPa?: number; linePressureMaxPa?: number }
    }
    transferCase: {
      highRatio: number
      lowRatio: number
      efficiencyHigh: number
      efficiencyLow: number
      surfaceM2?: number
      heatCapacityJK?: number
    }
    axle: { ratio: number; efficiency: number; surfaceM2?: number; heatCapacityJK?: number }
    cooling: {
      coolers: Cooler[]
      lines: { innerDiameterM: number; lengthM: number; fittingsK?: number; roughnessM?: number }
      feed?: { pressureMaxPa?: number; saturationRpm?: number; openFlowM3S?: number }
      bypass?: { openC: number; fullC: number }
      stack: {
        ramFraction?: number
        blockedFraction?: number
        fan: { drive: 'engine' | 'electric'; faceVelocityMps: number }
      }
      radiator: {
        faceAreaM2: number
        rating: {
          heatW: number
          inletDifferenceK: number
          airVelocityMps: number
          coolantFlowM3S: number
          pumpRpm?: number
        }
        thermostat?: { openC: number; fullC: number }
      }
      condenserW?: number
      underbodyRiseK?: number
      coolantHeatCapacityJK?: number
    }
  }
  load?: { cargoMassKg?: number; trailerMassKg?: number; trailerDragAreaM2?: number }
  duty: {
    ambientC: number
    altitudeM: number
    airConditioning?: boolean
    start?: { sumpC?: number; coolantC?: number; axleC?: number }
    segments: Segment[]
  }
  calibration?: { heatScale?: number; coolerScale?: number; flowScale?: number }
  fluidLife?: {
    referenceLifeM?: number
    referenceC?: number
    halvingK?: number
    referenceSpeedMps?: number
  }
}

export class ReferenceRefusal extends Error {}

const ROLLING: Record<string, number> = {
  pavement: 0.01,
  gravel: 0.02,
  dirt: 0.035,
  rock: 0.06,
  mud: 0.15,
  sand: 0.2,
}
const FLUIDS: Record<string, [number, number, number]> = {
  'atf-standard': [35, 7.3, 855],
  'atf-low': [29.6, 5.9, 850],
  'atf-ultra-low': [24, 5.2, 845],
}
const CONSTRUCTION = {
  'stacked-plate': { f: 0.55, a: 0.5, m: 0.55, n: 0.2, dpQ: 1.5, dpNu: 0.5 },
  'plate-fin': { f: 0.55, a: 0.5, m: 0.5, n: 0.2, dpQ: 1.4, dpNu: 0.6 },
  'tube-fin': { f: 0.45, a: 0.6, m: 0.33, n: 0.1, dpQ: 1.1, dpNu: 0.9 },
  'in-tank': { f: 0.2, a: 0.8, m: 0.5, n: 0.2, dpQ: 1.3, dpNu: 0.7 },
} as const

function bisect(f: (x: number) => number, lo: number, hi: number, n = 200): number {
  let a = lo
  let b = hi
  const rising = f(hi) > f(lo)
  for (let i = 0; i < n; i++) {
    const m = (a + b) / 2
    if (f(m) > 0 === rising) b = m
    else a = m
  }
  return (a + b) / 2
}
const clamp01 = (x: number) => Math.min(1, Math.max(0, x))

/** Fritsch–Butland weighted harmonic slopes with three-point ends. */
function pchip(xs: number[], ys: number[]): (x: number) => number {
  const n = xs.length
  const h = xs.slice(1).map((x, i) => x - xs[i]!)
  const d = ys.slice(1).map((y, i) => (y - ys[i]!) / h[i]!)
  const m: number[] = new Array(n).fill(0)
  for (let i = 1; i < n - 1; i++) {
    if (d[i - 1]! * d[i]! <= 0) m[i] = 0
    else {
      const w1 = 2 * h[i]! + h[i - 1]!
      const w2 = h[i]! + 2 * h[i - 1]!
      m[i] = (w1 + w2) / (w1 / d[i - 1]! + w2 / d[i]!)
    }
  }
  const end = (h0: number, h1: number, d0: number, d1: number) => {
    let s = ((2 * h0 + h1) * d0 - h0 * d1) / (h0 + h1)
    if (Math.sign(s) !== Math.sign(d0)) s = 0
    else if (Math.sign(d0) !== Math.sign(d1) && Math.abs(s) > 3 * Math.abs(d0)) s = 3 * d0
    return s
  }
  if (n === 2) {
    m[0] = m[1] = d[0]!
  } else {
    m[0] = end(h[0]!, h[1]!, d[0]!, d[1]!)
    m[n - 1] = end(h[n - 2]!, h[n - 3]!, d[n - 2]!, d[n - 3]!)
  }
  return (x) => {
    if (x <= xs[0]!) return ys[0]!
    if (x >= xs[n - 1]!) return ys[n - 1]!
    let i = 0
    while (x > xs[i + 1]!) i++
    const t = (x - xs[i]!) / h[i]!
    const t2 = t * t
    const t3 = t2 * t
    return (
      (2 * t3 - 3 * t2 + 1) * ys[i]! +
      (t3 - 2 * t2 + t) * h[i]! * m[i]! +
      (-2 * t3 + 3 * t2) * ys[i + 1]! +
      (t3 - t2) * h[i]! * m[i + 1]!
    )
  }
}

const CAPACITY = pchip(
  [0, 0.2, 0.4, 0.6, 0.7, 0.8, 0.85, 0.9, 0.95, 0.98, 1],
  [1, 0.98, 0.925, 0.797, 0.706, 0.61, 0.541, 0.444, 0.25, 0.11, 0],
)

function effectiveness(ntu: number, cr: number): number {
  if (cr < 1e-9) return 1 - Math.exp(-ntu)
  return 1 - Math.exp((Math.pow(ntu, 0.22) / cr) * (Math.exp(-cr * Math.pow(ntu, 0.78)) - 1))
}
function uaOfRating(heat: number, difference: number, c1: number, c2: number): number {
  const cMin = Math.min(c1, c2)
  const cr = cMin / Math.max(c1, c2)
  const eps = heat / (cMin * difference)
  if (eps >= effectiveness(200, cr))
    throw new ReferenceRefusal('rating is beyond what its air and oil flow can carry')
  return bisect((n) => effectiveness(n, cr) - eps, 0, 200) * cMin
}
function exchange(ua: number, c1: number, c2: number): number {
  const cMin = Math.min(c1, c2)
  const cMax = Math.max(c1, c2)
  if (cMin <= 0 || ua <= 0) return 0
  return effectiveness(ua / cMin, cMin / cMax) * cMin
}

/** What one moment of driving asks of the driveline; spin is kept as power at 8 mm²/s. */
interface Demand {
  converterW: number
  gearW: number
  spinRefW: number
  pumpW: number
  shiftW: number
  axleW: number
  transferCaseW: number
  engineW: number
  engineRpm: number
  feed: number
  speed: number
  wind: number
  gear: number
  locked: boolean
  speedRatio: number
  speedHeld: boolean
  turbineTorque: number
  turbineSpeedPerRoad: number
  holds: boolean
}

export type Temperatures = [number, number, number, number, number, number]

export class ReferenceModel {
  readonly input: ReferenceInput
  readonly seaLevelTorque: (rpm: number) => number
  readonly lambda0: number
  constructor(input: ReferenceInput) {
    this.input = input
    this.seaLevelTorque = this.makeTorqueCurve()
    this.lambda0 = this.makeLambda0()
    for (const c of this.coolers) this.ratedUa(c)
    this.radiatorUa()
  }
  get b() {
    return this.input.build
  }
  get coolers() {
    return this.b.cooling.coolers
  }

  // fluids
  get fluid(): [number, number, number] {
    const f = this.b.transmission.fluid
    return f.class ? FLUIDS[f.class]! : [f.kv40MmSqS!, f.kv100MmSqS!, f.density15KgM3!]
  }
  nu(tC: number): number {
    const [v40, v100] = this.fluid
    const z = (v: number) => Math.log10(Math.log10(v + 0.7))
    const B = (z(v40) - z(v100)) / (Math.log10(373.15) - Math.log10(313.15))
    const A = z(v40) + B * Math.log10(313.15)
    const T = Math.max(tC, -40) + 273.15
    return Math.pow(10, Math.pow(10, A - B * Math.log10(T))) - 0.7
  }
  rho(tC: number) {
    return this.fluid[2] - 0.62 * (tC - 15)
  }
  cp(tC: number) {
    return 1800 + 4 * tC
  }
  get pressure() {
    return 101325 * Math.pow(1 - 2.25577e-5 * this.input.duty.altitudeM, 5.25588)
  }
  get airRho() {
    return this.pressure / (R_AIR * (this.input.duty.ambientC + 273.15))
  }

  // engine
  private makeTorqueCurve() {
    const e = this.b.engine
    if (e.curve)
      return pchip(
        e.curve.map((p) => p.rpm),
        e.curve.map((p) => p.torqueNm),
      )
    const tp = e.peakPowerW / (e.peakPowerRpm * RPM)
    return pchip(
      [e.idleRpm, e.peakTorqueRpm, e.peakPowerRpm, e.redlineRpm],
      [0.65 * e.peakTorqueNm, e.peakTorqueNm, tp, 0.85 * tp],
    )
  }
  get derate() {
    if (this.b.engine.induction === 'forced') return 1
    const cf =
      1.18 * (990 / (this.pressure / 100)) * Math.sqrt((this.input.duty.ambientC + 273.15) / 298.15) - 0.18
    return Math.min(1, 1 / cf)
  }
  torque(rpm: number) {
    return this.seaLevelTorque(rpm) * this.derate
  }
  get rated() {
    return this.b.transmission.ratedInputTorqueNm ?? this.b.engine.peakTorqueNm
  }
  pumpTorque(impellerTorque: number) {
    const p = this.b.transmission.pump ?? {}
    const lo = p.linePressureMinPa ?? 0.55e6
    const hi = p.linePressureMaxPa ?? 1.5e6
    const line = lo + (hi - lo) * clamp01(impellerTorque / this.rated)
    return ((p.displacementM3PerRev ?? 20e-6) * line) / (2 * Math.PI * 0.85)
  }
  spinTorqueRef(turbineSpeed: number) {
    return 0.005 * this.rated * (1 + (0.4 * (turbineSpeed / RPM)) / 1000)
  }
  get idle() {
    return this.b.engine.idleRpm * RPM
  }
  private makeLambda0() {
    const c = this.b.converter
    const w = c.stallRpm * RPM
    const stall =
      c.stallTorqueNm ??
      bisect(
        (t) => t + this.pumpTorque(t) - this.seaLevelTorque(c.stallRpm),
        0,
        this.seaLevelTorque(c.stallRpm),
      )
    return stall / (w * w)
  }
  torqueRatio(sr: number) {
    const c = this.b.converter
    return 1 + (c.stallTorqueRatio - 1) * Math.max(0, 1 - sr / (c.couplingPoint ?? 0.88))
  }

  // road
  force(v: number, s: Segment, accel = 0) {
    const l = this.input.load ?? {}
    const m = this.b.vehicle.massKg + (l.cargoMassKg ?? 0) + (l.trailerMassKg ?? 0)
    const cda = this.b.vehicle.dragAreaM2 + (l.trailerDragAreaM2 ?? 0)
    const th = Math.atan(s.grade ?? 0)
    const crr = s.rollingResistance ?? ROLLING[s.surface ?? 'pavement']!
    const w = s.headwindMps ?? 0
    return (
      m * G * Math.sin(th) +
      (v > 0 ? crr * m * G * Math.cos(th) : 0) +
      0.5 * this.airRho * cda * (v + w) * Math.abs(v + w) +
      1.05 * m * accel
    )
  }
  transfer(s: Segment) {
    const t = this.b.transferCase
    return s.range === 'low'
      ? { ratio: t.lowRatio, eff: t.efficiencyLow }
      : { ratio: t.highRatio, eff: t.efficiencyHigh }
  }
  topGear(s: Segment) {
    return Math.min(s.topGear ?? this.b.transmission.gears.length, this.b.transmission.gears.length)
  }
  turbineSpeed(v: number, s: Segment, gear: number) {
    return (
      (v / this.b.vehicle.tyreRadiusM) *
      this.b.axle.ratio *
      this.transfer(s).ratio *
      this.b.transmission.gears[gear - 1]!.ratio
    )
  }
  feedShare(rpm: number) {
    return Math.min(1, rpm / (this.b.cooling.feed?.saturationRpm ?? 1500))
  }

  blank(v: number, s: Segment): Demand {
    return {
      converterW: 0,
      gearW: 0,
      spinRefW: 0,
      pumpW: 0,
      shiftW: 0,
      axleW: 0,
      transferCaseW: 0,
      engineW: 0,
      engineRpm: 0,
      feed: 0,
      speed: v,
      wind: s.headwindMps ?? 0,
      gear: 1,
      locked: false,
      speedRatio: 0,
      speedHeld: true,
      turbineTorque: 0,
      turbineSpeedPerRoad: 0,
      holds: true,
    }
  }
  coasting(v: number, s: Segment): Demand {
    const gear = this.topGear(s)
    const wt = this.turbineSpeed(v, s, gear)
    const wi = Math.max(this.idle, wt)
    const pump = this.pumpTorque(0)
    return {
      ...this.blank(v, s),
      gear,
      spinRefW: this.spinTorqueRef(wt) * wt,
      pumpW: pump * wi,
      engineW: pump * wi,
      engineRpm: wi / RPM,
      feed: this.feedShare(wi / RPM),
      speedRatio: wt / wi,
    }
  }
  brakedInGear(s: Segment): Demand {
    const t = this.lambda0 * this.idle * this.idle
    const pump = this.pumpTorque(t)
    return {
      ...this.blank(0, s),
      converterW: t * this.idle,
      pumpW: pump * this.idle,
      engineW: (t + pump) * this.idle,
      engineRpm: this.b.engine.idleRpm,
      feed: this.feedShare(this.b.engine.idleRpm),
    }
  }
  stall(s: Segment): Demand {
    const excess = (w: number) => {
      const t = this.lambda0 * w * w
      return t + this.pumpTorque(t) - s.throttle! * this.torque(w / RPM)
    }
    let w = this.idle
    if (excess(w) < 0) {
      let hi = w
      while (excess(hi) < 0) hi += 1
      w = bisect(excess, hi - 1, hi)
    }
    const t = this.lambda0 * w * w
    const pump = this.pumpTorque(t)
    return {
      ...this.blank(0, s),
      converterW: t * w,
      pumpW: pump * w,
      engineW: (t + pump) * w,
      engineRpm: w / RPM,
      feed: this.feedShare(w / RPM),
    }
  }

  /** One gear, locked or not, at speed v under tractive force F > 0. */
  inGear(v: number, s: Segment, F: number, gear: number, locked: boolean): Demand {
    const { ratio, efficiency } = this.b.transmission.gears[gear - 1]!
    const tc = this.transfer(s)
    const wt = this.turbineSpeed(v, s, gear)
    const pinion = (F * this.b.vehicle.tyreRadiusM) / (this.b.axle.ratio * this.b.axle.efficiency)
    const output = pinion / (tc.ratio * tc.eff)
    const pinionSpeed = (v / this.b.vehicle.tyreRadiusM) * this.b.axle.ratio
    const outputSpeed = pinionSpeed * tc.ratio
    const spin = this.spinTorqueRef(wt)
    const need = output / (ratio * efficiency) + spin
    let wi: number
    let ti: number
    let delivered: number
    if (locked) {
      wi = wt + (this.b.converter.lockup!.slipRpm ?? 0) * RPM
      ti = need
      delivered = need
    } else {
      const torqueAt = (sr: number) =>
        this.lambda0 * CAPACITY(sr) * (wt / sr) * (wt / sr) * this.torqueRatio(sr) - need
      const sr = bisect(torqueAt, 1e-6, 1)
      wi = wt / sr
      if (wi < this.idle) wi = this.idle
      const at = wt / wi
      ti = this.lambda0 * CAPACITY(at) * wi * wi
      delivered = ti * this.torqueRatio(at)
    }
    const pump = this.pumpTorque(ti)
    const rpm = wi / RPM
    let holds = rpm <= 0.95 * this.b.engine.redlineRpm && ti + pump <= 0.95 * this.torque(rpm)
    if (!locked && gear > 1 && wt / wi < 0.8) holds = false
    return {
      ...this.blank(v, s),
      converterW: ti * wi - delivered * wt,
      gearW: (1 - efficiency) * (output / (ratio * efficiency)) * wt,
      spinRefW: spin * wt,
      pumpW: pump * wi,
      axleW: (1 - this.b.axle.efficiency) * pinion * pinionSpeed,
      transferCaseW: (1 - tc.eff) * output * outputSpeed,
      engineW: (ti + pump) * wi,
      engineRpm: rpm,
      feed: this.feedShare(rpm),
      gear,
      locked,
      speedRatio: wt / wi,
      turbineTorque: delivered,
      holds,
    }
  }
  lockAllowed(v: number, s: Segment, gear: number, need: number) {
    const l = this.b.converter.lockup
    if (!l?.fitted || gear < l.minGear || v < l.minSpeedMps) return false
    const wt = this.turbineSpeed(v, s, gear)
    if (wt < 1200 * RPM) return false
    if (l.maxTurbineTorqueNm !== undefined && need > l.maxTurbineTorqueNm) return false
    return wt + (l.slipRpm ?? 0) * RPM >= this.idle
  }
  /** The state driven at speed v, or undefined where no gear holds. */
  drive(v: number, s: Segment, accel = 0, scream = 0.65): Demand | undefined {
    const F = this.force(v, s, accel)
    if (F <= 0) return this.coasting(v, s)
    const economy = this.b.transmission.shiftStyle === 'economy'
    let best: Demand | undefined
    let bestCost = Infinity
    const lockedStates: Demand[] = []
    const unlockedStates: Demand[] = []
    for (let gear = this.topGear(s); gear >= 1; gear--) {
      if (gear > 1 && this.turbineSpeed(v, s, gear) < 1100 * RPM) continue
      const free = this.inGear(v, s, F, gear, false)
      const tried = this.b.converter.lockup ? this.inGear(v, s, F, gear, true) : undefined
      if (tried && this.lockAllowed(v, s, gear, tried.turbineTorque) && tried.holds) {
        lockedStates.push(tried)
        if (economy) return tried
      }
      if (free.holds) {
        unlockedStates.push(free)
        if (economy) return free
      }
    }
    if (economy) return undefined
    if (lockedStates.length) return lockedStates[0]
    for (const u of unlockedStates) {
      const cost =
        (u.converterW + u.gearW + u.spinRefW + u.pumpW) *
        (1 + 2 * Math.max(0, u.engineRpm / this.b.engine.redlineRpm - scream))
      if (cost < bestCost) {
        best = u
        bestCost = cost
      }
    }
    return best
  }
  steady(s: Segment): Demand {
    const v = s.speedMps!
    const d = this.drive(v, s)
    if (d) return d
    let failed = v
    let lo = v
    let state: Demand | undefined
    while (!state) {
      failed = lo
      lo *= 0.99
      if (lo < 0.1) throw new ReferenceRefusal('cannot climb this grade')
      state = this.drive(lo, s)
    }
    for (let i = 0; i < 60; i++) {
      const m = (lo + failed) / 2
      const at = this.drive(m, s)
      if (at) {
        lo = m
        state = at
      } else failed = m
    }
    return { ...state, speedHeld: false }
  }
  stopGo(s: Segment): Demand {
    const d = 1000 / s.stopsPerKm!
    const a = s.accelerationMps2 ?? 1
    const v = Math.min(s.speedMps!, Math.sqrt(d / (1 / (2 * a) + 1 / 2.4)))
    const phases: { state: Demand; t: number }[] = []
    let time = 0
    let dist = 0
    let shiftJ = 0
    let last: Demand | undefined
    for (let k = 0; k < 8; k++) {
      const vk = ((k + 0.5) * v) / 8
      let ak = a
      let state = this.drive(vk, s, a, 0.5)
      if (!state) {
        if (!this.drive(vk, s, 0.05, 0.5)) throw new ReferenceRefusal('cannot pull away on this grade')
        let lo = 0.05
        let hi = a
        for (let i = 0; i < 60; i++) {
          const m = (lo + hi) / 2
          if (this.drive(vk, s, m, 0.5)) lo = m
          else hi = m
        }
        ak = lo
        state = this.drive(vk, s, ak, 0.5)!
      }
      const t = v / 8 / ak
      if (last && state.gear > last.gear) {
        const drop = this.turbineSpeed(vk, s, last.gear) - this.turbineSpeed(vk, s, state.gear)
        shiftJ += 0.5 * 0.6 * state.turbineTorque * drop + 0.5 * 0.25 * drop * drop
      }
      last = state
      phases.push({ state, t })
      time += t
      dist += vk * t
    }
    const cruise = this.drive(v, s)
    if (!cruise) throw new ReferenceRefusal('cannot hold the cruise speed between stops')
    const tDown = v / 1.2
    const dDown = (v * v) / 2.4
    const tCruise = Math.max(0, (d - dist - dDown) / v)
    phases.push({ state: cruise, t: tCruise })
    phases.push({ state: this.coasting(v / 2, s), t: tDown })
    const idleS = s.idleS ?? 15
    phases.push({ state: s.inGear === false ? this.coasting(0, s) : this.brakedInGear(s), t: idleS })
    dist += tCruise * v + dDown
    time += tCruise + tDown + idleS
    const out = this.blank(dist / time, s)
    for (const { state, t } of phases) {
      const w = t / time
      out.converterW += w * state.converterW
      out.gearW += w * state.gearW
      out.spinRefW += w * state.spinRefW
      out.pumpW += w * state.pumpW
      out.axleW += w * state.axleW
      out.transferCaseW += w * state.transferCaseW
      out.engineW += w * state.engineW
      out.engineRpm += w * state.engineRpm
      out.feed += w * state.feed
    }
    out.shiftW = shiftJ / time
    out.gear = cruise.gear
    out.locked = cruise.locked
    out.speedRatio = cruise.speedRatio
    return out
  }
  demand(s: Segment): Demand {
    if (s.kind === 'steady') return this.steady(s)
    if (s.kind === 'stopGo') return this.stopGo(s)
    if (s.kind === 'stall') return this.stall(s)
    return s.inGear ? this.brakedInGear(s) : this.coasting(0, s)
  }

  // air
  air(d: Demand) {
    const st = this.b.cooling.stack
    const through = Math.max(0, d.speed + d.wind)
    const fan = st.fan.faceVelocityMps * (st.fan.drive === 'engine' ? Math.min(1, d.engineRpm / 2500) : 1)
    let V = Math.cbrt(Math.pow((st.ramFraction ?? 0.18) * through, 3) + Math.pow(fan, 3))
    V *= 1 - (st.blockedFraction ?? 0)
    for (const c of this.coolers)
      if (c.position === 'ahead-of-condenser' || c.position === 'behind-condenser')
        V *= 1 - (0.15 * c.faceAreaM2!) / this.b.cooling.radiator.faceAreaM2
    V = Math.max(0.3, V)
    const amb = this.input.duty.ambientC
    const stackAir = amb + 8 * Math.max(0, 1 - through / 8)
    const under = amb + (this.b.cooling.underbodyRiseK ?? 15)
    const cStack = this.airRho * this.b.cooling.radiator.faceAreaM2 * V * CP_AIR
    const condenser = this.input.duty.airConditioning ? (this.b.cooling.condenserW ?? 6000) : 0
    const coolers = this.coolers.map((c) => {
      if (c.position === 'radiator-tank') return { V: 0, sink: 0 }
      if (c.position === 'remote') {
        const f = (c.fanFlowM3S ?? 0) / c.faceAreaM2!
        const own = Math.cbrt(Math.pow((c.ramFraction ?? 0.12) * through, 3) + f * f * f)
        return { V: Math.max(0.3, own * (1 - (c.blockedFraction ?? 0))), sink: under }
      }
      return {
        V: Math.max(0.3, V * (1 - (c.blockedFraction ?? 0))),
        sink: c.position === 'ahead-of-condenser' ? stackAir : stackAir + condenser / cStack,
      }
    })
    return { V, stackAir, under, cStack, condenser, coolers, through }
  }

  // coolers
  /** Viscosity at the rating's oil inlet. */
  ratedNu(c: Cooler): number {
    return this.once(c.rating, () => this.nu(c.rating.oilInC ?? 93.3))
  }
  private readonly knownUa = new Map<object, number>()
  private once(key: object, value: () => number): number {
    let known = this.knownUa.get(key)
    if (known === undefined) this.knownUa.set(key, (known = value()))
    return known
  }
  ratedUa(c: Cooler) {
    return this.once(c, () => this.computeRatedUa(c))
  }
  radiatorUa() {
    return this.once(this.b.cooling.radiator, () => this.computeRadiatorUa())
  }
  private computeRatedUa(c: Cooler) {
    const r = c.rating
    const t = r.oilInC ?? 93.3
    const cOil = this.rho(t) * r.oilFlowM3S * this.cp(t)
    const other =
      c.construction === 'in-tank'
        ? COOLANT_RHO_C * r.coolantFlowM3S!
        : 1.184 * c.faceAreaM2! * r.airVelocityMps! * CP_AIR
    return uaOfRating(r.heatW, r.inletDifferenceK, cOil, other)
  }
  private computeRadiatorUa() {
    const r = this.b.cooling.radiator
    return uaOfRating(
      r.rating.heatW,
      r.rating.inletDifferenceK,
      1.184 * r.faceAreaM2 * r.rating.airVelocityMps * CP_AIR,
      COOLANT_RHO_C * r.rating.coolantFlowM3S,
    )
  }
  coolerDp(c: Cooler, q: number, nu: number) {
    const k = CONSTRUCTION[c.construction]
    return (
      c.rating.pressureDropPa *
      Math.pow(q / c.rating.oilFlowM3S, k.dpQ) *
      Math.pow(nu / this.ratedNu(c), k.dpNu)
    )
  }
  groups(): number[][] {
    const out: number[][] = []
    this.coolers.forEach((c, i) => {
      if (c.parallelWithPrevious && i > 0) out[out.length - 1]!.push(i)
      else out.push([i])
    })
    return out
  }
  /** Shares of the flow within a group: equal pressure drops. */
  split(group: number[], q: number, nu: number): { shares: number[]; dp: number } {
    if (group.length === 1) return { shares: [1], dp: this.coolerDp(this.coolers[group[0]!]!, q, nu) }
    const flowAt = (i: number, dp: number) => {
      const c = this.coolers[i]!
      const k = CONSTRUCTION[c.construction]
      const base = c.rating.pressureDropPa * Math.pow(nu / this.ratedNu(c), k.dpNu)
      return c.rating.oilFlowM3S * Math.pow(dp / base, 1 / k.dpQ)
    }
    const total = (logDp: number) => group.reduce((sum, i) => sum + flowAt(i, Math.exp(logDp)), 0) - q
    const dp = Math.exp(bisect(total, -20, 20, 52))
    return { shares: group.map((i) => flowAt(i, dp) / q), dp }
  }
  flow(d: Demand, sump: number): number {
    const f = this.b.cooling.feed ?? {}
    const pMax = f.pressureMaxPa ?? 200000
    const qOpen = f.openFlowM3S ?? 1.6e-4
    const l = this.b.cooling.lines
    const nu = this.nu(sump)
    const rho = this.rho(sump)
    const need = (q: number) => {
      const u = q / ((Math.PI / 4) * l.innerDiameterM * l.innerDiameterM)
      const re = (u * l.innerDiameterM) / (nu * 1e-6)
      const A = Math.pow(
        2.457 * Math.log(1 / (Math.pow(7 / re, 0.9) + (0.27 * (l.roughnessM ?? 1e-5)) / l.innerDiameterM)),
        16,
      )
      const B = Math.pow(37530 / re, 16)
      const fr = 8 * Math.pow(Math.pow(8 / re, 12) + 1 / Math.pow(A + B, 1.5), 1 / 12)
      let p = pMax * Math.pow(q / qOpen, 2)
      p += ((fr * l.lengthM) / l.innerDiameterM + (l.fittingsK ?? 6)) * 0.5 * rho * u * u
      for (const g of this.groups()) p += this.split(g, q, nu).dp
      return p - pMax * d.feed
    }
    return bisect(need, 1e-12, qOpen, 42)
  }

  /** Every heat flow at one instant. */
  instant(d: Demand, T: Temperatures, s0?: { q: number }) {
    const [sump, conv, cas, cool, axle, tc] = T
    const cal = this.input.calibration ?? {}
    const nu = this.nu(sump)
    const air = this.air(d)
    const q0 = s0?.q ?? this.flow(d, sump)
    const q = q0 * (cal.flowScale ?? 1)
    const by = this.b.cooling.bypass
    const x = by ? clamp01((conv - by.openC) / (by.fullC - by.openC)) : 1
    const rhoCp = this.rho(sump) * this.cp(sump)

    const rad = this.b.cooling.radiator
    const th = rad.thermostat ?? { openC: 88, fullC: 98 }
    const y = clamp01((cool - th.openC) / (th.fullC - th.openC))
    const pumpShare = Math.min(1.5, d.engineRpm / (rad.rating.pumpRpm ?? 3000))
    const coolantFlow = y * rad.rating.coolantFlowM3S * pumpShare
    const cCoolant = coolantFlow * COOLANT_RHO_C
    const radUa =
      y > 0
        ? this.radiatorUa() /
          (0.8 * Math.pow((air.V * this.airRho) / (rad.rating.airVelocityMps * 1.184), -0.5) +
            0.2 * Math.pow(y * pumpShare, -0.8))
        : 0
    const radG = y > 0 ? exchange(radUa, cCoolant, air.cStack) : 0

    const chain = (radOut: number) => {
      const heats: number[] = this.coolers.map(() => 0)
      let t = conv
      for (const g of this.groups()) {
        const { shares } = this.split(g, q0, nu)
        let mixed = 0
        g.forEach((i, j) => {
          const c = this.coolers[i]!
          const k = CONSTRUCTION[c.construction]
          const f = c.airShare ?? k.f
          const qi = q * x * shares[j]!
          let h = 0
          if (qi > 0) {
            const oil = Math.pow(c.rating.oilFlowM3S / qi, k.m) * Math.pow(nu / this.ratedNu(c), k.n)
            const inTank = c.construction === 'in-tank'
            const ratio = inTank
              ? coolantFlow / c.rating.coolantFlowM3S!
              : (air.coolers[i]!.V * this.airRho) / (c.rating.airVelocityMps! * 1.184)
            if (ratio > 0) {
              const ua =
                (this.ratedUa(c) / (f * Math.pow(ratio, -k.a) + (1 - f) * oil)) * (cal.coolerScale ?? 1)
              const cOther = inTank ? cCoolant : this.airRho * c.faceAreaM2! * air.coolers[i]!.V * CP_AIR
              h = exchange(ua, qi * rhoCp, cOther) * (t - (inTank ? radOut : air.coolers[i]!.sink))
            }
          }
          heats[i] = h
          mixed += shares[j]! * (qi > 0 ? t - h / (qi * rhoCp) : t)
        })
        t = mixed
      }
      return { heats, out: t }
    }
    const radiator = (heats: number[]) => {
      let stackHeat = air.condenser
      this.coolers.forEach((c, i) => {
        if (c.position === 'ahead-of-condenser' || c.position === 'behind-condenser') stackHeat += heats[i]!
      })
      const sink = air.stackAir + stackHeat / air.cStack
      const Q = radG * (cool - sink)
      return { Q, out: y > 0 ? cool - Q / cCoolant : cool }
    }
    const g = (r: number) => radiator(chain(r).heats).out
    const g0 = g(0)
    const g1 = g(1)
    const radOut = g0 / (1 - (g1 - g0))
    const c = chain(radOut)
    const r = radiator(c.heats)
    const ret = x * c.out + (1 - x) * conv

    const hs = cal.heatScale ?? 1
    const spin = hs * d.spinRefW * Math.pow(nu / 8, 0.3)
    const gen = hs * (d.converterW + d.gearW + d.shiftW + d.pumpW) + spin
    const cOil = rhoCp * q
    const h = 10 + 5.5 * Math.pow(0.4 * air.through, 0.8)
    const hAxle = 10 + 5.5 * Math.pow(0.7 * air.through, 0.8)
    const A = this.b.transmission.caseAreaM2 ?? 0.7
    const pan = 0.4 * A * h * (sump - air.under)
    const caseQ = 0.6 * A * h * (cas - air.under)
    const e = this.b.engine
    const k = e.coolantHeatRatio ?? (e.fuel === 'petrol' ? 0.95 : 0.65)
    const engineHeat = 4000 + k * d.engineW
    let inTank = 0
    this.coolers.forEach((cc, i) => {
      if (cc.construction === 'in-tank') inTank += c.heats[i]!
    })
    const cSump = rhoCp * this.b.transmission.fluidVolumeM3
    const rates: Temperatures = [
      (gen - hs * d.converterW + cOil * (ret - sump) - pan - 250 * (sump - cas)) / cSump,
      (hs * d.converterW - cOil * (conv - sump)) / (this.b.converter.heatCapacityJK ?? 12000),
      (250 * (sump - cas) - caseQ) / (650 * this.b.transmission.dryMassKg),
      (engineHeat + inTank - r.Q) / (this.b.cooling.coolantHeatCapacityJK ?? 150000),
      (d.axleW - hAxle * (this.b.axle.surfaceM2 ?? 1.1) * (axle - air.under)) /
        (this.b.axle.heatCapacityJK ?? 45000),
      (d.transferCaseW - h * (this.b.transferCase.surfaceM2 ?? 0.4) * (tc - air.under)) /
        (this.b.transferCase.heatCapacityJK ?? 25000),
    ]
    return {
      rates,
      coolerFlowM3S: q,
      coolerReturnC: ret,
      coolerHeatW: c.heats,
      heatCoolersW: c.heats.reduce((a, b) => a + b, 0),
      heatGeneratedW: gen,
      heatSpinW: spin,
      heatPanCaseW: pan + caseQ,
      heatEngineToCoolantW: engineHeat,
      heatRadiatorW: r.Q,
      faceVelocityMps: air.V,
      thermostatOpen: y,
      radiatorOutC: r.out,
    }
  }

  life(T: number) {
    const f = this.input.fluidLife ?? {}
    const ref = f.referenceC ?? 79.444
    return (
      ((f.referenceLifeM ?? 160934400) / (f.referenceSpeedMps ?? 15.6464)) *
      Math.pow(2, -(Math.max(T, ref) - ref) / (f.halvingK ?? 11.111))
    )
  }

  /** Duty as driven with a fixed step [s]. */
  run(stepS = 0.5) {
    const duty = this.input.duty
    const st = duty.start ?? {}
    const s0 = st.sumpC ?? duty.ambientC
    const a0 = st.axleC ?? duty.ambientC
    let T: Temperatures = [s0, s0, s0, st.coolantC ?? duty.ambientC, a0, a0]
    let peakSump = s0
    let peakHot = s0
    let meanInt = 0
    let total = 0
    let distance = 0
    let damage = 0
    const share = this.b.converter.oilShare ?? 0.35
    const segments = duty.segments.map((s) => {
      const d = this.demand(s)
      const duration = s.durationS ?? s.distanceM! / d.speed
      const n = Math.max(1, Math.ceil(duration / stepS))
      const h = duration / n
      let segSump = T[0]
      let segHot = T[1]
      for (let i = 0; i < n; i++) {
        const next = this.rungeKutta(d, T, h)
        const rate = (t: Temperatures) => (1 - share) / this.life(t[0]) + share / this.life(t[1])
        damage += (h / 2) * (rate(T) + rate(next))
        meanInt += (h / 2) * (T[0] + next[0])
        T = next
        segSump = Math.max(segSump, T[0])
        segHot = Math.max(segHot, T[1])
      }
      total += duration
      distance += d.speed * duration
      peakSump = Math.max(peakSump, segSump)
      peakHot = Math.max(peakHot, segHot)
      return {
        demand: d,
        duration,
        peakSumpC: segSump,
        peakCoolerInletC: segHot,
        end: T,
        at: this.instant(d, T),
      }
    })
    return {
      segments,
      peakSumpC: peakSump,
      peakCoolerInletC: peakHot,
      meanSumpC: meanInt / total,
      fluidDamage: damage,
      totalS: total,
      distanceM: distance,
    }
  }
  /** The state a logged moment asks for: force scaled down to what the engine has where it has not enough. */
  logged(v: number, s: Segment, accel: number): { demand: Demand; limited: boolean } {
    if (v < 0.1) return { demand: this.coasting(0, s), limited: false }
    const full = this.drive(v, s, accel)
    if (full) return { demand: full, limited: false }
    const F = this.force(v, s, accel)
    const scaled = new ScaledForce(this.input)
    let lo = 0
    let hi = 1
    for (let i = 0; i < 60; i++) {
      const m = (lo + hi) / 2
      scaled.fixed = m * F
      if (scaled.drive(v, s)) lo = m
      else hi = m
    }
    scaled.fixed = lo * F
    return { demand: scaled.drive(v, s)!, limited: true }
  }
  /** A log with grade, replayed piecewise-constant between samples. */
  replay(
    trace: { timeS: number[]; speedMps: number[]; grade: number[] } & Omit<
      Partial<Segment>,
      'speedMps' | 'grade'
    >,
    stepS = 0.5,
  ) {
    const st = this.input.duty.start ?? {}
    const amb = this.input.duty.ambientC
    const s0 = st.sumpC ?? amb
    const a0 = st.axleC ?? amb
    let T: Temperatures = [s0, s0, s0, st.coolantC ?? amb, a0, a0]
    const out = { sumpC: [T[0]], coolerInletC: [T[1]], coolantC: [T[3]], forceLimitedSamples: 0 }
    for (let i = 1; i < trace.timeS.length; i++) {
      const dt = trace.timeS[i]! - trace.timeS[i - 1]!
      const v = (trace.speedMps[i]! + trace.speedMps[i - 1]!) / 2
      const segment: Segment = {
        kind: 'steady',
        grade: (trace.grade[i]! + trace.grade[i - 1]!) / 2,
        surface: trace.surface,
        range: trace.range,
        topGear: trace.topGear,
        headwindMps: trace.headwindMps,
      }
      const { demand, limited } = this.logged(v, segment, (trace.speedMps[i]! - trace.speedMps[i - 1]!) / dt)
      if (limited) out.forceLimitedSamples++
      T = this.advance(demand, T, dt, stepS)
      out.sumpC.push(T[0])
      out.coolerInletC.push(T[1])
      out.coolantC.push(T[3])
    }
    return out
  }
  private advance(d: Demand, from: Temperatures, duration: number, stepS: number): Temperatures {
    const n = Math.max(1, Math.ceil(duration / stepS))
    const h = duration / n
    let T = from
    for (let i = 0; i < n; i++) T = this.rungeKutta(d, T, h)
    return T
  }
  private rungeKutta(d: Demand, T: Temperatures, h: number): Temperatures {
    const at = (rate: Temperatures, k: number) => T.map((v, j) => v + k * rate[j]!) as Temperatures
    const k1 = this.instant(d, T).rates
    const k2 = this.instant(d, at(k1, h / 2)).rates
    const k3 = this.instant(d, at(k2, h / 2)).rates
    const k4 = this.instant(d, at(k3, h)).rates
    return T.map((v, j) => v + (h / 6) * (k1[j]! + 2 * k2[j]! + 2 * k3[j]! + k4[j]!)) as Temperatures
  }
  /** What a segment settles at: implicit pseudo-time steps that grow, from a given start. */
  settle(s: Segment, from: Temperatures): Temperatures {
    const d = this.demand(s)
    let T = from
    let dt = 20
    for (let n = 0; n < 400; n++) {
      const f = this.instant(d, T).rates
      const J: number[][] = []
      for (let j = 0; j < 6; j++) {
        const p = [...T] as Temperatures
        p[j]! += 1e-4
        const fp = this.instant(d, p).rates
        for (let i = 0; i < 6; i++) (J[i] ??= [])[j] = (fp[i]! - f[i]!) / 1e-4
      }
      const M = J.map((row, i) => row.map((v, j) => (i === j ? 1 / dt : 0) - v))
      const dx = solve(M, f)
      const size = Math.max(...dx.map(Math.abs))
      T = T.map((v, i) => v + dx[i]!) as Temperatures
      if (size < 1e-6 && dt > 1e6) break
      dt = size < 1 ? Math.min(dt * 2, 1e9) : size > 10 ? Math.max(dt / 2, 1) : dt
    }
    return T
  }
}

/** The same truck under a tractive force that is given instead of computed. */
class ScaledForce extends ReferenceModel {
  fixed = 0
  override force(): number {
    return this.fixed
  }
}

function solve(A: number[][], b: number[]): number[] {
  const n = b.length
  const M = A.map((r, i) => [...r, b[i]!])
  for (let c = 0; c < n; c++) {
    let p = c
    for (let r = c + 1; r < n; r++) if (Math.abs(M[r]![c]!) > Math.abs(M[p]![c]!)) p = r
    const swap = M[c]!
    M[c] = M[p]!
    M[p] = swap
    for (let r = 0; r < n; r++) {
      if (r === c) continue
      const k = M[r]![c]! / M[c]![c]!
      for (let j = c; j <= n; j++) M[r]![j]! -= k * M[c]![j]!
    }
  }
  return M.map((r, i) => r[n]! / r[i]!)
}
