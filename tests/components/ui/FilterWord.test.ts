import { flushPromises } from '@vue/test-utils'
import { describe, expect, it } from 'vitest'
import FilterWord from '../../../src/components/ui/FilterWord.vue'
import { byName, mountUi } from '../../support/components'

const options = [
  { value: 's-crack', label: 'S-crack' },
  { value: 'crazing', label: 'Crazing' },
  { value: 'cafe', label: 'Café stain' },
]
const word = (props: Record<string, unknown> = {}) =>
  mountUi(FilterWord, {
    props: { label: 'Fault', modelValue: undefined, options, allLabel: 'all faults', ...props },
  })
const listed = (): (string | undefined)[] =>
  [...document.querySelectorAll('[role="option"]')].map((option) => option.textContent?.trim())

async function press(key: string): Promise<void> {
  const target =
    document.querySelector('[role="combobox"]') ?? document.querySelector('[role="listbox"]')
  target?.dispatchEvent(new KeyboardEvent('keydown', { key, bubbles: true, cancelable: true }))
  await flushPromises()
}

async function open(): Promise<void> {
  byName('button', /^Fault:/).click()
  await flushPromises()
}

describe('FilterWord', () => {
  it('says what it is about and what is chosen', async () => {
    await word({ modelValue: 'crazing' })
    expect(byName('button', 'Fault: Crazing').getAttribute('aria-expanded')).toBe('false')
  })

  it('reads as the word for no filter while nothing is chosen', async () => {
    const { wrapper } = await word()
    expect(wrapper.text()).toBe('all faults')
  })

  it('lists the word for no filter first', async () => {
    await word()
    await open()
    expect(listed()).toEqual(['all faults', 'S-crack', 'Crazing', 'Café stain'])
    expect(byName('button', /^Fault/).getAttribute('aria-expanded')).toBe('true')
  })

  it('is chosen from by keyboard', async () => {
    const { wrapper } = await word()
    await open()
    await press('ArrowDown')
    await press('ArrowDown')
    await press('Enter')
    expect(wrapper.emitted('update:modelValue')).toEqual([['crazing']])
  })

  it('goes to an option by its first letters', async () => {
    const { wrapper } = await word()
    await open()
    await press('c')
    await press('a')
    await press('Enter')
    expect(wrapper.emitted('update:modelValue')).toEqual([['cafe']])
  })

  it('gives undefined for no filter', async () => {
    const { wrapper } = await word({ modelValue: 'crazing' })
    await open()
    byName('[role="option"]', 'all faults').click()
    expect(wrapper.emitted('update:modelValue')).toEqual([[undefined]])
  })

  it('says nothing when the same is chosen again', async () => {
    const { wrapper } = await word({ modelValue: 'crazing' })
    await open()
    byName('[role="option"]', 'Crazing').click()
    expect(wrapper.emitted('update:modelValue')).toBeUndefined()
  })

  it('narrows a long list down, accents or not', async () => {
    await word({ filterable: true })
    await open()
    const line = document.querySelector<HTMLInputElement>('[role="combobox"]')
    if (!line) throw new Error('no line to type in')
    line.value = 'cafe'
    line.dispatchEvent(new Event('input'))
    await flushPromises()
    expect(listed()).toEqual(['Café stain'])
  })

  it('says that nothing has the name typed', async () => {
    await word({ filterable: true })
    await open()
    const line = document.querySelector<HTMLInputElement>('[role="combobox"]')
    if (!line) throw new Error('no line to type in')
    line.value = 'zz'
    line.dispatchEvent(new Event('input'))
    await flushPromises()
    expect(document.body.textContent).toContain('Nothing of that name.')
  })
})
