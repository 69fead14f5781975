import { linearAxis, toTenth, type Axis, type AxisUnit } from './axis'
import { interpolateAt, linePath, splitByRung, thinCurve, type CurvePoint } from './curves'
import { formatDuration, type ChartFormats } from './formats'
import { shortenName, spreadLabels } from './labels'
import { RUNG_WEIGHTS, type Rung, type RungLimit } from './rungs'

/** Temperatures along a drive cycle, column by column. */
export interface CycleSeries {
  timeS: number[]
  sumpC: number[]
  coolerInletC: number[]
  coolantC: number[]
}

/** One stretch of the drive cycle as the chart needs it. */
export interface CycleSegment {
  /** What it is, in words: "Climb 6 %". */
  name: string
  durationS: number
  distanceM: number
  grade: number
  peakSumpC: number
  peakCoolerInletC: number
}

export interface DriveCycleData {
  series: CycleSeries
  segments: CycleSegment[]
  limits: { sumpC: RungLimit[]; coolerInletC: RungLimit[] }
}

export type CycleChannel = 'coolerInletC' | 'sumpC' | 'coolantC'

export const CYCLE_CHANNEL_WORDS: Record<CycleChannel, string> = {
  coolerInletC: 'To-cooler line',
  sumpC: 'Pan',
  coolantC: 'Coolant',
}

const CHANNELS: readonly CycleChannel[] = ['coolerInletC', 'sumpC', 'coolantC']
export const CYCLE_DASHES: Record<CycleChannel, string> = {
  coolerInletC: '7 4',
  sumpC: '',
  coolantC: '1.5 3',
}

export interface CycleCurve {
  channel: CycleChannel
  dash: string
  strokes: { path: string; rung: Rung; weight: number }[]
  label: { x: number; y: number; fromX: number; fromY: number; text: string }
}

export interface DriveCycleDrawing {
  width: number
  height: number
  left: number
  plotWidth: number
  profile: {
    top: number
    bottom: number
    path: string
    /** Temperatures written along the road. */
    notes: { x: number; y: number; anchor: 'start' | 'middle' | 'end'; text: string }[]
    climbText: string
  }
  plot: { top: number; height: number }
  xAxis: Axis
  xTitle: string
  yAxis: Axis
  segments: { x: number; width: number; text: string; name: string }[]
  limits: { y: number; text: string; rung: Rung }[]
  curves: CycleCurve[]
}

const TIME_MINUTES: AxisUnit = { unit: 'min', toDisplay: (s) => s / 60, fromDisplay: (min) => min * 60 }
const TIME_HOURS: AxisUnit = { unit: 'h', toDisplay: (s) => s / 3600, fromDisplay: (h) => h * 3600 }
const TIME_SECONDS: AxisUnit = { unit: 's', toDisplay: (s) => s, fromDisplay: (s) => s }

/** The unit of the time axis that gives a person small numbers. */
export function timeUnitFor(totalS: number): AxisUnit {
  if (totalS <= 180) return TIME_SECONDS
  return totalS <= 10_800 ? TIME_MINUTES : TIME_HOURS
}

/** Height of the road over time [s, m]: each stretch rises by its grade times its length. */
export function roadProfile(segments: readonly CycleSegment[]): CurvePoint[] {
  const points: CurvePoint[] = [{ x: 0, y: 0 }]
  for (const segment of segments) {
    const last = points.at(-1) as CurvePoint
    points.push({
      x: last.x + segment.durationS,
      y: last.y + segment.distanceM * Math.sin(Math.atan(segment.grade)),
    })
  }
  return points
}

/** Most points drawn per curve: more than a phone has pixels, few enough to move with a finger. */
const MOST_POINTS = 240
const LEFT_PX = 40
const PROFILE_TOP_PX = 26
const PROFILE_PX = 62
const BOTTOM_PX = 42
const LABEL_PX = 17

