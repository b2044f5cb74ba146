import { mount } from '@vue/test-utils'
import { describe, expect, it } from 'vitest'
import FiringLots from '../../../src/components/firings/FiringLots.vue'
import OpeningFacts from '../../../src/components/firings/OpeningFacts.vue'
import RevisionList from '../../../src/components/firings/RevisionList.vue'
import { NO_COUNTS } from '../../../server/shared/counts.js'
import { makeFiring, makeLoss, makeLot, makeRevision, uidOf } from '../../support/firingViews'

describe('the lots of a firing', () => {
  const mugs = makeLot({
    uid: uidOf(1),
    pieces: 12,
    wasters: 2,
    levels: {
      form: [{ uid: uidOf(11), name: 'mugs' }],
      clay_body: [{ uid: uidOf(12), name: 'speckled buff' }],
    },
    losses: [makeLoss({ pieces: 2, also: ['crazing'], neighbour: true })],
  })

  it('are named, counted and said in words', () => {
    const text = mount(FiringLots, {
      props: {
        firing: makeFiring({
          status: 'reported',
          lots: [mugs, makeLot({ uid: uidOf(2), isRest: true, pieces: 8 })],
        }),
      },
    }).text()
    expect(text).toContain('Mugs, speckled buff')
    expect(text).toContain('12 · 2 lost')
    expect(text).toContain('S-crack, also crazing: 2 wasters (a neighbour did it)')
    expect(text).toContain('The rest')
  })

  it('have their pieces in words for who cannot see the board', () => {
    const board = mount(FiringLots, {
      props: { firing: makeFiring({ status: 'reported', lots: [mugs] }) },
    }).get('svg[role="img"]')
    expect(board.attributes('aria-label')).toBe('12 pieces: 10 first, 2 wasters')
  })

  it('name a maker only where one is given', () => {
    const words = (maker: string | null): string =>
      mount(FiringLots, { props: { firing: makeFiring({ lots: [{ ...mugs, maker }] }) } }).text()
    expect(words('Jo')).toContain('Jo')
    expect(words(null)).not.toContain('Maker')
  })

  it('leave out a rest without pieces', () => {
    const text = mount(FiringLots, {
      props: {
        firing: makeFiring({ lots: [mugs, makeLot({ uid: uidOf(2), isRest: true, pieces: 0 })] }),
      },
    }).text()
    expect(text).not.toContain('The rest')
  })
})

describe('the versions of a firing', () => {
  it('stand newest first, with who, what it came to and why', () => {
    const revisions = [
      makeRevision({ uid: uidOf(1), number: 1, kind: 'pack' }),
      makeRevision({
        uid: uidOf(2),
        number: 2,
        kind: 'report',
        counts: { ...NO_COUNTS, pieces: 12 },
      }),
      makeRevision({
        uid: uidOf(3),
        number: 3,
        kind: 'amend',
        reason: 'Rang it again.',
        author: null,
        counts: { ...NO_COUNTS, pieces: 12, wasters: 1 },
      }),
    ]
    const rows = mount(RevisionList, {
      props: { revisions, dateTime: (instant) => instant.slice(0, 10) },
    })
      .findAll('li')
      .map((row) => row.text())
    expect(rows[0]).toMatch(/amended by the system.*1 lost.*“Rang it again\.”/)
    expect(rows[1]).toMatch(/reported by Mara.*all sound/)
    expect(rows[2]).toMatch(/packed by Mara.*12 pieces/)
  })
})

describe('the opening temperature', () => {
  it('is typed in the person’s unit and kept in whole °C', async () => {
    const wrapper = mount(OpeningFacts, { props: { unit: 'F', modelValue: null } })
    await wrapper.get('input').setValue('184')
    expect(wrapper.emitted('update:modelValue')?.at(-1)).toEqual([84])
    await wrapper.setProps({ modelValue: 84 })
    expect((wrapper.get('input').element as HTMLInputElement).value).toBe('184')
  })

  it('stands with the caution to read the pyrometer, which defers to the maker’s and the studio’s rules', () => {
    const text = mount(OpeningFacts, { props: { unit: 'C', modelValue: 84 } }).text()
    expect(text).toContain('Read the pyrometer before you open')
    expect(text).toContain('rules come first')
  })
})
