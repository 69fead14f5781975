import { mountSuspended } from '@nuxt/test-utils/runtime'
import { afterEach, describe, expect, it, vi } from 'vitest'
import { nextTick } from 'vue'
import UiQuantityField from '~/components/base/UiQuantityField.vue'
import { useSessionStore } from '~/stores/session'
import type { TypedQuantity } from '#shared/units/parse-quantity'

/** The reader brings a library along, which a busy machine takes its time to load. */
const PATIENCE = { timeout: 20_000 }
vi.setConfig({ testTimeout: 30_000 })

type Props = InstanceType<typeof UiQuantityField>['$props']

/** The field with a page around it that hands its value back, as another object. */
async function mountField(props: Partial<Props> = {}) {
  const field = await mountSuspended(UiQuantityField, {
    props: {
      label: 'Truck weight',
      quantity: 'mass',
      modelValue: { value: 2449.398798 },
      'onUpdate:modelValue': (value: TypedQuantity) => field.setProps({ modelValue: { ...value } }),
      ...props,
    } as Props,
  })
  const input = field.find('input[type="text"]')
  const element = input.element as HTMLInputElement
  return {
    field,
    input,
    shown: () => element.value,
    describedBy: () =>
      (element.getAttribute('aria-describedby') ?? '')
        .split(' ')
        .map((id) => field.find(`[id="${id}"]`).text())
        .join(' | ')
        .replaceAll('\u00a0', ' '),
    lastValue: () => field.emitted<[TypedQuantity]>('update:modelValue')?.at(-1)?.[0],
  }
}

function setUnits(system: 'us' | 'metric') {
  useSessionStore().unitsChoice = system
}

afterEach(() => setUnits('us'))

