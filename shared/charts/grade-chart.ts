import { linearAxis, toTenth, type Axis, type AxisUnit } from './axis'
import { bandPath, interpolateAt, linePath, splitAtBreaks, splitByRung, type CurvePoint } from './curves'
import { formatGrade, formatGradeHeld, type ChartFormats } from './formats'
import { shortenName, spreadLabels } from './labels'
import { RUNG_WEIGHTS, type Rung, type RungLimit } from './rungs'

/** The two places the chart tells apart; never one curve against the other's limit. */
export type GradePlace = 'coolerInletC' | 'sumpC'

/** The truck at one grade. */
export interface GradePoint {
  grade: number
  sumpC: number
  coolerInletC: number
  speedMps: number
  speedHeld: boolean
  gear: number
  locked: boolean
}

/** P10 and P90 at one grade [°C]. */
export interface GradeBandPoint {
  grade: number
  sumpC: { low: number; high: number }
  coolerInletC: { low: number; high: number }
}

/** What a curve stands for, which decides how it is drawn. */
export type GradeSeriesKind = 'present' | 'other-lock' | 'endless' | 'set-up'

export interface GradeSeries {
  id: string
  name: string
  kind: GradeSeriesKind
  points: GradePoint[]
  band?: GradeBandPoint[]
}

/** What ends the grade that is held. */
export interface GradeHeldSummary {
  grade: number | null
  endedBy: GradePlace | 'speed' | 'none'
  /** Steepest grade looked at. */
  maxGrade: number
}

export interface GradeChartData {
  series: GradeSeries[]
  limits: Record<GradePlace, RungLimit[]>
  speedMps: number
  /** Length of the climb [m]; undefined where only the endless climb is drawn. */
  climbM?: number
  held: GradeHeldSummary
  /** Grade of the hill in the drive cycle, marked on the axis. */
  hillGrade?: number
  maxGrade: number
}

export interface GradeStroke {
  path: string
  rung: Rung
  weight: number
}

export interface GradeCurve {
  id: string
  kind: GradeSeriesKind
  dash: string
  strokes: GradeStroke[]
  /** `leader`: whether a line leads from the curve to its name; not across the plot, where the curve left it early. */
  label: {
    x: number
    y: number
    fromX: number
    fromY: number
    leader: boolean
    text: string
    name: string
  } | null
}

export interface GradeMark {
  x: number
  y1: number
  y2: number
  text: string
}

export interface GradePanel {
  place: GradePlace
  title: string
  left: number
  top: number
  width: number
  height: number
  xAxis: Axis
  yAxis: Axis
  limits: { y: number; text: string; rung: Rung }[]
  bands: string[]
  curves: GradeCurve[]
  breaks: GradeMark[]
}

export interface GradeDrawing {
  width: number
  height: number
  panels: GradePanel[]
}

export const GRADE_PLACES: readonly GradePlace[] = ['coolerInletC', 'sumpC']

export const GRADE_PLACE_WORDS: Record<GradePlace, string> = {
  coolerInletC: 'To-cooler line (hot line)',
  sumpC: 'Pan',
}

/** Dash of each curve: told apart in gray print and by anyone who does not see the colors. */
const SET_UP_DASHES = ['10 3 2 3', '3 3', '14 4'] as const
const KIND_DASHES: Record<Exclude<GradeSeriesKind, 'set-up'>, string> = {
  present: '',
  'other-lock': '7 4',
  endless: '1.5 2.5',
}

/** Dash of every series, by its place in the list. */
export function gradeDashes(series: readonly GradeSeries[]): string[] {
  let setUps = 0
  return series.map((one) => {
    if (one.kind !== 'set-up') return KIND_DASHES[one.kind]
    const dash = SET_UP_DASHES[setUps % SET_UP_DASHES.length] ?? SET_UP_DASHES[0]
    setUps += 1
    return dash
  })
}

const percentAxis: AxisUnit = {
  unit: '%',
  toDisplay: (grade) => grade * 100,
  fromDisplay: (percent) => percent / 100,
}

/** Two neighbours that no single stroke may join: the state of the truck jumps between them. */
const jumps = (before: GradePoint, after: GradePoint): boolean => before.locked !== after.locked

