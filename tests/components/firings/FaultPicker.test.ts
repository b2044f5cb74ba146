import { flushPromises, mount } from '@vue/test-utils'
import { describe, expect, it, vi } from 'vitest'
import FaultPicker from '../../../src/components/faults/FaultPicker.vue'
import FaultStrip from '../../../src/components/faults/FaultStrip.vue'
import { faultRule } from '../../../server/shared/faults/rules.js'
import type { FiringKind } from '../../../server/shared/kinds.js'

async function show(
  props: Partial<{ kind: FiringKind; stage: 'before' | 'after'; without: string[] }> = {},
) {
  const wrapper = mount(FaultPicker, {
    props: { kind: 'glaze', ...props },
    attachTo: document.body,
  })
  await vi.dynamicImportSettled()
  await flushPromises()
  return wrapper
}
const names = (wrapper: Awaited<ReturnType<typeof show>>): string[] =>
  wrapper.findAll('[role="option"]').map((option) => option.text())

describe('the fault tree to pick from', () => {
  it('begins with the honest coarse name, its finer ones below it', async () => {
    expect(names(await show()).slice(0, 3)).toEqual([
      'Crack or break, not named',
      'Crack in the base',
      'S-crack',
    ])
  })

  it('finds a fault by another name that the trade has for it', async () => {
    const wrapper = await show()
    await wrapper.get('input').setValue('pig skin')
    expect(names(wrapper)).toEqual(['Pinholing'])
  })

  it('picks with arrows and Enter', async () => {
    const wrapper = await show()
    const input = wrapper.get('input')
    await input.setValue('crack base')
    await input.trigger('keydown', { key: 'ArrowDown' })
    await input.trigger('keydown', { key: 'Enter' })
    expect(wrapper.emitted('pick')).toEqual([['s-crack']])
  })

  it('has no fault of the glaze at a bisque', async () => {
    const options = (await show({ kind: 'bisque' }))
      .findAll('[role="option"]')
      .map((option) => option.attributes('id')?.replace(/^v-\d+-/, '') ?? '')
    expect(options.length).toBeGreaterThan(20)
    expect(options.filter((id) => faultRule(id)?.needsGlaze)).toEqual([])
  })

  it('offers before a firing only what can be seen then', async () => {
    const before = names(await show({ stage: 'before' }))
    expect(before).toContain('S-crack')
    expect(before).not.toContain('Steam explosion / blow-out')
  })

  it('leaves out what the piece has already', async () => {
    expect(names(await show({ without: ['s-crack'] }))).not.toContain('S-crack')
  })

  it('says what to do when nothing is of that name', async () => {
    const wrapper = await show()
    await wrapper.get('input').setValue('zzz')
    expect(wrapper.get('[role="status"]').text()).toContain('Other, not in the guide')
  })
})

describe('the fault in hand', () => {
  const strip = (props: { kind: FiringKind; met: string[]; modelValue: string | null }) =>
    mount(FaultStrip, { props })
  const shown = (wrapper: ReturnType<typeof strip>): string[] =>
    wrapper.findAll('label').map((label) => label.text())

  it('is one of the plain names, without those of the glaze at a bisque', () => {
    expect(shown(strip({ kind: 'glaze', met: [], modelValue: null }))).toContain('Crazing')
    expect(shown(strip({ kind: 'bisque', met: [], modelValue: null }))).not.toContain('Crazing')
  })

  it('shows a fault from the tree before the plain names once it is met', () => {
    expect(shown(strip({ kind: 'glaze', met: ['lime-pop'], modelValue: null }))[0]).toBe('Lime pop')
  })
})