describe('a quantity field', () => {
  it('prints a value nobody typed in the person’s unit, with the other beside it', async () => {
    const { shown, describedBy } = await mountField()
    expect(shown()).toBe('5,400')
    expect(describedBy()).toBe('5,400 lb = 2,449 kg')
    setUnits('metric')
    await nextTick()
    expect(shown()).toBe('2,449.4')
    expect(describedBy()).toBe('2,449.4 kg = 5,400 lb')
  })

  it('understands a plain number in the same turn, without its reader', async () => {
    const { input, lastValue, describedBy } = await mountField()
    const element = input.element as HTMLInputElement
    element.value = '6000'
    element.dispatchEvent(new Event('input'))
    expect(lastValue()).toMatchObject({ typed: '6000', unit: 'lb' })
    expect(lastValue()?.value).toBeCloseTo(2721.55, 2)
    await nextTick()
    expect(describedBy()).toBe('6,000 lb = 2,722 kg')
  })

  it('reads units and sums as soon as their reader is there, and keeps what was typed', async () => {
    const { field, input, lastValue, shown } = await mountField()
    await input.setValue('2,45 t + 50 kg')
    await vi.waitFor(() => expect(lastValue()?.value).toBe(2500), PATIENCE)
    expect(lastValue()).toEqual({ value: 2500, typed: '2,45 t + 50 kg', unit: 't' })
    setUnits('metric')
    await nextTick()
    expect(shown()).toBe('2,45 t + 50 kg')
    expect(field.text()).toContain('lb')
  })

  it('gives a bare number the unit it was meant in when the units are switched, and takes it off again', async () => {
    const { input, shown } = await mountField()
    await input.setValue('6000')
    setUnits('metric')
    await nextTick()
    expect(shown()).toBe('6000 lb')
    setUnits('us')
    await nextTick()
    expect(shown()).toBe('6000')
  })

  it('keeps text it cannot use, says why and what would do, and leaves the value alone', async () => {
    const { field, input, shown, describedBy, lastValue } = await mountField({
      min: 200,
      hint: 'As it drives',
    })
    await input.setValue('36 in')
    await vi.waitFor(
      () =>
        expect(describedBy()).toBe(
          'As it drives | Truck weight: that is a length; this field needs a weight, such as 5400 lb.',
        ),
      PATIENCE,
    )
    expect(shown()).toBe('36 in')
    expect(input.attributes('aria-invalid')).toBe('true')
    expect(lastValue()).toBeUndefined()
    expect(field.emitted('validity')).toEqual([[false]])
    await input.setValue('90')
    expect(describedBy()).toMatch(/must be at least 441 lb/)
    await input.setValue('5000')
    expect(input.attributes('aria-invalid')).toBeUndefined()
    expect(field.emitted('validity')).toEqual([[false], [true]])
  })

  it('commits once at Enter or when it is left, and not while something is wrong', async () => {
    const { field, input } = await mountField()
    await input.setValue('6000')
    await input.trigger('keydown', { key: 'Enter' })
    await input.trigger('blur')
    expect(field.emitted('commit')).toHaveLength(1)
    await input.setValue('6000 stone')
    await vi.waitFor(() => expect(input.attributes('aria-invalid')).toBe('true'), PATIENCE)
    await input.trigger('keydown', { key: 'Enter' })
    expect(field.emitted('commit')).toHaveLength(1)
    expect(field.find('[role="status"]').text()).toMatch(/“stone” is not a unit/)
  })

  it('takes back at Escape what was typed since the last commit', async () => {
    const { field, input, shown, lastValue } = await mountField({
      modelValue: { value: 2450, typed: '2.45 t', unit: 't' },
    })
    expect(shown()).toBe('2.45 t')
    await input.setValue('6000')
    await input.setValue('6000 x')
    await input.trigger('keydown', { key: 'Escape' })
    expect(shown()).toBe('2.45 t')
    expect(lastValue()).toEqual({ value: 2450, typed: '2.45 t', unit: 't' })
    expect(input.attributes('aria-invalid')).toBeUndefined()
    expect(field.emitted('commit')).toBeUndefined()
  })

  it('shows a value that came from outside', async () => {
    const { field, input, shown } = await mountField()
    await input.setValue('nonsense')
    await field.setProps({ modelValue: { value: 2000, typed: '2 t', unit: 't' } })
    expect(shown()).toBe('2 t')
    expect(input.attributes('aria-invalid')).toBeUndefined()
  })

  it('may be left empty only where it is optional', async () => {
    const { input, lastValue, describedBy } = await mountField()
    await input.setValue('')
    expect(describedBy()).toMatch(/nothing is typed yet; 5400 lb would do/)
    const other = await mountField({ optional: true })
    await other.input.setValue(' ')
    expect(other.lastValue()).toEqual({ value: null })
    expect(lastValue()).toBeUndefined()
  })

  it('takes a tire size code', async () => {
    const { input, shown, lastValue, describedBy } = await mountField({
      label: 'Tire',
      quantity: 'tire',
      modelValue: { value: 0.3822 },
    })
    expect(shown()).toBe('31 in')
    await input.setValue('33x12.50R15')
    expect(lastValue()).toMatchObject({ typed: '33x12.50R15', unit: 'tire size' })
    expect(lastValue()?.value).toBeCloseTo(0.4069, 4)
    expect(describedBy()).toMatch(/^33\.0 in tall, rolling radius 16\.0 in = 407 mm$/)
    await input.setValue('big ones')
    expect(describedBy()).toMatch(/^Tire: “big ones” is not a tire size; LT265\/70R17/)
  })

  it('says where the value comes from in words, and hands a change on', async () => {
    const { field } = await mountField({ origin: 'typical' })
    const group = field.find('fieldset')
    expect(group.find('legend').text()).toBe('Where Truck weight comes from')
    expect(group.findAll('label').map((label) => label.text())).toEqual(['measured', 'maker', 'typical'])
    expect((group.find('input[value="typical"]').element as HTMLInputElement).checked).toBe(true)
    await group.find('input[value="measured"]').setValue(true)
    expect(field.emitted('update:origin')).toEqual([['measured']])
  })
})
