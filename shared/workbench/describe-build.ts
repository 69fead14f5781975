import type { Build } from '../schemas/build'
import type { Judgement } from '../schemas/limits'
import type { Scenario } from '../schemas/scenario'
import type { Setup } from '../schemas/setup'
import { judge, judgeAnswer } from '../build-sheet/limits'
import { chartFormats } from '../charts/formats'
import { roadProfile } from '../charts/drive-cycle-chart'
import type { UnitSystem } from '../units/display'
import { computeAnswer, type Answer } from './answer'
import { driveCycleData } from './chart-data'
import type { WorkbenchRequest } from './request'

/** One scenario of a build at a glance: its road with the pan's temperature along it, and the answer of every set-up. */
export interface ScenarioGlance {
  id: string
  name: string
  judgement: Judgement | null
  /** Why there is no answer; undefined when there is one. */
  refusal: string | undefined
  road: { along: number; height: number }[]
  marks: (system: UnitSystem) => { along: number; text: string; judgement: Judgement }[]
  setups: {
    id: string
    name: string
    peakSumpC: number | null
    peakCoolerInletC: number | null
    judgement: Judgement | null
  }[]
}

/** Works out a build's scenarios with each of its set-ups; the first set-up judges the scenario. */
export function describeBuild(
  build: Pick<Build, 'sheet' | 'control' | 'limits'>,
  setups: readonly Setup[],
  scenarios: readonly Scenario[],
): ScenarioGlance[] {
  return scenarios.map((scenario) => {
    const answers = setups.map((setup) => ({
      setup,
      answer: computeAnswer(requestOf(build, setup, scenario)),
    }))
    const first = answers[0]?.answer
    const shown = first?.kind === 'answer' ? first : undefined
    return {
      id: scenario.id,
      name: scenario.name,
      judgement: shown?.judgement.judgement ?? null,
      refusal: first?.kind === 'refusal' ? (first.issues[0]?.message ?? first.message) : undefined,
      ...(shown ? roadOf(shown, build) : { road: [], marks: () => [] }),
      setups: answers.map(({ setup, answer }) => ({
        id: setup.id,
        name: setup.name,
        peakSumpC: answer.kind === 'answer' ? answer.judged.peakSumpC : null,
        peakCoolerInletC: answer.kind === 'answer' ? answer.judged.peakCoolerInletC : null,
        judgement: answer.kind === 'answer' ? judgeAnswer(answer.judged, build.limits).judgement : null,
      })),
    }
  })
}

function requestOf(
  build: Pick<Build, 'sheet' | 'control' | 'limits'>,
  setup: Setup,
  scenario: Scenario,
): WorkbenchRequest {
  const { sheet, control, limits } = build
  return { sheet, control, limits, setup, others: [], scenario: { load: scenario.load, duty: scenario.duty } }
}

/** The road as shares of the way and of the height, and the pan's peak at the end of each stretch that can be told apart. */
function roadOf(answer: Answer, build: Pick<Build, 'limits'>): Pick<ScenarioGlance, 'road' | 'marks'> {
  const { segments } = driveCycleData(answer.judged, answer.input.duty, build.limits)
  const profile = roadProfile(segments)
  const totalS = profile.at(-1)?.x ?? 1
  const heights = profile.map(({ y }) => y)
  const lowest = Math.min(...heights)
  const rise = Math.max(...heights) - lowest
  const road = profile.map(({ x, y }) => ({
    along: totalS === 0 ? 0 : x / totalS,
    height: rise < 1 ? 0.1 : 0.05 + (0.95 * (y - lowest)) / rise,
  }))
  let last = -Infinity
  const places = segments.flatMap((segment, index) => {
    const along = ((road[index]?.along ?? 0) + (road[index + 1]?.along ?? 0)) / 2
    if (along - last < 0.16) return []
    last = along
    return [{ along, tempC: segment.peakSumpC }]
  })
  return {
    road,
    marks: (system) =>
      places.map(({ along, tempC }) => ({
        along,
        text: chartFormats(system).temperature(tempC),
        judgement: judge(tempC, 'sump', build.limits),
      })),
  }
}