/** Lays the chart out in pixels: the road on top as one ink line, the temperatures under it on the same time axis. */
export function drawDriveCycle(
  data: DriveCycleData,
  { width, formats, ceilingC = 165 }: { width: number; formats: ChartFormats; ceilingC?: number },
): DriveCycleDrawing {
  const labelWidth = width < 520 ? 84 : 112
  const plotWidth = width - LEFT_PX - labelWidth
  const plotTop = PROFILE_TOP_PX + PROFILE_PX + 20
  const plotHeight = width < 520 ? 190 : 230
  const totalS = data.series.timeS.at(-1) ?? 0
  const unit = timeUnitFor(totalS)
  const xAxis = linearAxis({
    extent: [0, totalS],
    range: [LEFT_PX, LEFT_PX + plotWidth],
    unit,
    tickCount: Math.max(3, Math.round(plotWidth / 90)),
    roundEnds: false,
  })
  const yAxis = linearAxis({
    extent: cycleExtent(data, ceilingC),
    range: [plotTop + plotHeight, plotTop],
    unit: formats.temperatureAxis,
    tickCount: Math.round(plotHeight / 40),
  })
  const frame = { top: plotTop, height: plotHeight, right: LEFT_PX + plotWidth, labelWidth }
  return {
    width,
    height: plotTop + plotHeight + BOTTOM_PX,
    left: LEFT_PX,
    plotWidth,
    profile: drawProfile(data, xAxis, formats, plotWidth),
    plot: { top: plotTop, height: plotHeight },
    xAxis,
    xTitle: { s: 'seconds', min: 'minutes', h: 'hours' }[unit.unit] ?? unit.unit,
    yAxis,
    segments: drawSegments(data, xAxis),
    limits: sustainedLimits(data)
      .map(({ limit, place }) => ({
        y: yAxis.at(limit.fromC),
        text: `${place} ${limit.name.toLowerCase()} ${formats.degrees(limit.fromC)}`,
        rung: limit.rung,
      }))
      .filter((limit) => limit.y > plotTop - 1),
    curves: drawCurves(data, xAxis, yAxis, frame),
  }
}

/** The limit of each place that decides on a long pull: the second rung of the pan, the first of the hot line. */
function sustainedLimits(data: DriveCycleData): { limit: RungLimit; place: string }[] {
  const of = (limits: RungLimit[], place: string) => {
    const limit = limits.find(({ rung }) => rung === 'ease-off') ?? limits[0]
    return limit ? [{ limit, place }] : []
  }
  return [...of(data.limits.sumpC, 'pan'), ...of(data.limits.coolerInletC, 'line')]
}

function cycleExtent(data: DriveCycleData, ceilingC: number): [number, number] {
  const all = [...data.series.sumpC, ...data.series.coolerInletC]
  const limits = sustainedLimits(data).map(({ limit }) => limit.fromC + 4)
  const low = all.reduce((least, value) => Math.min(least, value), Infinity)
  const high = all.reduce((most, value) => Math.max(most, value), -Infinity)
  return [Math.min(Number.isFinite(low) ? low : 60, 60), Math.max(Math.min(high, ceilingC), ...limits)]
}

function drawProfile(data: DriveCycleData, xAxis: Axis, formats: ChartFormats, plotWidth: number) {
  const points = roadProfile(data.segments)
  const heights = points.map((point) => point.y)
  const lowest = Math.min(...heights)
  const highest = Math.max(...heights)
  const rise = highest - lowest
  const bottom = PROFILE_TOP_PX + PROFILE_PX
  // A flat road is drawn flat, low in the strip; a hill never looks steeper than the strip is high.
  const toY = (height: number) =>
    toTenth(bottom - 4 - (rise < 1 ? 0 : ((height - lowest) / rise) * (PROFILE_PX - 22)))
  const pixels = points.map((point) => ({ x: xAxis.at(point.x), y: toY(point.y) }))
  const notes: DriveCycleDrawing['profile']['notes'] = []
  let lastX = -Infinity
  data.segments.forEach((segment, index) => {
    const start = pixels[index] as CurvePoint
    const end = pixels[index + 1] as CurvePoint
    const x = toTenth((start.x + end.x) / 2)
    if (end.x - start.x < 46 || x - lastX < 52) return
    lastX = x
    notes.push({
      x,
      y: toTenth((start.y + end.y) / 2 - 9),
      anchor: 'middle',
      text: `${formats.degrees(segment.peakSumpC)}°`,
    })
  })
  return {
    top: PROFILE_TOP_PX,
    bottom,
    path: linePath(pixels),
    notes: plotWidth < 160 ? [] : notes,
    climbText: rise < 1 ? 'Flat' : `Rises ${formats.altitude(rise)}`,
  }
}

function drawSegments(data: DriveCycleData, xAxis: Axis): DriveCycleDrawing['segments'] {
  let startS = 0
  return data.segments.map((segment) => {
    const x = xAxis.at(startS)
    startS += segment.durationS
    const width = toTenth(xAxis.at(startS) - x)
    return {
      x,
      width,
      name: segment.name,
      text: width < 40 ? '' : shortenName(segment.name, Math.floor(width / 7.2)),
    }
  })
}

