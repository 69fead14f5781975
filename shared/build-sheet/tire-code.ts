import { AppError } from '../errors'

/** What a tire size code says about the tire, and how it rolls. */
export interface Tire {
  /** As typed, trimmed. */
  text: string
  /** How the size was written: `265/70R17`, `33x12.50R15`, or only a height such as `33 in`. */
  notation: 'metric' | 'flotation' | 'height'
  construction: 'radial' | 'diagonal'
  diameterM: number
  rollingRadiusM: number
  sectionWidthM?: number
  /** Section height over section width; metric codes only. */
  aspectRatio?: number
  rimDiameterM?: number
}

/**
 * Rolling circumference over nominal diameter, the relation of the European tire standards (ETRTO Standards Manual, data
 * of rolling circumference at 60 km/h): 3.05 for radial, 2.99 for diagonal tires. From memory, no copy at hand; a given
 * tire rolls within about 2 % of it.
 */
export const ROLLING_CIRCUMFERENCE_PER_DIAMETER = { radial: 3.05, diagonal: 2.99 } as const

const METRES_PER_INCH = 0.0254
const MIN_DIAMETER_IN = 20
const MAX_DIAMETER_IN = 60
/** Longest text looked at: a size with everything printed after it. */
const LONGEST_CODE = 40
const WOULD_DO = 'LT265/70R17, 33x12.50R15 or 33 in would do'

/** Load index, speed letter, load range, ply rating and the like after the size: read over, never needed here. */
const SERVICE_DESCRIPTION =
  '(?:\\s?(?:LT|XL|M\\+S|TL|TT|\\/?[B-J]|LR\\s?[A-N]|LOAD RANGE [A-N]|\\d{1,2}\\s?PR|\\d{2,3}(?:\\/\\d{2,3})?\\s?[A-Z]))*'
