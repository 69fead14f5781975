import { describe, expect, it } from 'vitest'
import {
  explain,
  type ExplainContext,
  type ExplainId,
  EXPLAIN_IDS,
  explainAtOnce,
  findMoves,
} from '../../../shared/advice'
import { targetsOfLimits } from '../../../shared/build-sheet/limits'
import { listSpreads, spreadFactor, SPREADS } from '../../../shared/build-sheet/spreads'
import { estimate, sizing } from '../../../shared/heat'
import type { Estimate } from '../../../shared/heat/types'
import type { HeatInput } from '../../../shared/schemas/heat-input'
import { STANDARD_GRAVITY } from '../../../shared/heat/road-load'
import { climbOfInput, gradeHeld } from '../../../shared/workbench/grade-evidence'
import { findHill } from '../../../shared/workbench/hill'
import { answerOf } from './answers'
import { type Difference, requestFor } from './requests'

function contextFor(difference: Difference, more: Partial<ExplainContext> = {}): ExplainContext {
  const request = requestFor(difference)
  return { ...request, answers: answerOf(request), ...more }
}

const highest = (values: readonly number[]) =>
  values.reduce((most, value) => Math.max(most, value), -Infinity)

/** The same numbers read straight from an estimate; those that need more than one are worked out below. */
const FROM_ESTIMATE: Partial<Record<ExplainId, (answer: Estimate, segment: number) => number | null>> = {
  'peak-pan': (answer) => answer.peakSumpC,
  'peak-hot-line': (answer) => answer.peakCoolerInletC,
  'return-line': ({ series }) => highest(series.coolerReturnC),
  coolant: ({ series }) => highest(series.coolantC),
  axle: ({ series }) => highest(series.axleC),
  'transfer-case': ({ series }) => highest(series.transferCaseC),
  'heat-converter': ({ segments }, at) => segments[at]!.heat.converterW,
  'heat-gears': ({ segments }, at) => segments[at]!.heat.gearW,
  'heat-drag': ({ segments }, at) => segments[at]!.heat.spinW,
  'heat-pump': ({ segments }, at) => segments[at]!.heat.pumpW,
  'heat-shifts': ({ segments }, at) => segments[at]!.heat.shiftW,
  'cooler-heat': ({ segments }, at) => segments[at]!.end.heatCoolersW,
  'cooler-flow': ({ segments }, at) => segments[at]!.end.coolerFlowM3S,
  'face-velocity': ({ segments }, at) => segments[at]!.end.faceVelocityMps,
  thermostat: ({ segments }, at) => segments[at]!.end.thermostatOpen,
  'fluid-hours': (answer) => answer.hoursToFluidChange * 3600,
  'fluid-distance': (answer) => answer.distanceToFluidChangeM,
  'fluid-damage': (answer) => answer.fluidDamage,
  'engine-rpm': ({ segments }, at) => segments[at]!.engineRpm,
  'speed-ratio': ({ segments }, at) => segments[at]!.speedRatio,
}

const needed = ({ answers, limits }: ExplainContext) =>
  sizing({
    input: answers.input,
    construction: 'stacked-plate',
    position: 'ahead-of-condenser',
    targets: targetsOfLimits(limits),
    basis: 'peak',
  })

/** Force at the tires by hand, sea-level formulae included. Source: Gillespie (1992), chapter 4; ISO 2533. */
function roadForceByHand({ build, load, duty }: HeatInput, segment: number): number | null {
  const stretch = duty.segments[segment]!
  if (stretch.kind !== 'steady') return null
  const mass = build.vehicle.massKg + (load?.cargoMassKg ?? 0) + (load?.trailerMassKg ?? 0)
  const drag = build.vehicle.dragAreaM2 + (load?.trailerDragAreaM2 ?? 0)
  const pressure = 101325 * (1 - 2.25577e-5 * duty.altitudeM) ** 5.25588
  const density = pressure / (287.05 * (duty.ambientC + 273.15))
  const angle = Math.atan(stretch.grade)
  return (
    mass * 9.80665 * (Math.sin(angle) + 0.01 * Math.cos(angle)) + 0.5 * density * drag * stretch.speedMps ** 2
  )
}

const CASES: [string, Difference, Partial<ExplainContext>][] = [
  ['the classic on its hill', {}, {}],
  [
    'the midsize, locked, on the flat before it',
    { archetype: 'midsize-4x4', control: { lockupSeen: 'yes' } },
    { segment: 0 },
  ],
  ['the diesel in town', { archetype: 'diesel-pickup', demo: 'hot-town' }, { segment: 0, cooler: 1 }],
  ['the classic standing', { demo: 'hot-town' }, { segment: 3 }],
  ['the classic in sand, nothing holding it', { demo: 'soft-sand' }, {}],
]

