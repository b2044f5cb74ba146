import { describe, expect, it } from 'vitest'
import WareBoardTouch from '../../../src/components/ware-board/WareBoardTouch.vue'
import { stepOf } from '../../../src/components/ware-board/useRovingGrid'
import { byName, mountUi } from '../../support/components'

const cells = [
  { kind: 'first' },
  { kind: 'first' },
  { kind: 'first' },
  { kind: 'waster', note: 'S-crack' },
  { kind: 'refire', late: true },
]
const board = () => mountUi(WareBoardTouch, { props: { cells, label: 'Mugs, speckled buff' } })
const buttons = (): HTMLElement[] => [
  ...document.querySelectorAll<HTMLElement>('.touch-board button'),
]
const tabStops = (): number[] =>
  buttons().flatMap((button, index) => (button.tabIndex === 0 ? [index] : []))

describe('WareBoardTouch', () => {
  it('names the lot, and each piece with its outcome and fault', async () => {
    await board()
    expect(byName('[role="group"]', 'Mugs, speckled buff')).toBeTruthy()
    expect(buttons().map((button) => button.getAttribute('aria-label'))).toEqual([
      'piece 1: sound',
      'piece 2: sound',
      'piece 3: sound',
      'piece 4: waster, S-crack',
      'piece 5: refire, seen late',
    ])
  })

  it('shows as pressed what is not sound', async () => {
    await board()
    expect(buttons().map((button) => button.getAttribute('aria-pressed'))).toEqual([
      'false',
      'false',
      'false',
      'true',
      'true',
    ])
  })

  it('says which piece was touched', async () => {
    const { wrapper } = await board()
    buttons()[2]?.click()
    expect(wrapper.emitted('toggle')).toEqual([[2]])
  })

  it('is one tab stop, moved by the arrows and by Home and End', async () => {
    const { wrapper } = await board()
    expect(tabStops()).toEqual([0])
    buttons()[0]?.focus()
    await wrapper.trigger('keydown', { key: 'ArrowRight' })
    expect(tabStops()).toEqual([1])
    expect(document.activeElement).toBe(buttons()[1])
    await wrapper.trigger('keydown', { key: 'End' })
    expect(tabStops()).toEqual([4])
    await wrapper.trigger('keydown', { key: 'ArrowRight' })
    expect(tabStops()).toEqual([4])
    await wrapper.trigger('keydown', { key: 'Home' })
    expect(tabStops()).toEqual([0])
  })

  it('begins where it was left when tabbed into again', async () => {
    await board()
    buttons()[3]?.focus()
    await Promise.resolve()
    expect(tabStops()).toEqual([3])
  })

  it('keeps its tab stop when pieces are taken away', async () => {
    const { wrapper } = await board()
    buttons()[4]?.focus()
    await wrapper.setProps({ cells: cells.slice(0, 2) })
    expect(tabStops()).toEqual([1])
  })

  it('leaves keys with a modifier to the browser', async () => {
    const { wrapper } = await board()
    buttons()[0]?.focus()
    await wrapper.trigger('keydown', { key: 'ArrowRight', altKey: true })
    expect(tabStops()).toEqual([0])
  })

  it('takes no touch while it is disabled', async () => {
    const { wrapper } = await mountUi(WareBoardTouch, {
      props: { cells, label: 'Mugs', disabled: true },
    })
    buttons()[0]?.click()
    expect(wrapper.emitted('toggle')).toBeUndefined()
  })
})

describe('stepOf', () => {
  it('goes a row up or down by the columns on the screen', () => {
    expect(stepOf('ArrowDown', 7)).toBe(7)
    expect(stepOf('ArrowUp', 7)).toBe(-7)
    expect(stepOf('a', 7)).toBeUndefined()
  })
})
