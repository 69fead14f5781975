import { z } from 'zod'
import {
  AirConstructionSchema,
  AirPositionSchema,
  HeatInputSchema,
  SURFACES,
  StartSchema,
  boundedInteger,
  boundedNumber,
  segmentFields,
} from './heat-input'

/** Request bodies of the estimate calls. The answers are the plain interfaces of `shared/heat/types.ts`. */

/** `POST /api/estimate`: the input itself is the body. */
export const EstimateRequestSchema = HeatInputSchema

/** Query of `POST /api/estimate`: the longest step of the series, 1 s on request. */
export const EstimateQuerySchema = z.strictObject({
  step: z.enum(['1', '10'], { error: 'must be 1 or 10 (seconds between points of the series)' }).optional(),
})

/** Fields a steady segment may carry besides speed, grade and length. */
export const RoadConditionsSchema = z.strictObject(segmentFields)

export const ClimbSchema = z.strictObject({
  distanceM: boundedNumber(0.01, 1e7, 'm', '8000 m is 5 miles'),
  start: StartSchema.optional(),
})

function checkTopGear(
  path: (string | number)[],
  topGear: number | undefined,
  gears: number,
  add: (issue: { code: 'custom'; path: (string | number)[]; message: string }) => void,
) {
  if (topGear !== undefined && topGear > gears)
    add({
      code: 'custom',
      path,
      message: `the transmission has ${gears} gears: must be at most ${gears}`,
    })
}

/** `POST /api/estimate/sweep`. */
export const SweepRequestSchema = z
  .strictObject({
    input: HeatInputSchema,
    speedMps: boundedNumber(0.1, 100, 'm/s', '20 m/s is 45 mph'),
    grades: z
      .array(boundedNumber(-1.5, 1.5, '(rise over run)', '0.06 is a 6 % grade'), {
        error: 'must be a list of grades such as [0, 0.02, 0.04]',
      })
      .min(1, { error: 'needs at least one grade' })
      .max(201, { error: 'takes at most 201 grades' }),
    segment: RoadConditionsSchema.optional(),
    climb: ClimbSchema.optional(),
  })
  .superRefine((request, context) =>
    checkTopGear(
      ['segment', 'topGear'],
      request.segment?.topGear,
      request.input.build.transmission.gears.length,
      (issue) => context.addIssue(issue),
    ),
  )

export const TargetsSchema = z
  .strictObject({
    sumpC: boundedNumber(-50, 300, '°C in the pan', '105 °C is 221 °F').optional(),
    coolerInletC: boundedNumber(-50, 400, '°C in the hot line', '121 °C is 250 °F').optional(),
  })
  .refine((targets) => targets.sumpC !== undefined || targets.coolerInletC !== undefined, {
    error: 'give at least one target: sumpC, coolerInletC or both',
  })

/** `POST /api/estimate/sizing`. */
export const SizingRequestSchema = z
  .strictObject({
    input: HeatInputSchema,
    construction: AirConstructionSchema,
    position: AirPositionSchema,
    targets: TargetsSchema,
    basis: z.enum(['equilibrium', 'peak'], { error: 'must be one of: equilibrium, peak' }),
  })
  .superRefine((request, context) => {
    if (request.basis === 'equilibrium' && request.input.duty.segments.every(({ kind }) => kind === 'stall'))
      context.addIssue({
        code: 'custom',
        path: ['basis'],
        message: 'a stall never settles: use peak, or add a segment that is not a stall',
      })
  })

const MAX_SAMPLES = 40_000
const channel = <T extends z.ZodType>(item: T, what: string) =>
  z
    .array(item, { error: `must be a list of ${what}, one per sample` })
    .max(MAX_SAMPLES, { error: `takes at most ${MAX_SAMPLES} samples` })

