import { mount } from '@vue/test-utils'
import { describe, expect, it } from 'vitest'
import PackLotFields from '../../../src/components/firings/PackLotFields.vue'
import PackLots from '../../../src/components/firings/PackLots.vue'
import RecordedShares from '../../../src/components/firings/RecordedShares.vue'
import type { PackDraft, PackLot } from '../../../src/composables/firings/packDraft'
import { emptyLot, emptyPack } from '../../../src/composables/firings/packDraft'
import type { Catalogue } from '../../../server/contract/catalogue.js'
import { LOT_FACTORS } from '../../../server/shared/factors.js'
import type { FiringKind } from '../../../server/shared/kinds.js'
import { uidOf } from '../../support/firingViews'
import { mountUi } from '../../support/components'

let last = 7000
const makeUid = (): string => uidOf((last += 1))
const catalogue: Catalogue = {
  studios: [],
  kilns: [],
  levels: [
    {
      uid: uidOf(11),
      factor: 'form',
      studio: null,
      code: 'mug',
      name: 'mugs',
      attributes: {},
      archived: false,
    },
  ],
}
const shared = {
  catalogue,
  studio: null,
  errors: {},
  order: <T>(_factor: string, levels: T[]): T[] => levels,
}
const lot = (given: Partial<PackLot> = {}): PackLot => ({ ...emptyLot(makeUid), ...given })

async function fields(
  kind: FiringKind,
  given: Partial<PackLot> = {},
  errors: Record<string, string> = {},
) {
  return (
    await mountUi(PackLotFields, { props: { ...shared, errors, lot: lot(given), index: 0, kind } })
  ).wrapper
}
const labels = (wrapper: Awaited<ReturnType<typeof fields>>): string[] =>
  wrapper.findAll('label').map((label) => label.text())

describe('the fields of a lot', () => {
  it('have every factor of the registry, so that a new one appears by itself', async () => {
    const expected = LOT_FACTORS.map((factor) => (factor.several ? factor.plural : factor.name))
    expect(labels(await fields('glaze'))).toEqual(expect.arrayContaining(expected))
  })

  it('have no factor of the glaze at a bisque', async () => {
    const shown = labels(await fields('bisque'))
    for (const factor of LOT_FACTORS.filter(({ applies }) => applies === 'glaze'))
      expect(shown).not.toContain(factor.several ? factor.plural : factor.name)
    expect(shown).toContain('Clay body')
  })

  it('ask whether glazes overlap only when there are several', async () => {
    expect(labels(await fields('glaze', { levels: { glaze: [uidOf(21)] } }))).not.toContain(
      'they overlap',
    )
    expect(labels(await fields('glaze', { levels: { glaze: [uidOf(21), uidOf(22)] } }))).toContain(
      'they overlap',
    )
  })

  it('say what is wrong beside the field', async () => {
    const wrapper = await fields('glaze', {}, { 'lots.0.pieces': 'How many pieces?' })
    expect(wrapper.get('input[aria-invalid="true"]').attributes('aria-describedby')).toBe(
      wrapper.get('.error').attributes('id'),
    )
  })
})

describe('the lots of a load', () => {
  async function lots(draft: PackDraft) {
    return (await mountUi(PackLots, { props: { ...shared, draft, open: null } })).wrapper
  }
  const load = (given: Partial<PackDraft>): PackDraft => ({
    ...emptyPack(makeUid),
    pieces: 100,
    ...given,
  })

  it('always show the rest', async () => {
    expect((await lots(load({ lots: [lot({ pieces: 42 })] }))).get('.rest').text()).toContain(
      '58 of 100 pieces, in no lot',
    )
    expect((await lots(load({ about: true }))).get('.rest').text()).toContain(
      '100 of about 100 pieces, in no lot',
    )
  })

  it('say when they hold more than the load, and offer their sum', async () => {
    const wrapper = await lots(
      load({ pieces: 40, lots: [lot({ pieces: 30 }), lot({ pieces: 12 })] }),
    )
    expect(wrapper.get('.rest').text()).toContain('the lots hold 42, 2 more than in all')
    await wrapper
      .findAll('button')
      .find((button) => button.text() === '42 in all, as the lots say')
      ?.trigger('click')
    expect(wrapper.emitted('total')).toEqual([[42]])
  })

  it('are named by what is recorded of them', async () => {
    const wrapper = await lots(
      load({ lots: [lot({ pieces: 5, levels: { form: uidOf(11) } }), lot({ pieces: 6 })] }),
    )
    expect(wrapper.findAll('.head strong').map((name) => name.text())).toEqual(['Mugs', 'Lot 2'])
  })

  it('open the lot in which something is wrong', async () => {
    const draft = load({ lots: [lot({ pieces: 5 }), lot()] })
    const wrapper = await lots(draft)
    await wrapper.setProps({ errors: { 'lots.1.pieces': 'How many pieces?' } })
    expect(wrapper.emitted('update:open')).toEqual([[draft.lots[1]?.uid]])
  })
})

describe('what is recorded', () => {
  it('gives the share of each factor, and names those that are not recorded in one sentence', () => {
    const text = mount(RecordedShares, {
      props: {
        recorded: [
          { factor: 'form', share: 0.423 },
          { factor: 'rack', share: 0 },
          { factor: 'shelf', share: 0 },
        ],
      },
    }).text()
    expect(text).toContain('Form42 %')
    expect(text).toContain('Not recorded for this load: drying rack, shelf.')
  })
})
