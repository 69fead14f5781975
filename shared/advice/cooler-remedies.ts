import {
  CONSTRUCTION_WORDS,
  createGenericCooler,
  createGenericCore,
  GENERIC_SIZES,
  type GenericSize,
  REMOTE_FAN_FACE_MPS,
} from '../build-sheet/generic-cooler'
import { findSheetValue } from '../build-sheet/sheet'
import { createGenericTank } from '../cooling-loop/generic-tank'
import { LARGEST_CORE_M2 } from '../heat/reference-point'
import { DEFAULTS } from '../heat/resolve'
import type { AirCooler, Cooler, HeatInput } from '../schemas/heat-input'
import type { BuildSheet } from '../schemas/sheet'
import { setupRemedy } from './driving-remedies'
import type { Situation } from './situation'
import type { Remedy, RemedyWhat } from './types'
import { figure, temperature, type Words, words } from './words'

/** What can be done to the coolers, the loop, the air and the sheet. None of it is computed here; see `Trials`. */

const MOST_COOLERS = 6
/** Opens and is full at [°C]: a thermal bypass as it is sold (175 and 205 °F); common practice, no source. */
const USUAL_BYPASS = { openC: 79.4, fullC: 96.1 } as const
/** A bypass that opens earlier by this much [K]; an example. */
const EARLIER_K = 10
/** How much of a core a winter cover closes; judgement. */
const COVERED = 0.9
/** Bores of cooler lines that are sold, 3/8 and 1/2 in [m]. */
const LINE_BORES_M = [0.0095, 0.0127] as const
/** Fittings of a loop without needless elbows, as velocity heads; common practice, no source. */
const FEW_FITTINGS_K = DEFAULTS.fittingsK

const coolersRemedy = (id: string, label: Words, coolers: Cooler[]): Remedy =>
  setupRemedy(id, label, { coolers })

const sheetRemedy = (
  id: string,
  label: Words,
  changed: Omit<Extract<RemedyWhat, { kind: 'sheet' }>, 'kind'>,
): Remedy => ({ id, label, what: { kind: 'sheet', ...changed }, effect: null })

const coolersOf = (input: HeatInput | null): readonly Cooler[] => input?.build.cooling.coolers ?? []
export const isInAir = (cooler: Cooler): cooler is AirCooler => cooler.construction !== 'in-tank'
const isInFront = (cooler: Cooler): cooler is AirCooler => isInAir(cooler) && cooler.position !== 'remote'

/** A generic stacked-plate core ahead of the condenser, of a size class, as the last of the loop. */
export function addCore({ input }: Situation, size: GenericSize): Remedy[] {
  const coolers = coolersOf(input)
  if (input === null || coolers.length >= MOST_COOLERS) return []
  const core = createGenericCooler({ construction: 'stacked-plate', position: 'ahead-of-condenser', size })
  const label = words`Add a stacked-plate core ahead of the condenser, ${faceWords(core)}, last in the loop`
  return [coolersRemedy(`add-${size}`, label, [...coolers, core])]
}

/** The largest single core there is, ahead of the condenser; or under the body with a fan of its own. */
export function addLargestCore({ input }: Situation, position: 'ahead-of-condenser' | 'remote'): Remedy[] {
  const coolers = coolersOf(input)
  if (input === null || coolers.length >= MOST_COOLERS) return []
  const fan = position === 'remote'
  const core = createGenericCore({
    name: 'Largest stacked plate cooler',
    construction: 'stacked-plate',
    position,
    faceAreaM2: LARGEST_CORE_M2,
    fan,
  })
  const place = fan ? 'under the body with a fan of its own' : 'ahead of the condenser'
  const label = words`Add the largest stacked-plate core ${place}, ${faceWords(core)}`
  return [coolersRemedy(`add-largest-${position}`, label, [...coolers, core])]
}

const faceWords = (core: AirCooler): Words => words`face ${figure(core.faceAreaM2, 'area')}`

/** Sizes from small to large, as a shop would try them. */
export const GENERIC_SIZE_NAMES = Object.keys(GENERIC_SIZES) as GenericSize[]