describe.each(CASES)('explanations of %s', (_, difference, more) => {
  const context = contextFor(difference, more)
  const { answers } = context
  const segment = more.segment ?? answers.hottestIndex
  const fresh = estimate(answers.input)

  it.each(EXPLAIN_IDS)('%s has the value of the answer, and every part of an explanation', (id) => {
    const said = explainAtOnce(id, context)
    expect(said.equation.length).toBeGreaterThan(0)
    expect(said.source).not.toBe('')
    expect(said.inputs.length).toBeGreaterThan(0)
    const read = FROM_ESTIMATE[id]
    if (id === 'cooler-heat' && more.cooler !== undefined && more.cooler !== null)
      expect(said.result.si).toBe(fresh.segments[segment]!.end.coolerHeatW[more.cooler])
    else if (read) expect(said.result.si).toBe(read(fresh, segment))
    expect(said.result.si === null).toBe(said.result.problem !== null)
  })

  it.each(EXPLAIN_IDS)('%s holds no number that is none, and words for everything', (id) => {
    const { inputs, parts, result, title } = explainAtOnce(id, context)
    expect(title).not.toBe('')
    const numbers = [
      result.si,
      ...inputs.map(({ si }) => si),
      ...inputs.map(({ spread }) => spread),
      ...parts.map(({ si }) => si),
    ]
    for (const number of numbers) expect(number === null || Number.isFinite(number)).toBe(true)
    for (const { label, path, si, words } of inputs) {
      expect(label).not.toBe(path)
      expect(label).not.toMatch(/[{}]/)
      expect((si === null) !== (words === null)).toBe(true)
    }
    expect(new Set(inputs.map(({ path }) => path)).size).toBe(inputs.length)
  })

  it('gives the needed cooler and the grade as they are worked out elsewhere', () => {
    const { input } = answers
    expect(explainAtOnce('grade-held', context).result.si).toBe(
      gradeHeld(input, findHill(input.duty), climbOfInput(input), context.limits).grade,
    )
    let size: ReturnType<typeof sizing> | null
    try {
      size = needed(context)
    } catch {
      size = null
    }
    expect(explainAtOnce('needed-area', context).result.si).toBe(size?.faceAreaM2 ?? null)
    expect(explainAtOnce('needed-heat', context).result.si).toBe(size?.heatW ?? null)
    expect(explainAtOnce('needed-ua', context).result.si).toBe(size?.uaWK ?? null)
  })

  it('gives the road force of the textbook', () => {
    const said = explainAtOnce('road-force', context)
    const force = roadForceByHand(answers.input, segment)
    if (answers.input.duty.segments[segment]!.kind === 'stopGo') {
      expect(said.result.si).toBeGreaterThan(0)
    } else if (force === null || said.result.si === null) {
      expect(said.result.si).toBe(force)
    } else if ((answers.input.duty.segments[segment]!.surface ?? 'pavement') === 'pavement') {
      expect(said.result.si * STANDARD_GRAVITY).toBeCloseTo(force, 6)
      const [grade, rolling, air] = said.parts
      expect(grade!.si + rolling!.si + air!.si).toBeCloseTo(said.result.si, 9)
    }
  })
})

describe('what the parts of an explanation add up to', () => {
  const context = contextFor({})
  const partsOf = (id: ExplainId) =>
    Object.fromEntries(explainAtOnce(id, context).parts.map(({ label, si }) => [label, si]))

  it('the return line is the hot line less what the coolers take', () => {
    const parts = partsOf('return-line')
    const { end } = context.answers.judged.segments[context.answers.hottestIndex]!
    expect(
      parts['To-cooler line']! -
        parts['Heat the coolers take']! / parts['What the oil flow carries per degree']!,
    ).toBeCloseTo(end.coolerReturnC, 6)
  })

  it('settled, the hot line stands over the pan by its heat over the flow', () => {
    const { equilibrium, heat } = context.answers.judged.segments[context.answers.hottestIndex]!
    const rise = equilibrium!.coolerInletC - equilibrium!.sumpC
    // The flow is that of the stretch's end, whose pan is a few degrees from settled.
    expect(rise).toBeCloseTo(
      heat.converterW / partsOf('peak-hot-line')['What the oil flow carries per degree']!,
      0,
    )
  })

  it('the gears’ heat is small beside the power at the wheels', () => {
    const { result } = explainAtOnce('heat-gears', context)
    const power = partsOf('heat-gears')['Power at the wheels']!
    expect(result.si! / power).toBeGreaterThan(0.01)
    expect(result.si! / power).toBeLessThan(0.06)
  })
})

