import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it, vi } from 'vitest'
import UiQuantityField from '~/components/base/UiQuantityField.vue'

vi.mock('#shared/quantities/evaluate', () => {
  throw new Error('no network')
})

describe('a quantity field whose reader cannot be fetched', () => {
  it('still takes plain numbers, and says what it cannot do', async () => {
    const field = await mountSuspended(UiQuantityField, {
      props: { label: 'Truck weight', quantity: 'mass', modelValue: { value: 2450 } },
    })
    const input = field.find('input[type="text"]')
    await input.setValue('5400 lb + 350 lb')
    await vi.waitFor(() =>
      expect(field.text()).toContain(
        'Truck weight: units and sums cannot be read without the network; a number in pounds alone can.',
      ),
    )
    expect((input.element as HTMLInputElement).value).toBe('5400 lb + 350 lb')
    await input.setValue('5750')
    expect(input.attributes('aria-invalid')).toBeUndefined()
    expect(field.emitted('update:modelValue')?.at(-1)?.[0]).toMatchObject({ typed: '5750', unit: 'lb' })
  })
})