/** A cooler counted as what is usual for its kind and face, whatever its rating says. */
export function countAsGeneric({ input }: Situation, index: number): Remedy[] {
  const coolers = coolersOf(input)
  const cooler = coolers[index]
  if (cooler === undefined) return []
  const usual = isInAir(cooler)
    ? `a usual ${CONSTRUCTION_WORDS[cooler.construction]} core of its size`
    : 'a usual cooler in a radiator tank'
  const label = words`Count ${cooler.name} as ${usual}`
  return [coolersRemedy(`generic-${index}`, label, coolers.with(index, genericLike(cooler)))]
}

function genericLike(cooler: Cooler): Cooler {
  if (!isInAir(cooler)) return { ...cooler, rating: createGenericTank().rating }
  const { name, construction, position, faceAreaM2 } = cooler
  const { rating } = createGenericCore({ name, construction, position, faceAreaM2 })
  return { ...cooler, rating }
}

/** A cooler out of the loop. */
export function takeOut({ input }: Situation, index: number): Remedy[] {
  const coolers = coolersOf(input)
  const cooler = coolers[index]
  if (cooler === undefined) return []
  return [coolersRemedy(`without-${index}`, words`Leave out ${cooler.name}`, withoutCooler(coolers, index))]
}

/** The one behind a cooler that stood in parallel with it opens a group of its own. */
function withoutCooler(coolers: readonly Cooler[], index: number): Cooler[] {
  const next = coolers[index + 1]
  const opened =
    next?.parallelWithPrevious === true && coolers[index]?.parallelWithPrevious !== true
      ? coolers.with(index + 1, { ...next, parallelWithPrevious: false })
      : [...coolers]
  return opened.toSpliced(index, 1)
}

/** Coolers in the air of the radiator moved under the body, each with a fan of its own. */
export function moveFrontCores({ input }: Situation): Remedy[] {
  const coolers = coolersOf(input)
  const front = coolers.filter(isInFront)
  if (front.length === 0) return []
  const names = front.map(({ name }) => name).join(' and ')
  const moved = coolers.map((cooler) => (isInFront(cooler) ? underBody(cooler) : cooler))
  const label = words`Move ${names} under the body, with a fan`
  return [coolersRemedy('move-front-cores', label, moved)]
}

const underBody = (cooler: AirCooler): AirCooler => ({
  ...cooler,
  position: 'remote',
  fanFlowM3S: REMOTE_FAN_FACE_MPS * cooler.faceAreaM2,
})

/** The radiator tank as the first the oil meets, so that the cores in air have the last word. */
export function tankFirst({ input }: Situation): Remedy[] {
  const coolers = coolersOf(input)
  const index = coolers.findIndex((cooler) => !isInAir(cooler))
  const tank = coolers[index]
  if (tank === undefined || index === 0) return []
  const rest = withoutCooler(coolers, index)
  const { parallelWithPrevious: _, ...alone } = tank
  return [coolersRemedy('tank-first', words`Let the oil meet ${tank.name} first`, [alone, ...rest])]
}

/** The radiator tank out of the loop. */
export function withoutTank(situation: Situation): Remedy[] {
  return takeOut(
    situation,
    coolersOf(situation.input).findIndex((cooler) => !isInAir(cooler)),
  )
}

/** Front cores covered for the winter. */
export function coverFrontCores({ input }: Situation): Remedy[] {
  const coolers = coolersOf(input)
  if (!coolers.some(isInFront)) return []
  const covered = coolers.map((cooler) =>
    isInFront(cooler)
      ? { ...cooler, blockedFraction: Math.max(COVERED, cooler.blockedFraction ?? 0) }
      : cooler,
  )
  const label = words`Cover ${figure(COVERED, 'share')} of the front cores in winter`
  return [coolersRemedy('cover-front-cores', label, covered)]
}

/** Two cores in air side by side instead of one behind the other: the oil has two ways. */
export function sideBySide({ input }: Situation): Remedy[] {
  const coolers = coolersOf(input)
  const index = coolers.findIndex((cooler, place) => {
    const before = coolers[place - 1]
    return before !== undefined && isInAir(before) && isInAir(cooler) && cooler.parallelWithPrevious !== true
  })
  const second = coolers[index]
  if (second === undefined) return []
  const label = words`Put ${second.name} beside ${coolers[index - 1]?.name ?? ''} (parallel)`
  return [
    coolersRemedy('side-by-side', label, coolers.with(index, { ...second, parallelWithPrevious: true })),
  ]
}

