import { displayUnit, formatQuantity, quantityParts, type Quantity, type UnitSystem } from '../units/display'
import type { AxisUnit } from './axis'

/** How a chart prints what it shows, in the person's units. Charts themselves know only SI. */
export interface ChartFormats {
  temperatureAxis: AxisUnit
  /** Whole degrees with the unit: "231 °F". */
  temperature: (tempC: number) => string
  /** Whole degrees without the unit, for a column or a mark that has its unit elsewhere. */
  degrees: (tempC: number) => string
  speed: (speedMps: number) => string
  distance: (distanceM: number) => string
  altitude: (altitudeM: number) => string
  heat: (heatW: number) => string
}

/** A number somebody gave, not one that was computed: without the zeros that would only claim precision ("45 mph"). */
export function formatGiven(
  value: number | null | undefined,
  quantity: Quantity,
  system: UnitSystem,
): string {
  return formatQuantity(value, quantity, system)
    .replace(/\.0+(?!\d)/, '')
    .replace(/(\.\d*[1-9])0+(?!\d)/, '$1')
}

/** The formats of a unit system. */
export function chartFormats(system: UnitSystem): ChartFormats {
  const { unit, toDisplay, fromDisplay } = displayUnit('temperature', system)
  return {
    temperatureAxis: { unit, toDisplay, fromDisplay },
    temperature: (tempC) => formatQuantity(tempC, 'temperature', system),
    degrees: (tempC) => quantityParts(tempC, 'temperature', system).figure,
    speed: (speedMps) => formatGiven(speedMps, 'speed', system),
    distance: (distanceM) => formatGiven(distanceM, 'distance', system),
    altitude: (altitudeM) => formatGiven(altitudeM, 'height', system),
    heat: (heatW) => formatQuantity(heatW, 'heatRate', system),
  }
}

const percent = new Intl.NumberFormat('en-US', { maximumFractionDigits: 1 })

/** A grade as people say it: "6 %", "6.2 %". */
export function formatGrade(grade: number): string {
  return `${percent.format(Math.round(grade * 1000) / 10)} %`
}

/** A grade that is promised: cut, never rounded up, to a tenth of a percent. */
export function formatGradeHeld(grade: number): string {
  return `${percent.format(Math.floor(grade * 1000 + 1e-6) / 10)} %`
}

/** A length of time in the words of a clock: "45 s", "12 min", "2 h 05 min". */
export function formatDuration(durationS: number): string {
  if (durationS < 90) return `${Math.round(durationS)} s`
  const minutes = Math.round(durationS / 60)
  if (minutes < 120) return `${minutes} min`
  return `${Math.floor(minutes / 60)} h ${String(minutes % 60).padStart(2, '0')} min`
}