/** A logged drive. `surface`, `range`, `topGear` and `headwindMps` hold for the whole log or are given per sample. */
export const TraceSchema = z
  .strictObject({
    timeS: channel(boundedNumber(-1e10, 1e10, 's'), 'times').min(2, { error: 'needs at least two samples' }),
    speedMps: channel(boundedNumber(0, 120, 'm/s'), 'speeds'),
    grade: channel(boundedNumber(-1.5, 1.5, '(rise over run)'), 'grades').optional(),
    altitudeM: channel(boundedNumber(-1000, 10_000, 'm'), 'altitudes').optional(),
    engineRpm: channel(boundedNumber(0, 20_000, 'rev/min'), 'engine speeds').optional(),
    gear: channel(boundedInteger(1, 12), 'gears').optional(),
    surface: z
      .union([z.enum(SURFACES), channel(z.enum(SURFACES), 'surfaces')], {
        error: `must be one of: ${SURFACES.join(', ')}, or a list of them, one per sample`,
      })
      .optional(),
    range: z
      .union([z.enum(['high', 'low']), channel(z.enum(['high', 'low']), 'ranges')], {
        error: 'must be high or low, or a list of them, one per sample',
      })
      .optional(),
    topGear: z
      .union([boundedInteger(1, 12), channel(boundedInteger(1, 12), 'gears')], {
        error: 'must be a gear from 1 to 12, or a list of them, one per sample',
      })
      .optional(),
    headwindMps: z
      .union([boundedNumber(-80, 80, 'm/s'), channel(boundedNumber(-80, 80, 'm/s'), 'winds')], {
        error: 'must be a number from -80 to 80 m/s, or a list of them, one per sample',
      })
      .optional(),
  })
  .superRefine((trace, context) => {
    const samples = trace.timeS.length
    for (const [key, values] of Object.entries(trace))
      if (Array.isArray(values) && values.length !== samples)
        context.addIssue({
          code: 'custom',
          path: [key],
          message: `has ${values.length} samples where timeS has ${samples}: give one per sample`,
        })
    if ((trace.grade === undefined) === (trace.altitudeM === undefined))
      context.addIssue({
        code: 'custom',
        path: [trace.grade === undefined ? 'grade' : 'altitudeM'],
        message: 'give either grade or altitudeM, one of the two',
      })
    for (let index = 1; index < samples; index++) {
      const [before, now] = [trace.timeS[index - 1] ?? 0, trace.timeS[index] ?? 0]
      if (now <= before) {
        context.addIssue({
          code: 'custom',
          path: ['timeS', index],
          message: `sample ${index} (counting from 0) is not later than the one before (${now} s after ${before} s): sort the log and drop repeated seconds`,
        })
        break
      }
    }
  })

/** `POST /api/estimate/replay`. */
export const ReplayRequestSchema = z
  .strictObject({ input: HeatInputSchema, trace: TraceSchema })
  .superRefine((request, context) => {
    const gears = request.input.build.transmission.gears.length
    for (const field of ['gear', 'topGear'] as const) {
      const value = request.trace[field]
      if (typeof value === 'number')
        checkTopGear(['trace', field], value, gears, (issue) => context.addIssue(issue))
      const index = Array.isArray(value) ? value.findIndex((gear) => gear > gears) : -1
      if (index >= 0)
        context.addIssue({
          code: 'custom',
          path: ['trace', field, index],
          message: `the transmission has ${gears} gears: must be at most ${gears}`,
        })
    }
  })

export type EstimateRequest = z.infer<typeof EstimateRequestSchema>
export type RoadConditions = z.infer<typeof RoadConditionsSchema>
export type Climb = z.infer<typeof ClimbSchema>
export type SweepRequest = z.infer<typeof SweepRequestSchema>
export type Targets = z.infer<typeof TargetsSchema>
export type SizingRequest = z.infer<typeof SizingRequestSchema>
export type Trace = z.infer<typeof TraceSchema>
export type ReplayRequest = z.infer<typeof ReplayRequestSchema>