/** The next wider line that is sold. */
export function widerLine({ input }: Situation): Remedy[] {
  const boreM = input?.build.cooling.lines.innerDiameterM
  const wider = LINE_BORES_M.find((one) => boreM !== undefined && one > boreM * 1.05)
  if (boreM === undefined || wider === undefined) return []
  const label = words`Lines of ${figure(wider, 'length')} bore in place of ${figure(boreM, 'length')}`
  return [
    sheetRemedy('wider-line', label, {
      values: [{ path: 'cooling.lines.innerDiameterM', value: wider }],
    }),
  ]
}

/** A loop without needless elbows, filters and check valves. */
export function fewerFittings({ input }: Situation): Remedy[] {
  const fittingsK = input?.build.cooling.lines.fittingsK
  if (fittingsK === undefined || fittingsK <= FEW_FITTINGS_K) return []
  const label = words`Take out needless elbows, filters and check valves`
  return [
    sheetRemedy('fewer-fittings', label, {
      values: [{ path: 'cooling.lines.fittingsK', value: FEW_FITTINGS_K }],
    }),
  ]
}

/** A thermal bypass, where there is none. */
export function fitBypass({ request, input }: Situation): Remedy[] {
  // A set-up that takes the bypass out would take this one out too.
  if (input === null || input.build.cooling.bypass !== undefined) return []
  if (request.setup?.change.removeBypass === true) return []
  const { openC, fullC } = USUAL_BYPASS
  const label = words`Fit a thermal bypass that opens from ${temperature(openC)} to ${temperature(fullC)}`
  return [
    sheetRemedy('fit-bypass', label, {
      values: [
        { path: 'cooling.bypass.openC', value: openC },
        { path: 'cooling.bypass.fullC', value: fullC },
      ],
    }),
  ]
}

export function removeBypass({ input }: Situation): Remedy[] {
  if (input?.build.cooling.bypass === undefined) return []
  return [setupRemedy('remove-bypass', words`Take the thermal bypass out`, { removeBypass: true })]
}

/** A bypass that opens earlier. */
export function earlierBypass({ input }: Situation): Remedy[] {
  const bypass = input?.build.cooling.bypass
  if (bypass === undefined) return []
  const openC = bypass.openC - EARLIER_K
  const label = words`A bypass that begins to open at ${temperature(openC)} in place of ${temperature(bypass.openC)}`
  return [
    sheetRemedy('earlier-bypass', label, {
      values: [
        { path: 'cooling.bypass.openC', value: openC },
        { path: 'cooling.bypass.fullC', value: bypass.fullC - EARLIER_K },
      ],
    }),
  ]
}

/** What stands in front of the stack taken away. */
export function clearTheFront({ input }: Situation): Remedy[] {
  const blocked = input?.build.cooling.stack.blockedFraction ?? 0
  if (blocked <= 0) return []
  const label = words`Clear the front: ${figure(blocked, 'share')} of it is blocked`
  return [
    sheetRemedy('clear-front', label, { values: [{ path: 'cooling.stack.blockedFraction', value: 0 }] }),
  ]
}

/** Peak power as far as the peak torque carries it. */
export function powerFromTorque({ input }: Situation): Remedy[] {
  if (input === null) return []
  const { peakTorqueNm, peakPowerRpm } = input.build.engine
  const powerW = Math.floor((peakTorqueNm * peakPowerRpm * Math.PI) / 30)
  const label = words`If the torque is right: ${figure(powerW, 'power')} at most`
  return [sheetRemedy('power-from-torque', label, { values: [{ path: 'engine.peakPowerW', value: powerW }] })]
}

/** Leaves of a sheet that a rating lacks, filled with what is usual. */
export function fillRating(sheet: BuildSheet, at: string, lacking: Record<string, number>): Remedy[] {
  const values = Object.entries(lacking).map(([name, value]) => ({ path: `${at}.rating.${name}`, value }))
  const name = findSheetValue(sheet, `${at}.name`)?.value
  const label = words`Count the rating of ${typeof name === 'string' ? name : 'this cooler'} at usual conditions until they are known`
  return [sheetRemedy(`usual-conditions-${at}`, label, { values })]
}

/** A radiator counted at a heat its air can carry. */
export function countRadiatorAt(heatW: number): Remedy {
  const label = words`Count the radiator at ${figure(heatW, 'heatRate')} until its rating is mended`
  return sheetRemedy('radiator-heat', label, {
    values: [{ path: 'cooling.radiator.rating.heatW', value: heatW }],
  })
}
