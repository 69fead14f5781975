import { formatQuantity, type UnitSystem } from '../units/display'
import type { QuantityReading } from '../units/parse-quantity'
import { readTireCode, ROLLING_CIRCUMFERENCE_PER_DIAMETER } from './tire-code'

/** A tire size code as a quantity that is typed: its value is the rolling radius. */

/** What stands as the unit of a typed size code. */
export const TIRE_UNIT = 'tire size'

/** "33.0 in tall, rolling radius 16.0 in = 407 mm"; without a height, that of a radial tire. */
export function tireEcho(
  rollingRadiusM: number,
  system: UnitSystem,
  diameterM = heightOf(rollingRadiusM),
): string {
  const other = system === 'us' ? 'metric' : 'us'
  const tall = formatQuantity(diameterM, 'length', system)
  const rolls = (units: UnitSystem) => formatQuantity(rollingRadiusM, 'length', units)
  return `${tall} tall, rolling radius ${rolls(system)} = ${rolls(other)}`
}

/** Height of the radial tire that rolls at a radius. */
function heightOf(rollingRadiusM: number): number {
  return (rollingRadiusM * 2 * Math.PI) / ROLLING_CIRCUMFERENCE_PER_DIAMETER.radial
}

/** A rolling radius that nobody typed as a size, as the height of such a tire: `32.1 in`. */
export function tireFieldText(rollingRadiusM: number | null): string {
  if (rollingRadiusM === null) return ''
  const inches = heightOf(rollingRadiusM) / 0.0254
  return `${Number(inches.toPrecision(4))} in`
}

/** Reads a size code as typed; see `parseTireCode`. Never throws. */
export function parseTireQuantity(typed: string, system: UnitSystem): QuantityReading {
  const read = readTireCode(typed)
  if ('problem' in read) return { ok: false, message: read.problem }
  const { text, rollingRadiusM, diameterM } = read.tire
  return {
    ok: true,
    si: rollingRadiusM,
    unit: TIRE_UNIT,
    typed: text,
    echo: tireEcho(rollingRadiusM, system, diameterM),
  }
}