/** Title that says what the chart says. */
export function gradeChartTitle(
  { held, speedMps, climbM }: Pick<GradeChartData, 'held' | 'speedMps' | 'climbM'>,
  formats: ChartFormats,
): string {
  const at = `at ${formats.speed(speedMps)}${climbM === undefined ? '' : ` for ${formats.distance(climbM)}`}`
  if (held.grade === null)
    return held.endedBy === 'speed'
      ? `Does not hold ${formats.speed(speedMps)} even on the flat`
      : `Too hot even on the flat ${at}`
  const grade = formatGradeHeld(held.grade)
  switch (held.endedBy) {
    case 'none':
      return `Holds ${grade} ${at}, the steepest looked at`
    case 'speed':
      return `Holds ${grade} ${at}; steeper, it slows down`
    case 'sumpC':
      return `Holds ${grade} ${at}; steeper, the pan is too hot`
    case 'coolerInletC':
      return `Holds ${grade} ${at}; steeper, the to-cooler line is too hot`
  }
}

/** One sentence for someone who does not see the drawing. */
export function gradeChartSummary(data: GradeChartData, formats: ChartFormats): string {
  const present = data.series.find((series) => series.kind === 'present')
  if (!present || present.points.length === 0) return 'There is no grade this truck can climb at this speed.'
  const low = present.points[0] as GradePoint
  const high = present.points.at(-1) as GradePoint
  const parts = [
    `From ${formatGrade(low.grade)} to ${formatGrade(high.grade)} the pan goes from ${formats.temperature(low.sumpC)} to ${formats.temperature(high.sumpC)}, the to-cooler line from ${formats.temperature(low.coolerInletC)} to ${formats.temperature(high.coolerInletC)}`,
  ]
  const lost = present.points.find(
    (point, index) => index > 0 && jumps(present.points[index - 1] as GradePoint, point),
  )
  if (lost) parts.push(`the converter ${lost.locked ? 'locks' : 'unlocks'} at ${formatGrade(lost.grade)}`)
  const slow = present.points.find((point) => !point.speedHeld)
  if (slow) parts.push(`it slows down from ${formatGrade(slow.grade)}`)
  return `${parts.join('; ')}.`
}

/** A row of the table beside the chart: the very points that are drawn. */
export interface GradeTableRow {
  grade: number
  speedMps: number
  speedHeld: boolean
  gear: number
  locked: boolean
  sumpC: number
  coolerInletC: number
}

export function gradeTableRows(series: GradeSeries): GradeTableRow[] {
  return series.points.map((point) => ({ ...point }))
}

/** What every curve reads at one grade, for the point reading by keyboard or pointer. */
export interface GradeReading {
  id: string
  name: string
  sumpC: number | undefined
  coolerInletC: number | undefined
  /** The nearest computed point, for gear and lock-up. */
  nearest: GradePoint | undefined
}

export function readGradeAt(data: GradeChartData, grade: number): GradeReading[] {
  return data.series.map((series) => {
    const piece = splitAtBreaks(series.points, jumps).find(
      (points) => (points[0]?.grade ?? Infinity) <= grade && (points.at(-1)?.grade ?? -Infinity) >= grade,
    )
    const nearest = series.points.reduce<GradePoint | undefined>(
      (best, point) =>
        best === undefined || Math.abs(point.grade - grade) < Math.abs(best.grade - grade) ? point : best,
      undefined,
    )
    const read = (place: GradePlace) =>
      piece &&
      interpolateAt(
        piece.map((point) => ({ x: point.grade, y: point[place] })),
        grade,
      )
    const beyond = nearest === undefined || series.points.every((point) => point.grade < grade - 0.005)
    return {
      id: series.id,
      name: series.name,
      sumpC: beyond ? undefined : (read('sumpC') ?? nearest?.sumpC),
      coolerInletC: beyond ? undefined : (read('coolerInletC') ?? nearest?.coolerInletC),
      nearest: beyond ? undefined : nearest,
    }
  })
}

interface DrawOptions {
  width: number
  formats: ChartFormats
  /** Hottest temperature the drawing makes room for; what runs beyond leaves through the top. */
  ceilingC?: number
}

/** From this width on the two panels stand side by side. */
const SIDE_BY_SIDE_PX = 760
const LEFT_PX = 40
const TOP_PX = 30
const BOTTOM_PX = 40
const LABEL_PX = 17
const LONGEST_LEADER_PX = 48
/** Two names of limits need this much between them. */
const LIMIT_NAME_PX = 16

/** Lays the whole chart out in pixels; the component only prints it. */
export function drawGradeChart(
  data: GradeChartData,
  { width, formats, ceilingC = 175 }: DrawOptions,
): GradeDrawing {
  const sideBySide = width >= SIDE_BY_SIDE_PX
  const gap = sideBySide ? 24 : 8
  const panelWidth = sideBySide ? (width - gap) / 2 : width
  const plotHeight = sideBySide ? 250 : 190
  const panelHeight = TOP_PX + plotHeight + BOTTOM_PX
  const panels = GRADE_PLACES.map((place, index) =>
    drawPanel(data, place, {
      left: (sideBySide ? index * (panelWidth + gap) : 0) + LEFT_PX,
      top: (sideBySide ? 0 : index * (panelHeight + gap)) + TOP_PX,
      width: panelWidth - LEFT_PX - labelColumn(panelWidth),
      height: plotHeight,
      labelWidth: labelColumn(panelWidth),
      extent: temperatureExtent(data, place, ceilingC),
      formats,
    }),
  )
  return { width, height: sideBySide ? panelHeight : 2 * panelHeight + gap, panels }
}

