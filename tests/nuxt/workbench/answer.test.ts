import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it, vi } from 'vitest'
import { defineComponent, h, nextTick, shallowRef } from 'vue'
import { createDefaultFacts, createSheetFromFacts } from '#shared/build-sheet/facts'
import type { WorkbenchRequest } from '#shared/workbench/request'
import AnswerPanel from '~/components/workbench/AnswerPanel.vue'
import SliderField from '~/components/workbench/SliderField.vue'
import { useWorkbenchAnswer } from '~/composables/workbench/use-workbench-answer'

const plain = (text: string) => text.replaceAll('\u00a0', ' ').replace(/\s+/g, ' ').trim()

function requestAt(grade: number, trailerMassKg?: number): WorkbenchRequest {
  const facts = createDefaultFacts('midsize-4x4')
  const draft = createSheetFromFacts({ ...facts, hill: { ...facts.hill, grade } })
  const load = trailerMassKg === undefined ? draft.scenario.load : { ...draft.scenario.load, trailerMassKg }
  const setup = { id: 'as-it-is', name: 'As it is', change: {} }
  const { sheet, control, limits } = draft
  return { sheet, control, limits, scenario: { load, duty: draft.scenario.duty }, setup, others: [] }
}

async function startBench(first: WorkbenchRequest) {
  const request = shallowRef(first)
  let bench: ReturnType<typeof useWorkbenchAnswer> | undefined
  const wrapper = await mountSuspended(
    defineComponent({
      setup() {
        bench = useWorkbenchAnswer(request, { brief: true })
        const { answer, grades, depth, ghost, refusal, settledCount } = bench
        return () =>
          answer.value
            ? h(AnswerPanel, {
                answer: answer.value,
                grades: grades.value,
                bands: depth.value?.bands,
                ghost: ghost.value,
                refusal: refusal.value,
                settledCount: settledCount.value,
                system: 'us',
              })
            : h('p', 'none')
      },
    }),
  )
  if (!bench) throw new Error('nothing was set up')
  return { request, bench, wrapper }
}

describe('the answer that follows every change', () => {
  it('moves in the same turn, with the former value as a ghost that stays through one change', async () => {
    const { request, bench, wrapper } = await startBench(requestAt(0.06))
    const before = bench.answer.value?.judged.peakSumpC ?? Number.NaN
    expect(plain(wrapper.text())).not.toContain('was')
    request.value = requestAt(0.05)
    await nextTick()
    const after = bench.answer.value?.judged.peakSumpC ?? Number.NaN
    expect(after).toBeLessThan(before)
    expect(bench.ghost.value?.sumpC).toBe(before)
    // A second move of the same change keeps the ghost of before the change.
    request.value = requestAt(0.04)
    await nextTick()
    expect(bench.ghost.value?.sumpC).toBe(before)
    expect(plain(wrapper.text())).toMatch(/was \d+ °F, now −\d+ °F/)
  })

  it('brings the evidence of the last value, whatever came between', async () => {
    const { request, bench } = await startBench(requestAt(0.06))
    for (const grade of [0.05, 0.055, 0.045, 0.07]) {
      request.value = requestAt(grade)
      await nextTick()
    }
    await vi.waitFor(() => expect(bench.upToDate.value).toBe(true), { timeout: 10_000 })
    expect(bench.grades.value?.hillGrade).toBe(0.07)
    await vi.waitFor(() => expect(bench.depth.value?.bands?.sumpC.high).toBeGreaterThan(0))
    const peak = bench.answer.value?.judged.peakSumpC ?? Number.NaN
    expect(bench.depth.value?.bands?.sumpC.low).toBeLessThan(peak)
    expect(bench.depth.value?.bands?.sumpC.high).toBeGreaterThan(peak)
  })

  it('announces a change once, when it has settled, and keeps the last answer through a refusal', async () => {
    const { request, bench, wrapper } = await startBench(requestAt(0.06))
    const before = bench.answer.value?.judged.peakSumpC
    request.value = requestAt(0.06, 290_000)
    await nextTick()
    expect(bench.refusal.value?.message).toBe('cannot climb this grade')
    expect(bench.answer.value?.judged.peakSumpC).toBe(before)
    expect(wrapper.get('[role=status]').text()).toBe('')
    await vi.waitFor(
      () => expect(wrapper.get('[role=status]').text()).toMatch(/^No answer: cannot climb this grade/),
      {
        timeout: 3000,
      },
    )
    expect(bench.settledCount.value).toBe(1)
  })

  it('says which place, what to do, and by which state of lock-up it is judged', async () => {
    const { wrapper } = await startBench(requestAt(0.06))
    const text = plain(wrapper.text())
    expect(text).toContain('Pan, peak')
    expect(text).toContain('To-cooler line, peak')
    expect(text).toMatch(/°F (under|over) its 220 °F/)
    expect(text).toContain('Lock-up is not proven: judged unlocked. If it locks: pan')
    expect(text).toMatch(/Grade it holds.*\d % ?at 44\.7 mph for 4\.97 mi/)
  })
})

describe('a slider with its field and steps (A4)', () => {
  const slide = { us: { from: 0, to: 75, step: 1 }, metric: { from: 0, to: 120, step: 1 } }
  async function mountSlider(value: number) {
    const wrapper = await mountSuspended(SliderField, {
      props: {
        modelValue: value,
        label: 'Speed',
        quantity: 'speed' as const,
        slide,
        max: 100,
        'onUpdate:modelValue': (next: number | null) => void wrapper.setProps({ modelValue: next }),
      },
    })
    return wrapper
  }

  it('is one value by all three, in SI, with its unit in words', async () => {
    const slider = await mountSlider(20.1168)
    expect((slider.get('input[type=text]').element as HTMLInputElement).value).toBe('45')
    const range = slider.get('input[type=range]')
    expect(plain(range.attributes('aria-valuetext') ?? '')).toBe('45 mph')
    await range.setValue('50')
    expect(slider.props('modelValue')).toBeCloseTo(22.352, 9)
    expect((slider.get('input[type=text]').element as HTMLInputElement).value).toBe('50')
    await slider.get('button[aria-label="Speed: less"]').trigger('click')
    expect(slider.props('modelValue')).toBeCloseTo(21.90496, 9)
    await slider.get('input[type=text]').setValue('100 km/h')
    expect(slider.props('modelValue')).toBeCloseTo(27.7778, 3)
  })

  it('steps to the next round value, not past it, and never beyond what the model takes', async () => {
    const slider = await mountSlider(20.1)
    await slider.get('button[aria-label="Speed: more"]').trigger('click')
    expect(slider.props('modelValue')).toBeCloseTo(20.1168, 9)
    await slider.setProps({ modelValue: 100 })
    await slider.get('button[aria-label="Speed: more"]').trigger('click')
    expect(slider.props('modelValue')).toBe(100)
  })
})
