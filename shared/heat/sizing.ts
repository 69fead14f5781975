import type { SizingRequest, Targets } from '../schemas/estimate'
import { AppError } from '../errors'
import { CONVERTER, SUMP } from './balances'
import { withCoolers } from './cooling-system'
import { equilibriumOf } from './equilibrium'
import { peaksOfDuty } from './estimate'
import type { LoopTable } from './loop-flow'
import type { OperatingPoint } from './operating-point'
import { LARGEST_CORE_M2, genericCooler, heatAtReferencePoint } from './reference-point'
import { findRoot } from './roots'
import { makeThermal, makeTruck, operatingPoints, startTemperatures } from './truck'
import type { Truck } from './truck'
import type { Sizing, TargetName } from './types'

/** The smallest cooler that holds the targets. */

const TARGET_NAMES = ['sumpC', 'coolerInletC'] as const
const SMALLEST_AREA_M2 = 1e-6
const AREA_TOLERANCE_M2 = 1e-7
/** Shares of the found area at which it is checked that nothing smaller holds. */
const CHECK_SHARES = [0.35, 0.7] as const
/** Areas looked at, as shares of the largest core, where the largest itself does not hold. */
const SCAN_POINTS = 24

type Excess = Record<TargetName, number>

/** Hottest temperatures that count, less their targets [K]; -Infinity without a target. */
function excessOver(targets: Targets, hottest: Excess): Excess {
  return {
    sumpC: targets.sumpC === undefined ? -Infinity : hottest.sumpC - targets.sumpC,
    coolerInletC:
      targets.coolerInletC === undefined ? -Infinity : hottest.coolerInletC - targets.coolerInletC,
  }
}

const worst = (excess: Excess) => Math.max(excess.sumpC, excess.coolerInletC)
const decider = (excess: Excess): TargetName =>
  excess.sumpC >= excess.coolerInletC ? TARGET_NAMES[0] : TARGET_NAMES[1]

/** Tries coolers on one truck; operating points do not depend on the cooler and are solved once. */
class CoolerTrial {
  private readonly request: SizingRequest
  private readonly truck: Truck
  private readonly points: OperatingPoint[]
  private readonly guesses: Float64Array[]
  private readonly tables = new Map<number, LoopTable>()
  private readonly tried = new Map<number, Excess>()

  constructor(request: SizingRequest) {
    this.request = request
    this.truck = makeTruck(request.input)
    this.points = operatingPoints(this.truck, request.input.duty.segments)
    const start = startTemperatures(this.truck.resolved.start)
    this.guesses = this.points.map(() => start)
  }

  get oil() {
    return this.truck.resolved.masses.oil
  }

  /** Excess over each target with a cooler of an area added; 0 for none. Each area is tried once. */
  excess(faceAreaM2: number): Excess {
    const known = this.tried.get(faceAreaM2)
    if (known !== undefined) return known
    const excess = this.tryArea(faceAreaM2)
    this.tried.set(faceAreaM2, excess)
    return excess
  }

  private tryArea(faceAreaM2: number): Excess {
    const { resolved, system } = this.truck
    const { construction, position, targets, basis, input } = this.request
    const coolers =
      faceAreaM2 === 0
        ? system.coolers
        : [...system.coolers, genericCooler(this.oil, construction, position, faceAreaM2)]
    const added = withCoolers(resolved, system, coolers)
    // pressure drop and oil-side factors do not depend on the area, so neither do the loop's tables
    if (faceAreaM2 > 0) added.tables = this.tables
    const truck = { resolved, system: added }
    return excessOver(
      targets,
      basis === 'peak' ? peaksOfDuty(truck, input.duty.segments, this.points) : this.hottestRest(truck),
    )
  }

  /** Hottest equilibrium of the segments that are not a stall. */
  private hottestRest(truck: Truck): Excess {
    const start = startTemperatures(truck.resolved.start)
    const hottest = { sumpC: -Infinity, coolerInletC: -Infinity }
    const thermal = makeThermal(truck)
    this.points.forEach((point, index) => {
      if (point.kind === 'stall') return
      thermal.set(point)
      const rest = equilibriumOf(thermal, start, this.guesses[index])
      this.guesses[index] = rest
      hottest.sumpC = Math.max(hottest.sumpC, rest[SUMP]!)
      hottest.coolerInletC = Math.max(hottest.coolerInletC, rest[CONVERTER]!)
    })
    return hottest
  }
}

/** An area that holds: the largest core, or, as bigger is not always cooler, the first of a scan. */
function findHoldingArea(miss: (area: number) => number): number | undefined {
  if (miss(LARGEST_CORE_M2) <= 0) return LARGEST_CORE_M2
  for (let k = 1; k < SCAN_POINTS; k++) {
    const area = (LARGEST_CORE_M2 * k) / SCAN_POINTS
    if (miss(area) <= 0) return area
  }
  return undefined
}

/** Smallest area that holds, below one that does. */
function smallestArea(miss: (area: number) => number, holding: number): number {
  if (miss(SMALLEST_AREA_M2) <= 0) return SMALLEST_AREA_M2
  let high = holding
  for (;;) {
    const area = findRoot(miss, SMALLEST_AREA_M2, high, miss(SMALLEST_AREA_M2), miss(high), AREA_TOLERANCE_M2)
    const smaller = CHECK_SHARES.map((share) => share * area).find((candidate) => miss(candidate) <= 0)
    if (smaller === undefined) return area
    high = smaller
  }
}

/**
 * Smallest face area of a generic cooler that holds the targets, added last in the loop, in series.
 * @param request - input, construction, position, targets, basis
 * @returns area, to 1e-7 m², heat and UA at the reference point, and the target that decided; 0 when the targets hold
 * already
 * @throws AppError no_single_cooler when no core up to 0.12 m² does; the errors of `estimate`
 */
export function sizing(request: SizingRequest): Sizing {
  const trial = new CoolerTrial(request)
  if (worst(trial.excess(0)) <= 0) return { faceAreaM2: 0, heatW: 0, uaWK: 0 }
  const miss = (area: number) => worst(trial.excess(area))
  const holding = findHoldingArea(miss)
  if (holding === undefined) throw noSingleCooler(request, trial)
  const faceAreaM2 = smallestArea(miss, holding)
  const uaWK = genericCooler(trial.oil, request.construction, request.position, faceAreaM2).uaRatedWK
  return {
    faceAreaM2,
    heatW: heatAtReferencePoint(trial.oil, uaWK, faceAreaM2),
    uaWK,
    decidedBy: decider(trial.excess(faceAreaM2)),
  }
}

function noSingleCooler(request: SizingRequest, trial: CoolerTrial): AppError {
  const excess = trial.excess(LARGEST_CORE_M2)
  const decidedBy = decider(excess)
  return new AppError('no_single_cooler', {
    issues: [
      {
        path: `targets.${decidedBy}`,
        message: `the largest single core (${LARGEST_CORE_M2} m²) still misses ${request.targets[decidedBy]} °C by ${excess[decidedBy].toPrecision(3)} K; try two coolers, another place, lock-up or a lower speed`,
      },
    ],
    facts: { decidedBy },
  })
}
