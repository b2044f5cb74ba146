import { describe, expect, it } from 'vitest'
import ReportLot from '../../../src/components/firings/ReportLot.vue'
import type { LotDraft } from '../../../src/composables/firings/reportDraft'
import {
  markOf,
  setCount,
  setNotLookedAt,
  touch,
} from '../../../src/composables/firings/reportDraft'
import { makeLot, uidOf } from '../../support/firingViews'
import { mountUi } from '../../support/components'

const crack = markOf('s-crack', 'waster')
const draftOf = (fired: number): LotDraft => ({
  lot: uidOf(1),
  fired,
  said: false,
  notLookedAt: 0,
  entries: [],
})

async function show(draft: LotDraft, lot = makeLot({ pieces: draft.fired })) {
  return (
    await mountUi(ReportLot, { props: { lot, draft, name: 'Mugs, speckled buff', hand: crack } })
  ).wrapper
}
const pieces = (wrapper: Awaited<ReturnType<typeof show>>) =>
  wrapper.get('[role="group"]').findAll('button')

describe('a lot at the kiln', () => {
  it('asks whether it is all sound while nothing was said of it, and passes the answer on', async () => {
    const wrapper = await show(draftOf(12))
    const ask = wrapper.get('button.say')
    expect(ask.text()).toMatch(/12\s*all sound\?/)
    await ask.trigger('click')
    expect(wrapper.emitted('sound')).toHaveLength(1)
  })

  it('passes the touched piece on', async () => {
    const wrapper = await show(draftOf(12))
    await pieces(wrapper)[4]?.trigger('click')
    expect(wrapper.emitted('touch')).toEqual([[4]])
  })

  it('reads out each piece with its outcome and fault', async () => {
    const labels = pieces(await show(touch(draftOf(3), 1, crack))).map((button) =>
      button.attributes('aria-label'),
    )
    expect(labels).toEqual(['piece 1: sound', 'piece 2: waster, S-crack', 'piece 3: sound'])
  })

  it('says how many are lost beside its name', async () => {
    expect((await show(touch(draftOf(12), 1, crack))).get('.lot-head').text()).toContain(
      '12 · 1 lost',
    )
  })

  it('shows how many were not looked at, at most those that are not marked', async () => {
    const field = (await show(setNotLookedAt(touch(draftOf(4), 0, crack), 2))).get(
      'input[type="number"]',
    )
    expect((field.element as HTMLInputElement).value).toBe('2')
    expect(field.attributes('max')).toBe('3')
  })

  it('counts the faults of more than 60 pieces instead of touching them', async () => {
    const wrapper = await show(setCount(draftOf(80), crack, 3))
    expect(wrapper.find('[role="group"]').exists()).toBe(false)
    const field = wrapper.get('input[type="number"]')
    await field.setValue('7')
    expect(wrapper.emitted('count')).toEqual([[crack, 7]])
  })

  it('tells the ware from the next by class, maker, forming and shelf', async () => {
    const level = (n: number, name: string) => [{ uid: uidOf(n), name }]
    const lot = makeLot({
      pieces: 2,
      maker: 'Jo',
      levels: { class: level(4, 'Tuesday'), forming: level(5, 'thrown'), shelf: level(6, 'top') },
    })
    expect((await show(draftOf(2), lot)).get('.facts').text()).toBe(
      'Tuesday · Jo · thrown · top shelf',
    )
  })

  it('says nothing of a maker where none is given', async () => {
    expect((await show(draftOf(2), makeLot({ pieces: 2 }))).find('.facts').exists()).toBe(false)
  })
})