const METRIC = new RegExp(
  `^(?:P|LT|ST|T)?\\s?(\\d{3})\\s?[/ ]\\s?(\\d{2,3})\\s?(ZR|R|D|B|-|/| )\\s?F?\\s?(\\d{2}(?:\\.5)?)${SERVICE_DESCRIPTION}$`,
)
const FLOTATION = new RegExp(
  `^(?:P|LT)?\\s?(\\d{2}(?:\\.\\d{1,2})?)\\s?[X/]\\s?(\\d{1,2}(?:\\.\\d{1,2})?)\\s?(ZR|R|D|B|-)\\s?(\\d{2}(?:\\.5)?)${SERVICE_DESCRIPTION}$`,
)
const HEIGHT_INCHES = /^(\d{1,3}(?:\.\d+)?)\s?(?:"|''|IN\.?|INCH|INCHES)?(?:\s?TIRES?)?$/
const HEIGHT_MILLIMETRES = /^(\d{3,4}(?:\.\d+)?)\s?MM$/
const OLD_NUMERIC = /^\d{1,2}\.\d{2}\s?(?:R|-)\s?\d{2}(?:\.5)?|^\d{3}\s?(?:R|-)\s?\d{2}\b/

function normalize(text: string): string {
  return text
    .trim()
    .toUpperCase()
    .replace(/[×✕*]/g, 'X')
    .replace(/[“”″]/g, '"')
    .replace(/[’′]/g, "'")
    .replace(/(\d),(\d)/g, '$1.$2')
    .replace(/\s+/g, ' ')
}

function withinRange(value: number, min: number, max: number, what: string, unit: string): void {
  if (value < min || value > max)
    throw refusal(`${what} ${value} ${unit} is outside ${min} to ${max} ${unit}; ${WOULD_DO}`)
}

function refusal(message: string): AppError {
  return new AppError('bad_input', { issues: [{ path: 'tireCode', message }] })
}

function roll(diameterM: number, construction: Tire['construction']): number {
  return (ROLLING_CIRCUMFERENCE_PER_DIAMETER[construction] / (2 * Math.PI)) * diameterM
}

function tire(parts: Omit<Tire, 'rollingRadiusM'>): Tire {
  const diameterIn = parts.diameterM / METRES_PER_INCH
  if (diameterIn < MIN_DIAMETER_IN || diameterIn > MAX_DIAMETER_IN)
    throw refusal(
      `makes a tire ${diameterIn.toFixed(1)} in tall, outside ${MIN_DIAMETER_IN} to ${MAX_DIAMETER_IN} in; ${WOULD_DO}`,
    )
  return { ...parts, rollingRadiusM: roll(parts.diameterM, parts.construction) }
}

/**
 * Reads a tire size code as people write it and gives the rolling radius; assumes a nominal, new tire at its load.
 *
 * Equation: r = c D / 2π; D the nominal diameter (metric: rim + 2 · width · aspect), c 3.05 radial, 2.99 diagonal.
 *
 * @param text - `LT265/70R17`, `P245/75R16`, `33x12.50R15`, `33X12.5-15LT` (the dash is a diagonal tire there), `33 in`,
 *   `33"`, `838 mm`; load index and load range after the size are read over. Height 20–60 in
 * @returns nominal diameter and rolling radius [m]
 * @throws bad_input at `tireCode`, naming what is wrong and what would do
 *
 * Source: {@link ROLLING_CIRCUMFERENCE_PER_DIAMETER}.
 *
 * Example, computed here: `33x12.50R15` is 0.838 m tall and rolls at 0.407 m.
 */
export function parseTireCode(text: string): Tire {
  const code = normalize(text)
  if (code === '') throw refusal(`is empty; ${WOULD_DO}`)
  if (code.length > LONGEST_CODE) throw refusal(`is too long for a tire size; ${WOULD_DO}`)

  const metric = METRIC.exec(code)
  if (metric !== null) {
    const [width, aspect, rim] = [Number(metric[1]), Number(metric[2]), Number(metric[4])]
    withinRange(width, 125, 455, 'width', 'mm')
    withinRange(aspect, 25, 100, 'aspect', '%')
    withinRange(rim, 10, 26, 'rim', 'in')
    const rimDiameterM = rim * METRES_PER_INCH
    return tire({
      text: text.trim(),
      notation: 'metric',
      // People type a dash for the R of a metric code, so only the letter D means a diagonal tire.
      construction: metric[3] === 'D' ? 'diagonal' : 'radial',
      diameterM: rimDiameterM + (2 * width * aspect) / 100_000,
      sectionWidthM: width / 1000,
      aspectRatio: aspect / 100,
      rimDiameterM,
    })
  }

  const flotation = FLOTATION.exec(code)
  if (flotation !== null) {
    const [height, width, rim] = [Number(flotation[1]), Number(flotation[2]), Number(flotation[4])]
    withinRange(height, MIN_DIAMETER_IN, MAX_DIAMETER_IN, 'height', 'in')
    withinRange(width, 5, 24, 'width', 'in')
    withinRange(rim, 10, 26, 'rim', 'in')
    if (rim >= height) throw refusal(`the rim (${rim} in) is as tall as the tire (${height} in); ${WOULD_DO}`)
    return tire({
      text: text.trim(),
      notation: 'flotation',
      construction: flotation[3] === 'D' || flotation[3] === '-' ? 'diagonal' : 'radial',
      diameterM: height * METRES_PER_INCH,
      sectionWidthM: width * METRES_PER_INCH,
      rimDiameterM: rim * METRES_PER_INCH,
    })
  }

  const inches = HEIGHT_INCHES.exec(code)
  const millimetres = HEIGHT_MILLIMETRES.exec(code)
  if (inches !== null || millimetres !== null) {
    const diameterM =
      millimetres !== null ? Number(millimetres[1]) / 1000 : Number(inches?.[1]) * METRES_PER_INCH
    return tire({ text: text.trim(), notation: 'height', construction: 'radial', diameterM })
  }

  if (OLD_NUMERIC.test(code))
    throw refusal('old numeric sizes do not say how tall the tire is; type its height, such as 32 in')
  throw refusal(`“${text.trim().slice(0, 40)}” is not a tire size; ${WOULD_DO}`)
}

/** The same without throwing, for a field that reads along while somebody types. */
export function readTireCode(text: string): { tire: Tire } | { problem: string } {
  try {
    return { tire: parseTireCode(text) }
  } catch (error) {
    if (error instanceof AppError && error.details.issues?.[0] !== undefined)
      return { problem: error.details.issues[0].message }
    throw error
  }
}
