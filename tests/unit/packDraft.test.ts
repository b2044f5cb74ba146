import { describe, expect, it } from 'vitest'
import type { PackDraft } from '../../src/composables/firings/packDraft.js'
import {
  asLastTime,
  duplicateOf,
  emptyLot,
  emptyPack,
  fitToStudio,
  inLots,
  levelsFor,
  lotFactors,
  packBodyOf,
  packOf,
  packProblems,
  recordedIn,
  restOf,
} from '../../src/composables/firings/packDraft.js'
import { packBody } from '../../server/contract/firings.js'
import type { Catalogue } from '../../server/contract/catalogue.js'
import { LOT_FACTORS } from '../../server/shared/factors.js'
import { makeFiring, makeLoss, makeLot, uidOf } from '../support/firingViews.js'

let last = 5000
const makeUid = (): string => uidOf((last += 1))

function packed(given: Partial<PackDraft> = {}): PackDraft {
  return { ...emptyPack(makeUid), kiln: uidOf(300), localDate: '2026-05-03', pieces: 100, ...given }
}
const lot = (pieces: number | null, levels: Record<string, string | string[] | null> = {}) => ({
  ...emptyLot(makeUid),
  pieces,
  levels,
})

describe('the rest', () => {
  it('is what is in no lot', () => {
    expect(restOf(packed({ lots: [lot(12), lot(30)] }))).toBe(58)
    expect(inLots(packed({ lots: [lot(12), lot(null)] }))).toBe(12)
  })
})

describe('what is wrong with a load', () => {
  it('is nothing when kiln, day and pieces are there', () => {
    expect(packProblems(packed())).toEqual({})
  })

  it('is said beside each field that is empty', () => {
    const problems = packProblems({ ...emptyPack(makeUid), lots: [lot(3), lot(null)] })
    expect(Object.keys(problems).sort()).toEqual(['kiln', 'localDate', 'lots.1.pieces', 'pieces'])
  })

  it('is that the lots hold more than the load', () => {
    expect(packProblems(packed({ pieces: 40, lots: [lot(30), lot(11)] })).pieces).toBe(
      'The lots hold 41 pieces, 1 more than the firing.',
    )
  })

  it('is that more pieces of a lot, or of the rest, were turned away than it has', () => {
    const mugs = lot(2)
    const draft = packed({ pieces: 10, lots: [mugs, lot(8)] })
    const away = (place: string, pieces: number) => ({
      uid: makeUid(),
      lot: place,
      fault: 's-crack',
      pieces,
    })
    expect(packProblems({ ...draft, turnedAway: [away(mugs.uid, 3)] })).toEqual({
      'turnedAway.0.pieces': '3 turned away, but the lot has 2 pieces.',
    })
    expect(packProblems({ ...draft, turnedAway: [away(draft.rest, 1)] })).toEqual({
      'turnedAway.0.pieces': '1 turned away, but the lot has 0 pieces.',
    })
  })
})

describe('the body', () => {
  it('is one that the contract accepts', () => {
    const mugs = lot(12, { form: uidOf(1), glaze: [uidOf(2), uidOf(3)] })
    const draft = packed({
      lots: [mugs],
      turnedAway: [{ uid: makeUid(), lot: mugs.uid, fault: 's-crack', pieces: 1 }],
      note: ' full shelf ',
    })
    expect(packBody.parse(packBodyOf(draft))).toMatchObject({
      pieces: 100,
      note: 'full shelf',
      lots: [{ pieces: 12, levels: { glaze: [uidOf(2), uidOf(3)] } }],
    })
  })

  it('leaves glaze out of a bisque, even when it was chosen before', () => {
    const body = packBodyOf(
      packed({ kind: 'bisque', lots: [lot(5, { glaze: [uidOf(2), uidOf(3)], form: uidOf(1) })] }),
    )
    expect(body.lots[0]?.levels).toEqual({ form: uidOf(1) })
  })
})

describe('factors of a load', () => {
  it('are all of the registry, in its order, so that a new one appears by itself', () => {
    expect(lotFactors('glaze')).toEqual(LOT_FACTORS)
  })

  it('have no glaze in a bisque', () => {
    expect(lotFactors('bisque').some(({ applies }) => applies === 'glaze')).toBe(false)
  })
})

