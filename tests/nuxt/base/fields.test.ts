import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it } from 'vitest'
import { defineComponent, h } from 'vue'
import UiCheckbox from '~/components/base/UiCheckbox.vue'
import UiSegmented from '~/components/base/UiSegmented.vue'
import UiSelect from '~/components/base/UiSelect.vue'
import UiTextField from '~/components/base/UiTextField.vue'

const OPTIONS = [
  { value: 'yes', label: 'Yes' },
  { value: 'no', label: 'No' },
  { value: 'unknown', label: 'Not known' },
]

describe('a text field', () => {
  it('ties label, hint and error to the input', async () => {
    const field = await mountSuspended(UiTextField, {
      props: {
        modelValue: 'x',
        label: 'E-mail',
        hint: 'The one of the invitation.',
        error: 'It needs an @.',
      },
      attrs: { autocomplete: 'username', class: 'wide' },
    })
    const input = field.find('input')
    expect(field.find('label').attributes('for')).toBe(input.attributes('id'))
    const described = (input.attributes('aria-describedby') ?? '')
      .split(' ')
      .map((id) => field.find(`[id="${id}"]`).text())
    expect(described).toEqual(['The one of the invitation.', 'It needs an @.'])
    expect(input.attributes('aria-invalid')).toBe('true')
    expect(input.attributes('autocomplete')).toBe('username')
    expect(field.classes()).toContain('wide')
    expect(input.classes()).not.toContain('wide')
  })

  it('says nothing about errors where there is none', async () => {
    const field = await mountSuspended(UiTextField, {
      props: { modelValue: '', label: 'Name', optional: true },
    })
    expect(field.find('input').attributes('aria-invalid')).toBeUndefined()
    expect(field.find('input').attributes('aria-describedby')).toBeUndefined()
    expect(field.find('label').text()).toBe('Name (optional)')
  })

  it('hands on what is typed', async () => {
    const field = await mountSuspended(UiTextField, { props: { modelValue: '', label: 'Name' } })
    await field.find('input').setValue('Orrin')
    expect(field.emitted('update:modelValue')).toEqual([['Orrin']])
  })
})

describe('a select', () => {
  it('offers its options and hands on the choice', async () => {
    const select = await mountSuspended(UiSelect, {
      props: { modelValue: 'no', label: 'Lock-up', options: OPTIONS },
    })
    expect(select.findAll('option').map((option) => option.text())).toEqual(['Yes', 'No', 'Not known'])
    expect(select.find('select').element.value).toBe('no')
    await select.find('select').setValue('yes')
    expect(select.emitted('update:modelValue')).toEqual([['yes']])
  })
})

describe('a row of segments', () => {
  it('is a named group of radio buttons with one chosen', async () => {
    const row = await mountSuspended(UiSegmented, {
      props: { modelValue: 'unknown', label: 'Seen to lock', options: OPTIONS, hint: 'On the road.' },
    })
    expect(row.find('fieldset legend').text()).toBe('Seen to lock')
    const radios = row.findAll('input[type="radio"]')
    expect(new Set(radios.map((radio) => radio.attributes('name'))).size).toBe(1)
    expect(radios.map((radio) => (radio.element as HTMLInputElement).checked)).toEqual([false, false, true])
    await radios[0]?.setValue()
    expect(row.emitted('update:modelValue')).toEqual([['yes']])
    const described = row.find('fieldset').attributes('aria-describedby') ?? ''
    expect(row.find(`[id="${described}"]`).text()).toBe('On the road.')
  })

  it('keeps two rows on one page apart', async () => {
    const props = { modelValue: 'yes', label: 'One', options: OPTIONS }
    const page = await mountSuspended(
      defineComponent(() => () => [h(UiSegmented, props), h(UiSegmented, props)]),
    )
    const names = page.findAll('fieldset').map((row) => row.find('input').attributes('name'))
    expect(new Set(names).size).toBe(2)
  })
})

describe('a checkbox', () => {
  it('is labeled by its whole line', async () => {
    const box = await mountSuspended(UiCheckbox, { props: { modelValue: false, label: 'Show the password' } })
    expect(box.find('label').text()).toBe('Show the password')
    await box.find('label input').setValue(true)
    expect(box.emitted('update:modelValue')).toEqual([[true]])
  })
})