function drawCurves(
  data: DriveCycleData,
  xAxis: Axis,
  yAxis: Axis,
  frame: { top: number; height: number; right: number; labelWidth: number },
): CycleCurve[] {
  const limitsOf: Record<CycleChannel, RungLimit[]> = {
    coolerInletC: data.limits.coolerInletC,
    sumpC: data.limits.sumpC,
    coolantC: [],
  }
  const curves = CHANNELS.map((channel) => {
    const points = cyclePoints(data.series, channel)
    const toPixels = (stretch: readonly CurvePoint[]) =>
      stretch.map((point) => ({ x: xAxis.at(point.x), y: yAxis.at(point.y) }))
    const strokes = splitByRung(points, limitsOf[channel]).map((stretch) => ({
      path: linePath(toPixels(stretch.points)),
      rung: stretch.rung,
      weight: channel === 'coolantC' ? 1 : Math.max(1.5, RUNG_WEIGHTS[stretch.rung]),
    }))
    const end = points.at(-1) ?? { x: 0, y: 0 }
    return {
      channel,
      dash: CYCLE_DASHES[channel],
      strokes: strokes.filter((stroke) => stroke.path !== ''),
      end: {
        x: xAxis.at(end.x),
        y: Math.min(Math.max(yAxis.at(end.y), frame.top), frame.top + frame.height),
      },
    }
  })
  const placed = spreadLabels(
    curves.map((curve) => ({ id: curve.channel, y: curve.end.y, height: LABEL_PX })),
    frame.top - 6,
    frame.top + frame.height + 6,
  )
  return curves.map(({ end, ...curve }) => ({
    ...curve,
    label: {
      x: frame.right + 14,
      y: placed.get(curve.channel) ?? end.y,
      fromX: end.x,
      fromY: end.y,
      text: shortenName(CYCLE_CHANNEL_WORDS[curve.channel], Math.floor((frame.labelWidth - 16) / 6.6)),
    },
  }))
}

function allPoints(series: CycleSeries, channel: CycleChannel): CurvePoint[] {
  return series.timeS
    .map((timeS, index) => ({ x: timeS, y: series[channel][index] ?? Number.NaN }))
    .filter((point) => Number.isFinite(point.y))
}

/** The points of one channel as they are drawn. */
function cyclePoints(series: CycleSeries, channel: CycleChannel): CurvePoint[] {
  return thinCurve(allPoints(series, channel), MOST_POINTS, (point) => point.y)
}

/** What the chart reads at one moment. */
export interface CycleReading {
  timeS: number
  segment: CycleSegment | undefined
  sumpC: number | undefined
  coolerInletC: number | undefined
  coolantC: number | undefined
}

export function readCycleAt(data: DriveCycleData, timeS: number): CycleReading {
  let endS = 0
  const segment = data.segments.find((one) => (endS += one.durationS) >= timeS) ?? data.segments.at(-1)
  const read = (channel: CycleChannel) => interpolateAt(allPoints(data.series, channel), timeS)
  return {
    timeS,
    segment,
    sumpC: read('sumpC'),
    coolerInletC: read('coolerInletC'),
    coolantC: read('coolantC'),
  }
}

/** Title that says what the chart says: where the drive gets hottest. */
export function driveCycleTitle(data: DriveCycleData, formats: ChartFormats): string {
  const hottest = hottestSegment(data)
  if (!hottest) return 'Nothing is driven yet'
  return `Hottest on “${hottest.name}”: pan ${formats.temperature(hottest.peakSumpC)}, to-cooler line ${formats.temperature(hottest.peakCoolerInletC)}`
}

/** The stretch with the highest pan temperature. */
export function hottestSegment(data: Pick<DriveCycleData, 'segments'>): CycleSegment | undefined {
  return data.segments.reduce<CycleSegment | undefined>(
    (best, segment) => (best === undefined || segment.peakSumpC > best.peakSumpC ? segment : best),
    undefined,
  )
}

export function driveCycleSummary(data: DriveCycleData, formats: ChartFormats): string {
  const totalS = data.series.timeS.at(-1) ?? 0
  const first = data.series.sumpC[0]
  const last = data.series.sumpC.at(-1)
  if (first === undefined || last === undefined) return 'There is no drive cycle to draw.'
  const peak = Math.max(...data.series.sumpC)
  return `Over ${formatDuration(totalS)} in ${data.segments.length} ${data.segments.length === 1 ? 'stretch' : 'stretches'} the pan starts at ${formats.temperature(first)}, peaks at ${formats.temperature(peak)} and ends at ${formats.temperature(last)}.`
}
