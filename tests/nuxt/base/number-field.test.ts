import { mountSuspended } from '@nuxt/test-utils/runtime'
import { afterEach, describe, expect, it } from 'vitest'
import { nextTick } from 'vue'
import UiNumberField from '~/components/base/UiNumberField.vue'
import { useSessionStore } from '~/stores/session'

const POUND_KG = 0.45359237

type Props = InstanceType<typeof UiNumberField>['$props']

async function mountField(props: Partial<Props> = {}) {
  const field = await mountSuspended(UiNumberField, {
    props: {
      label: 'Loaded weight',
      quantity: 'mass',
      modelValue: 5400 * POUND_KG,
      'onUpdate:modelValue': (value: number | null) => field.setProps({ modelValue: value }),
      ...props,
    } as Props,
  })
  const input = field.find('input')
  return {
    field,
    input,
    shown: () => (input.element as HTMLInputElement).value,
    values: () => field.emitted('update:modelValue')?.map(([value]) => value) ?? [],
    describedBy: () =>
      (input.attributes('aria-describedby') ?? '')
        .split(' ')
        .filter((id) => id !== '')
        .map((id) => field.find(`[id="${id}"]`).text().replaceAll('\u00a0', ' '))
        .join(' '),
  }
}

function setUnits(system: 'us' | 'metric') {
  useSessionStore().unitsChoice = system
}

afterEach(() => setUnits('us'))

describe('a number field', () => {
  it('shows SI in the person’s unit, with a keypad for figures', async () => {
    const { field, input, shown } = await mountField()
    expect(shown()).toBe('5,400')
    expect(input.attributes('inputmode')).toBe('decimal')
    expect(field.find('label').text()).toBe('Loaded weight, in pounds')
    expect(field.find('label').attributes('for')).toBe(input.attributes('id'))
  })

  it('hands on SI and what was typed, without touching what stands there', async () => {
    const { field, input, shown, values } = await mountField()
    await input.setValue('6,100')
    expect(values()).toEqual([expect.closeTo(6100 * POUND_KG, 9)])
    expect(field.emitted('typed')).toEqual([[{ typed: '6,100', unit: 'lb' }]])
    expect(shown()).toBe('6,100')
  })

  it('understands the other unit where it is named', async () => {
    const { field, input, shown, values } = await mountField()
    await input.setValue('2450 kg')
    expect(values()).toEqual([2450])
    expect(field.emitted('typed')).toEqual([[{ typed: '2450 kg', unit: 'kg' }]])
    expect(shown()).toBe('2450 kg')
  })

  it('keeps what cannot be read, says why and what would do, and leaves the value alone', async () => {
    const { field, input, shown, values, describedBy } = await mountField({ example: 5400 * POUND_KG })
    await input.setValue('heavy')
    expect(shown()).toBe('heavy')
    expect(values()).toEqual([])
    expect(input.attributes('aria-invalid')).toBe('true')
    expect(describedBy()).toBe('Loaded weight: “heavy” is not a number. 5,400 lb would do.')
    expect(field.emitted('validity')).toEqual([[false]])

    await input.setValue('5500')
    expect(input.attributes('aria-invalid')).toBeUndefined()
    expect(describedBy()).toBe('')
    expect(field.emitted('validity')).toEqual([[false], [true]])
  })

  it('names the bound that was passed, in the unit of the person', async () => {
    const { input, values, describedBy } = await mountField({ min: 200 * POUND_KG, max: 60_000 * POUND_KG })
    await input.setValue('70000')
    expect(describedBy()).toBe('Loaded weight must be at most 60,000 lb. 200 lb to 60,000 lb would do.')
    expect(values()).toEqual([])
  })

  it('asks for a value that is missing, unless it may be', async () => {
    const needed = await mountField({ example: 5400 * POUND_KG })
    await needed.input.setValue('')
    expect(needed.describedBy()).toBe('Loaded weight is missing. 5,400 lb would do.')
    expect(needed.values()).toEqual([])

    const optional = await mountField({ optional: true })
    await optional.input.setValue('')
    expect(optional.describedBy()).toBe('')
    expect(optional.values()).toEqual([null])
  })

  it('prints anew when the units are switched, without changing the value', async () => {
    const { field, shown, values } = await mountField()
    setUnits('metric')
    await nextTick()
    expect(shown()).toBe('2,449.4')
    expect(field.find('label').text()).toBe('Loaded weight, in kilograms')
    expect(values()).toEqual([])
    expect(field.emitted('typed')).toBeUndefined()
  })

  it('leaves what cannot be read where it is when the units are switched', async () => {
    const { input, shown } = await mountField()
    await input.setValue('heavy')
    setUnits('metric')
    await nextTick()
    expect(shown()).toBe('heavy')
  })

  it('follows a change from outside', async () => {
    const { field, shown } = await mountField()
    await field.setProps({ modelValue: 1000 * POUND_KG })
    expect(shown()).toBe('1,000')
  })

  it('shows an error from outside when it has none of its own', async () => {
    const { input, describedBy } = await mountField({ error: 'The scale ticket says otherwise.' })
    expect(describedBy()).toBe('The scale ticket says otherwise.')
    expect(input.attributes('aria-invalid')).toBe('true')
  })
})
