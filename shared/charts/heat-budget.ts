import type { ChartFormats } from './formats'

/** Where the heat of one moment comes from and where it goes [W]. */
export interface HeatBudgetData {
  /** What moment it is, in words: "at the top of the climb". */
  moment: string
  sources: { converterW: number; gearW: number; spinW: number; pumpW: number; shiftW: number }
  coolers: { name: string; heatW: number }[]
  panCaseW: number
}

export interface BudgetRow {
  id: string
  name: string
  heatW: number
  /** Length of the bar as a share of the longest side, 0–1. */
  share: number
  side: 'in' | 'out'
  /** Drawn hatched: heat that is on its way out, or is stored. */
  hatched: boolean
  note?: string
}

export interface BudgetDrawing {
  rows: BudgetRow[]
  inW: number
  outW: number
  /** What stays in the oil and the metal, heating them; negative while they cool down. */
  storedW: number
}

const SOURCE_WORDS: [keyof HeatBudgetData['sources'], string, string][] = [
  ['converterW', 'Converter slip', 'torque converter'],
  ['gearW', 'Gears', 'gear teeth and bearings'],
  ['spinW', 'Drag of oil and clutches', 'spinning in oil'],
  ['pumpW', 'Pump', 'line pressure'],
  ['shiftW', 'Shifts', 'clutches while shifting'],
]

/** A cooler that gives less than this takes no part worth a word [W]. */
const NOTHING_W = 5

/**
 * Sorts one moment's heat into bars: what makes it, what carries it away, and what is left to warm the fluid.
 * In equals out plus stored, by construction of the balance.
 */
export function drawHeatBudget(data: HeatBudgetData): BudgetDrawing {
  const inRows = SOURCE_WORDS.map(([key, name, note]) => ({
    id: key,
    name,
    heatW: data.sources[key],
    note,
  })).filter((row) => row.heatW > NOTHING_W)
  const warming = data.coolers.filter((cooler) => cooler.heatW < -NOTHING_W)
  const inW = Object.values(data.sources).reduce((sum, heatW) => sum + heatW, 0)
  const outW = data.coolers.reduce((sum, cooler) => sum + cooler.heatW, 0) + data.panCaseW
  const storedW = inW - outW
  const outRows = [
    ...data.coolers
      .filter((cooler) => cooler.heatW >= -NOTHING_W)
      .map((cooler, index) => ({
        id: `cooler-${index}`,
        name: cooler.name,
        heatW: Math.max(0, cooler.heatW),
      })),
    { id: 'pan-case', name: 'Pan and case, to the air', heatW: Math.max(0, data.panCaseW) },
    ...(storedW > NOTHING_W ? [{ id: 'stored', name: 'Stays in: warms oil and metal', heatW: storedW }] : []),
  ]
  const intoOil = [
    ...inRows,
    ...warming.map((cooler, index) => ({
      id: `warming-${index}`,
      name: `${cooler.name} warms the oil`,
      heatW: -cooler.heatW,
      note: 'coolant hotter than the oil',
    })),
    ...(storedW < -NOTHING_W
      ? [
          {
            id: 'released',
            name: 'Given back: oil and metal cool down',
            heatW: -storedW,
            note: 'from earlier',
          },
        ]
      : []),
  ].sort((a, b) => b.heatW - a.heatW)
  const longest = Math.max(1, ...intoOil.map((row) => row.heatW), ...outRows.map((row) => row.heatW))
  return {
    rows: [
      ...intoOil.map((row) => ({ ...row, share: row.heatW / longest, side: 'in' as const, hatched: false })),
      ...outRows.map((row) => ({ ...row, share: row.heatW / longest, side: 'out' as const, hatched: true })),
    ],
    inW,
    outW,
    storedW,
  }
}

/** Title that says what the budget says. */
export function heatBudgetTitle(data: HeatBudgetData, formats: ChartFormats): string {
  const { inW, storedW, rows } = drawHeatBudget(data)
  const most = rows.find((row) => row.side === 'in')
  if (!most || inW < NOTHING_W) return 'No heat is made at this moment'
  const share = Math.round((most.heatW / Math.max(inW, most.heatW)) * 100)
  const rising =
    storedW > 0.03 * inW ? `; ${formats.heat(storedW)} of it still stays in` : '; as much leaves as comes in'
  const falling = storedW < -0.03 * inW ? '; more leaves than comes in' : rising
  return `${formats.heat(inW)} of heat, ${share} % from ${most.name.toLowerCase()}${falling}`
}
