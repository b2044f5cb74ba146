import { describe, expect, it } from 'vitest'
import BoardMark from '../../../src/components/ware-board/BoardMark.vue'
import WareBoard from '../../../src/components/ware-board/WareBoard.vue'
import { mountUi } from '../../support/components'

const counts = { first: 36, second: 1, waster: 3 }

describe('WareBoard', () => {
  it('is a picture whose text alternative is its counts', async () => {
    const { wrapper } = await mountUi(WareBoard, { props: { counts } })
    const picture = wrapper.get('svg')
    expect(picture.attributes('role')).toBe('img')
    expect(picture.attributes('aria-label')).toBe('40 pieces: 36 first, 1 second, 3 wasters')
  })

  it('is decoration where the same is said beside it', async () => {
    const { wrapper } = await mountUi(WareBoard, { props: { counts, label: '' } })
    expect(wrapper.get('svg').attributes()).toMatchObject({ 'aria-hidden': 'true' })
    expect(wrapper.get('svg').attributes('role')).toBeUndefined()
  })

  it('says what a cell stands for over 60 pieces, and nothing under that', async () => {
    const { wrapper } = await mountUi(WareBoard, { props: { counts: { first: 100 } } })
    expect(wrapper.text()).toBe('each cell is 2 pieces')
    const small = await mountUi(WareBoard, { props: { counts } })
    expect(small.wrapper.text()).toBe('')
  })

  it('has the size of its cells: twelve px a cell, two between', async () => {
    const { wrapper } = await mountUi(WareBoard, { props: { counts: { first: 4 }, size: 12 } })
    expect(wrapper.get('svg').attributes()).toMatchObject({ width: '54', height: '12' })
  })

  it('takes fewer columns on a narrow screen instead of smaller cells', async () => {
    const wide = window.innerWidth
    Object.defineProperty(window, 'innerWidth', { value: 390, configurable: true })
    const { wrapper } = await mountUi(WareBoard, {
      props: { counts: { first: 60 }, size: 12, columns: 50 },
    })
    expect(Number(wrapper.get('svg').attributes('width'))).toBeLessThanOrEqual(358)
    Object.defineProperty(window, 'innerWidth', { value: wide, configurable: true })
  })

  it('is painted with variables, so that both themes fit', async () => {
    const { wrapper } = await mountUi(WareBoard, { props: { counts } })
    expect(wrapper.get('.paint-waster').attributes('style')).toContain('var(--fill-waster)')
  })
})

describe('BoardMark', () => {
  it('is three cells, the last one cracked', async () => {
    const { wrapper } = await mountUi(BoardMark, { props: { size: 14 } })
    expect(wrapper.get('svg').attributes('width')).toBe('46')
    expect(wrapper.get('.paint-waster').attributes('d')).toMatch(/^M32 0/)
    expect(wrapper.find('.paint-crack').exists()).toBe(true)
  })
})