describe('what is recorded', () => {
  it('is counted in pieces of the lots that say it', () => {
    const shares = recordedIn(
      packed({
        lots: [lot(12, { form: uidOf(1) }), lot(30, { form: uidOf(1), clay_body: uidOf(2) })],
      }),
    )
    expect(shares.find(({ factor }) => factor === 'form')).toEqual({ factor: 'form', pieces: 42 })
    expect(shares.find(({ factor }) => factor === 'clay_body')).toEqual({
      factor: 'clay_body',
      pieces: 30,
    })
    expect(shares.find(({ factor }) => factor === 'rack')).toEqual({ factor: 'rack', pieces: 0 })
  })
})

describe('a load from an earlier one', () => {
  const mugs = makeLot({
    uid: uidOf(1),
    pieces: 12,
    turnedAway: 1,
    maker: 'Jo',
    levels: {
      form: [{ uid: uidOf(11), name: 'mugs' }],
      glaze: [{ uid: uidOf(12), name: 'celadon' }],
    },
    losses: [makeLoss({ uid: uidOf(9), lot: uidOf(1), outcome: 'turned-away' })],
  })
  const firing = makeFiring({ lots: [mugs, makeLot({ uid: uidOf(700), isRest: true, pieces: 8 })] })

  it('as last time: same lots under new uids, without makers and what was turned away', () => {
    const draft = asLastTime(packed({ localDate: '2026-06-01' }), firing, makeUid)
    expect(draft).toMatchObject({ localDate: '2026-06-01', pieces: 20, cone: '6', turnedAway: [] })
    expect(draft.lots).toMatchObject([
      { pieces: 12, maker: '', levels: { form: uidOf(11), glaze: [uidOf(12)] } },
    ])
    expect(draft.lots[0]?.uid).not.toBe(mugs.uid)
  })

  it('to be corrected: the same uids, on the revision that is there', () => {
    const draft = packOf({ ...firing, revision: 1 }, makeUid)
    expect(draft).toMatchObject({
      firing: firing.uid,
      base: 1,
      rest: firing.rest,
      lots: [{ uid: mugs.uid, maker: 'Jo' }],
    })
    expect(draft.turnedAway).toEqual([
      { uid: uidOf(9), lot: mugs.uid, fault: 's-crack', pieces: 1 },
    ])
  })

  it('duplicates a lot under a uid of its own', () => {
    const one = lot(4, { glaze: [uidOf(2)] })
    const two = duplicateOf(one, makeUid)
    expect(two).toMatchObject({ pieces: 4, levels: { glaze: [uidOf(2)] } })
    expect(two.uid).not.toBe(one.uid)
    expect(two.levels.glaze).not.toBe(one.levels.glaze)
  })
})

describe('levels to choose from', () => {
  const level = (n: number, studio: string | null, archived = false) => ({
    uid: uidOf(n),
    factor: 'clay_body',
    studio,
    code: null,
    name: `Clay ${n}`,
    attributes: {},
    archived,
  })
  const catalogue: Catalogue = {
    studios: [],
    kilns: [],
    levels: [level(1, null), level(2, uidOf(400)), level(3, uidOf(401)), level(4, null, true)],
  }

  it('are the studio’s own, then the common ones, none archived', () => {
    expect(levelsFor(catalogue, 'clay_body', uidOf(400)).map(({ name }) => name)).toEqual([
      'Clay 2',
      'Clay 1',
    ])
  })

  it('are let go when the load moves to a studio that does not have them', () => {
    const moved = fitToStudio(
      packed({ lots: [lot(3, { clay_body: uidOf(2), form: uidOf(1) })] }),
      catalogue,
      uidOf(401),
    )
    expect(moved.lots[0]?.levels).toEqual({ clay_body: null, form: uidOf(1) })
  })

  it('keep an archived one that the lot has already', () => {
    expect(
      levelsFor(catalogue, 'clay_body', uidOf(400), [uidOf(4)]).map(({ name }) => name),
    ).toContain('Clay 4')
  })
})
