import { describe, expect, it } from 'vitest'
import type { Component } from 'vue'
import UiCheckbox from '../../../src/components/ui/UiCheckbox.vue'
import UiDate from '../../../src/components/ui/UiDate.vue'
import UiInput from '../../../src/components/ui/UiInput.vue'
import UiNumber from '../../../src/components/ui/UiNumber.vue'
import UiRadioGroup from '../../../src/components/ui/UiRadioGroup.vue'
import UiSelect from '../../../src/components/ui/UiSelect.vue'
import UiTextarea from '../../../src/components/ui/UiTextarea.vue'
import FormErrors from '../../../src/components/ui/FormErrors.vue'
import { byName, mountUi } from '../../support/components'

const options = [
  { value: 'front', label: 'Front, 170 l', group: 'Quayside' },
  { value: 'back', label: 'Back, 240 l', group: 'Quayside' },
]

describe.each<[string, Component, Record<string, unknown>]>([
  ['UiInput', UiInput, { modelValue: '' }],
  ['UiNumber', UiNumber, { modelValue: null }],
  ['UiTextarea', UiTextarea, { modelValue: '' }],
  ['UiDate', UiDate, { modelValue: null }],
  ['UiSelect', UiSelect, { modelValue: null, options }],
])('%s', (_name, component, props) => {
  it('ties its label to its control', async () => {
    const { wrapper } = await mountUi(component, { props: { ...props, label: 'Pieces' } })
    const control = wrapper.get('input, select, textarea')
    expect(wrapper.get('label').attributes('for')).toBe(control.attributes('id'))
    expect(control.attributes('aria-invalid')).toBeUndefined()
  })

  it('has its error beside it, and read out with its hint', async () => {
    const { wrapper } = await mountUi(component, {
      props: {
        ...props,
        label: 'Pieces',
        error: 'At least one piece.',
        hint: 'All that stood there.',
      },
    })
    const control = wrapper.get('input, select, textarea')
    expect(control.attributes('aria-invalid')).toBe('true')
    const words = (control.attributes('aria-describedby') ?? '')
      .split(' ')
      .map((id) => document.getElementById(id)?.textContent)
    expect(words).toEqual(['At least one piece.', 'All that stood there.'])
  })
})

describe('UiNumber', () => {
  it('gives a number, and null for an empty field', async () => {
    const { wrapper } = await mountUi(UiNumber, { props: { modelValue: 5, label: 'Pieces' } })
    await wrapper.get('input').setValue('12')
    await wrapper.get('input').setValue('')
    expect(wrapper.emitted('update:modelValue')).toEqual([[12], [null]])
  })

  it('steps within its limits', async () => {
    const { wrapper } = await mountUi(UiNumber, {
      props: { modelValue: 1, label: 'Mugs', stepper: true, min: 0, max: 2 },
    })
    byName('button', 'Mugs: one more').click()
    expect(wrapper.emitted('update:modelValue')).toEqual([[2]])
    await wrapper.setProps({ modelValue: 2 })
    expect((byName('button', 'Mugs: one more') as HTMLButtonElement).disabled).toBe(true)
  })

  it('begins at its least from an empty field', async () => {
    const { wrapper } = await mountUi(UiNumber, {
      props: { modelValue: null, label: 'Mugs', stepper: true, min: 1 },
    })
    byName('button', 'Mugs: one more').click()
    expect(wrapper.emitted('update:modelValue')).toEqual([[1]])
  })
})

describe('UiSelect', () => {
  it('gives null for its empty word', async () => {
    const { wrapper } = await mountUi(UiSelect, {
      props: { modelValue: 'front', label: 'Kiln', options, empty: 'not recorded' },
    })
    await wrapper.get('select').setValue('')
    expect(wrapper.emitted('update:modelValue')).toEqual([[null]])
  })

  it('groups its options', async () => {
    const { wrapper } = await mountUi(UiSelect, {
      props: { modelValue: 'front', label: 'Kiln', options },
    })
    expect(wrapper.get('optgroup').attributes('label')).toBe('Quayside')
    expect(wrapper.findAll('optgroup option')).toHaveLength(2)
  })
})

describe('UiRadioGroup', () => {
  it('is a named group of radio buttons', async () => {
    const { wrapper } = await mountUi(UiRadioGroup, {
      props: {
        modelValue: null,
        label: 'Outcome',
        options: [
          { value: 'second', label: 'second', mark: 'second' },
          { value: 'waster', label: 'waster', mark: 'waster' },
        ],
      },
    })
    expect(wrapper.get('fieldset legend').text()).toBe('Outcome')
    await wrapper.findAll('input')[1]?.setValue(true)
    expect(wrapper.emitted('update:modelValue')).toEqual([['waster']])
  })
})

describe('UiCheckbox', () => {
  it('has its error read out', async () => {
    const { wrapper } = await mountUi(UiCheckbox, {
      props: { modelValue: false, label: 'I have read it', error: 'Say that you have read it.' },
    })
    const id = wrapper.get('input').attributes('aria-describedby') ?? ''
    expect(document.getElementById(id)?.textContent).toBe('Say that you have read it.')
  })
})

describe('FormErrors', () => {
  it('says how many fields need another look, in the singular for one', async () => {
    const { wrapper } = await mountUi(FormErrors, { props: { errors: { name: 'x' } } })
    expect(wrapper.text()).toMatch(/^One field needs another look/)
    await wrapper.setProps({ errors: { name: 'x', pieces: 'y' } })
    expect(wrapper.text()).toMatch(/^2 fields need another look/)
  })

  it('is not there while all is well', async () => {
    const { wrapper } = await mountUi(FormErrors, { props: { errors: {}, message: null } })
    expect(wrapper.find('[role="alert"]').exists()).toBe(false)
  })
})