const labelColumn = (panelWidth: number): number => (panelWidth < 420 ? 92 : panelWidth < 640 ? 140 : 156)

/** Room for the curves and for all three limits, up to a ceiling: each place has its own scale, since its limits are its own. */
function temperatureExtent(data: GradeChartData, place: GradePlace, ceilingC: number): [number, number] {
  const temps = data.series.flatMap((series) => series.points.map((point) => point[place]))
  const limits = data.limits[place].map((limit) => limit.fromC)
  const low = Math.min(...temps, ...limits.map((limit) => limit - 20))
  // The hill itself stays in the picture, however hot it gets there.
  const onHill = data.series
    .filter(({ kind }) => kind === 'present')
    .flatMap(({ points }) =>
      points.filter(({ grade }) => grade <= (data.hillGrade ?? 0)).map((point) => point[place]),
    )
  const top = Math.max(ceilingC, ...onHill.map((tempC) => tempC + 8))
  const high = Math.max(...limits.map((limit) => limit + 6), Math.min(Math.max(...temps), top))
  return [Number.isFinite(low) ? low : 60, Number.isFinite(high) ? high : ceilingC]
}

interface PanelBox {
  left: number
  top: number
  width: number
  height: number
  labelWidth: number
  extent: [number, number]
  formats: ChartFormats
}

function drawPanel(data: GradeChartData, place: GradePlace, box: PanelBox): GradePanel {
  const xAxis = linearAxis({
    extent: [0, data.maxGrade],
    range: [box.left, box.left + box.width],
    unit: percentAxis,
    tickCount: Math.max(3, Math.min(7, Math.round(box.width / 50))),
    roundEnds: false,
  })
  const yAxis = linearAxis({
    extent: box.extent,
    range: [box.top + box.height, box.top],
    unit: box.formats.temperatureAxis,
    tickCount: Math.max(4, Math.round(box.height / 40)),
  })
  const limits = data.limits[place]
  const dashes = gradeDashes(data.series)
  const curves = data.series.map((series, index) =>
    drawCurve(series, dashes[index] ?? '', { place, xAxis, yAxis, limits }),
  )
  labelCurves(curves, data, place, box, { xAxis, yAxis })
  return {
    place,
    title: `${GRADE_PLACE_WORDS[place]}, ${yAxis.unit}`,
    left: box.left,
    top: box.top,
    width: box.width,
    height: box.height,
    xAxis,
    yAxis,
    limits: drawLimits(limits, yAxis, box),
    bands: data.series.flatMap((series) => drawBands(series, place, xAxis, yAxis)),
    curves,
    breaks: data.series
      .filter((series) => series.kind === 'present' || series.kind === 'other-lock')
      .flatMap((series) => drawBreaks(series, place, xAxis, yAxis, box)),
  }
}

/** The limits as lines with names. Where two names would run into one another, the one that decides keeps its own. */
function drawLimits(limits: readonly RungLimit[], yAxis: Axis, box: PanelBox): GradePanel['limits'] {
  const lines = limits
    .map((limit) => ({
      y: yAxis.at(limit.fromC),
      text: `${limit.name} ${box.formats.degrees(limit.fromC)}`,
      rung: limit.rung,
    }))
    .filter((line) => line.y > box.top - 1)
  const order: Rung[] = ['ease-off', 'stop', 'watch', 'fine']
  const named: number[] = []
  for (const line of [...lines].sort((a, b) => order.indexOf(a.rung) - order.indexOf(b.rung))) {
    if (named.every((y) => Math.abs(y - line.y) >= LIMIT_NAME_PX)) named.push(line.y)
    else line.text = ''
  }
  return lines
}

interface CurveFrame {
  place: GradePlace
  xAxis: Axis
  yAxis: Axis
  limits: RungLimit[]
}

const STEADY_WEIGHTS: Record<GradeSeriesKind, number> = {
  present: 2,
  'other-lock': 1.5,
  endless: 1,
  'set-up': 1.5,
}