describe('where an input comes from', () => {
  const inputOf = (context: ExplainContext, id: ExplainId, path: string) =>
    explainAtOnce(id, context).inputs.find((one) => one.path === path)

  it('is what the sheet says, with its spread', () => {
    const context = contextFor({
      values: [{ path: 'converter.stallRpm', value: 1900, origin: 'measured' }],
    })
    expect(inputOf(context, 'peak-pan', 'converter.stallRpm')).toMatchObject({
      si: 1900,
      origin: 'measured',
      spread: SPREADS.stallSpeed.measuredRelative,
      quantity: 'rotation',
    })
    // A weight that was guessed.
    expect(inputOf(context, 'peak-pan', 'vehicle.massKg')).toMatchObject({ origin: 'typical', spread: 0.08 })
  })

  it('is the scenario for load and drive cycle', () => {
    const context = contextFor({})
    expect(inputOf(context, 'road-force', 'load.trailerMassKg')).toMatchObject({
      si: 1800,
      origin: 'scenario',
      // As much a guess as the truck's.
      spread: 0.08,
    })
    expect(inputOf(context, 'road-force', 'duty.segments.1.grade')).toMatchObject({
      si: 0.06,
      origin: 'scenario',
    })
    expect(inputOf(context, 'road-force', 'duty.segments.1.rollingResistance')).toMatchObject({
      si: 0.01,
      origin: 'typical',
      spread: SPREADS.rollingResistance.relative,
    })
  })

  it('is the set-up, or the judging, where those changed it', () => {
    const context = contextFor({ change: { topGear: 2 } })
    // Nobody saw it lock: judged as if no clutch were there.
    expect(inputOf(context, 'heat-converter', 'converter.lockup.fitted')).toMatchObject({
      words: 'no',
      origin: 'set-up',
    })
    expect(inputOf(context, 'engine-rpm', 'duty.segments.1.topGear')).toMatchObject({ si: 2 })
  })

  it('is typical where the model fills in what nobody gave', () => {
    const context = contextFor({ without: ['cooling.feed', 'converter.couplingPoint'] })
    expect(inputOf(context, 'cooler-flow', 'cooling.feed.openFlowM3S')).toMatchObject({
      si: 1.6e-4,
      origin: 'typical',
      spread: SPREADS.coolerFlow.relative,
    })
    expect(inputOf(context, 'speed-ratio', 'converter.couplingPoint')).toMatchObject({
      si: 0.88,
      origin: 'typical',
    })
  })

  it('names the gear it drives in and no other', () => {
    const context = contextFor({})
    const { gear } = context.answers.judged.segments[context.answers.hottestIndex]!
    const gears = explainAtOnce('heat-gears', context).inputs.filter(({ path }) => path.includes('.gears.'))
    expect(gears.map(({ path }) => path)).toEqual([
      `transmission.gears.${gear - 1}.ratio`,
      `transmission.gears.${gear - 1}.efficiency`,
    ])
  })
})

describe('what moves a number most', () => {
  const context = contextFor({ archetype: 'midsize-4x4' })
  const { input } = context.answers
  const spreads = listSpreads(context.sheet)

  it.each(EXPLAIN_IDS.filter((id) => FROM_ESTIMATE[id] !== undefined))(
    '%s: one standard deviation of each doubt, worked out anew',
    (id) => {
      const { movesItMost, result } = explain(id, context)
      const segment = context.answers.hottestIndex
      const read = (of: HeatInput) => FROM_ESTIMATE[id]!(estimate(of), segment) ?? 0
      const base = read(input)
      expect(base).toBe(result.si)
      const sizes = movesItMost.map(({ effect }) => Math.abs(effect))
      expect(sizes).toEqual([...sizes].sort((a, b) => b - a))
      for (const { doubt, effect, relative, quantity } of movesItMost) {
        expect(relative).toBe(spreads[doubt])
        const moved = SPREADS[doubt].apply(input, spreadFactor(relative, 1))
        expect(effect).toBe(read(moved) - base)
        expect(quantity).toBe(result.quantity === 'temperature' ? 'temperatureRise' : result.quantity)
      }
    },
  )

  it('is the weight and the like for the pan, by the path that settles it', () => {
    const { movesItMost } = explain('peak-pan', context)
    expect(movesItMost.length).toBeGreaterThan(2)
    for (const { path, label } of movesItMost) {
      expect(label).not.toBe('')
      if (path !== null) expect(context.sheet.values.map((value) => value.path)).toContain(path)
    }
  })

  it.each(['grade-held', 'needed-heat', 'road-force'] as const)('%s is moved by something too', (id) => {
    const { movesItMost, result } = explain(id, context)
    expect(result.si).not.toBeNull()
    expect(movesItMost.length).toBeGreaterThan(0)
    for (const { effect } of movesItMost) expect(Number.isFinite(effect)).toBe(true)
  })

  it('can be asked for after the rest', () => {
    const { movesItMost, ...rest } = explain('coolant', context)
    expect(explainAtOnce('coolant', context)).toEqual(rest)
    expect(findMoves('coolant', context)).toEqual(movesItMost)
  })

  it('is nothing for the road force of a standing truck', () => {
    const standing = contextFor({ demo: 'hot-town' }, { segment: 3 })
    expect(explain('road-force', standing)).toMatchObject({ result: { si: null }, movesItMost: [] })
  })

  it('is the weight by the weight, for the force of a hill', () => {
    // F is nearly m g (sin θ + C cos θ) plus air: 8 % more weight is at most 8 % more force.
    const { movesItMost, result } = explain('road-force', contextFor({}))
    const mass = movesItMost.find(({ doubt }) => doubt === 'mass')
    const share = mass!.effect / result.si!
    expect(share).toBeGreaterThan(0.04)
    expect(share).toBeLessThan(Math.exp(0.08) - 1)
  })
})