function drawCurve(
  series: GradeSeries,
  dash: string,
  { place, xAxis, yAxis, limits }: CurveFrame,
): GradeCurve {
  const toPixels = (points: readonly CurvePoint[]) =>
    points.map((point) => ({ x: xAxis.at(point.x), y: yAxis.at(point.y) }))
  const pieces = splitAtBreaks(series.points, jumps).map((piece) =>
    piece.map((point) => ({ x: point.grade, y: point[place] })),
  )
  const strokes = pieces.flatMap((piece) =>
    series.kind === 'present'
      ? splitByRung(piece, limits).map((stretch) => ({
          path: linePath(toPixels(stretch.points)),
          rung: stretch.rung,
          weight: Math.max(1.5, RUNG_WEIGHTS[stretch.rung]),
        }))
      : [{ path: linePath(toPixels(piece)), rung: 'fine' as const, weight: STEADY_WEIGHTS[series.kind] }],
  )
  return {
    id: series.id,
    kind: series.kind,
    dash,
    strokes: strokes.filter((stroke) => stroke.path !== ''),
    label: null,
  }
}

/** Direct labels in the column right of the plot, moved apart, each led back to where its curve ends or leaves the plot. */
function labelCurves(
  curves: GradeCurve[],
  data: GradeChartData,
  place: GradePlace,
  box: PanelBox,
  axes: Axes,
): void {
  const ends = new Map(data.series.map((series) => [series.id, visibleEnd(series, place, box, axes)]))
  const wanted = curves.flatMap((curve) => {
    const end = ends.get(curve.id)
    return end ? [{ id: curve.id, y: end.y, height: LABEL_PX }] : []
  })
  const placed = spreadLabels(wanted, box.top - 6, box.top + box.height + 6)
  const most = Math.floor((box.labelWidth - 14) / 6.7)
  curves.forEach((curve, index) => {
    const end = ends.get(curve.id)
    const name = data.series[index]?.name ?? ''
    if (!end) return
    const leader = end.x > box.left + box.width - LONGEST_LEADER_PX
    curve.label = {
      x: box.left + box.width + 14,
      y: placed.get(curve.id) ?? end.y,
      fromX: end.x,
      fromY: end.y,
      leader,
      text: leader ? shortenName(name, most) : `${shortenName(name, most - 2)} ↑`,
      name,
    }
  })
}

interface Axes {
  xAxis: Axis
  yAxis: Axis
}

/** Last pixel of a curve that is still inside the plot: its end, or where it leaves through the top. */
function visibleEnd(
  series: GradeSeries,
  place: GradePlace,
  box: PanelBox,
  { xAxis, yAxis }: Axes,
): CurvePoint | undefined {
  const pixels = series.points.map((point) => ({ x: xAxis.at(point.grade), y: yAxis.at(point[place]) }))
  const outside = pixels.findIndex((point) => point.y < box.top)
  const last = outside === -1 ? pixels.at(-1) : pixels[outside]
  if (!last || outside === -1) return last
  const before = pixels[outside - 1]
  if (!before) return { x: last.x, y: box.top }
  return {
    x: toTenth(before.x + ((last.x - before.x) * (box.top - before.y)) / (last.y - before.y)),
    y: box.top,
  }
}

const clamp = (value: number, low: number, high: number): number => Math.min(Math.max(value, low), high)

function drawBands(series: GradeSeries, place: GradePlace, xAxis: Axis, yAxis: Axis): string[] {
  if (!series.band) return []
  const locked = new Map(series.points.map((point) => [point.grade, point.locked]))
  const pieces = splitAtBreaks(
    series.band,
    (before, after) => locked.get(before.grade) !== locked.get(after.grade),
  )
  return pieces
    .map((piece) =>
      bandPath(
        piece.map((point) => ({
          x: xAxis.at(point.grade),
          low: yAxis.at(point[place].low),
          high: yAxis.at(point[place].high),
        })),
      ),
    )
    .filter((path) => path !== '')
}

/** Where lock-up ends the curve jumps; the jump is drawn as a break, not as a slope the truck never drives. */
function drawBreaks(
  series: GradeSeries,
  place: GradePlace,
  xAxis: Axis,
  yAxis: Axis,
  box: PanelBox,
): GradeMark[] {
  const marks: GradeMark[] = []
  series.points.forEach((point, index) => {
    const before = series.points[index - 1]
    if (!before || !jumps(before, point)) return
    const y1 = clamp(yAxis.at(before[place]), box.top, box.top + box.height)
    const y2 = clamp(yAxis.at(point[place]), box.top, box.top + box.height)
    marks.push({
      x: toTenth((xAxis.at(before.grade) + xAxis.at(point.grade)) / 2),
      y1,
      y2,
      text: point.locked ? 'locks' : 'lock-up ends',
    })
  })
  return marks
}
