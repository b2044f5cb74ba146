import { describe, expect, it } from 'vitest'
import fc from 'fast-check'
import type { LotDraft, ReportDraft } from '../../src/composables/firings/reportDraft.js'
import {
  cellsOf,
  count,
  countsOf,
  draftOf,
  markAll,
  markOf,
  marked,
  rebase,
  reportBodyOf,
  sayOfTheOthers,
  setCount,
  setMark,
  setNotLookedAt,
  touch,
  unsaid,
} from '../../src/composables/firings/reportDraft.js'
import { reportBody } from '../../server/contract/firings.js'
import { makeFiring, makeLoss, makeLot, uidOf } from '../support/firingViews.js'

const lotOf = (fired: number): LotDraft => ({
  lot: uidOf(1),
  fired,
  said: false,
  notLookedAt: 0,
  entries: [],
})
const crack = markOf('s-crack', 'waster')
const pinholes = markOf('pinholing', 'refire')

describe('touching a piece', () => {
  it('gives it the fault and outcome in hand, and takes them back at the second touch', () => {
    const once = touch(lotOf(12), 3, crack)
    expect(countsOf(once)).toMatchObject({ pieces: 12, wasters: 1 })
    expect(countsOf(touch(once, 3, crack))).toMatchObject({ wasters: 0 })
  })

  it('changes the mark of a piece that had another', () => {
    const changed = touch(touch(lotOf(12), 3, crack), 3, pinholes)
    expect(countsOf(changed)).toMatchObject({ wasters: 0, refires: 1 })
  })

  it('says something of the lot, even when it ends sound', () => {
    expect(touch(touch(lotOf(2), 0, crack), 0, crack).said).toBe(true)
  })

  it('takes a piece that was not looked at out of those', () => {
    const lot = touch(setNotLookedAt(lotOf(3), 3), 2, crack)
    expect(countsOf(lot)).toMatchObject({ wasters: 1, notLookedAt: 2 })
  })
})

describe('the board of a lot', () => {
  it('has a cell for every piece, marked at its place, with the fault to read out', () => {
    expect(cellsOf(touch(lotOf(3), 1, crack))).toEqual([
      { kind: 'first' },
      { kind: 'waster', note: 'S-crack' },
      { kind: 'first' },
    ])
  })

  it('hatches the last unmarked pieces when some were not looked at', () => {
    const lot = setNotLookedAt(touch(lotOf(4), 3, crack), 2)
    expect(cellsOf(lot).map(({ kind }) => kind)).toEqual([
      'first',
      'notLookedAt',
      'notLookedAt',
      'waster',
    ])
  })

  it('reads out further faults and the neighbour', () => {
    const lot = setMark(lotOf(1), 0, { ...crack, also: ['crazing'], neighbour: true })
    expect(cellsOf(lot)[0]?.note).toBe('S-crack, also crazing, a neighbour did it')
  })
})

describe('a lot over 60 pieces', () => {
  it('is counted, and never beyond its pieces', () => {
    const lot = count(setCount(lotOf(80), crack, 78), pinholes, 5)
    expect(countsOf(lot)).toMatchObject({ wasters: 78, refires: 2 })
  })

  it('drops a fault that is counted down to nothing', () => {
    expect(count(setCount(lotOf(80), crack, 1), crack, -1).entries).toEqual([])
  })
})

describe('never more failed than there were', () => {
  it('holds after any series of touches, counts and not-looked-at', () => {
    const marks = [crack, pinholes, markOf('warping', 'second'), markOf('other', 'undecided')]
    const step = fc.oneof(
      fc.record({ do: fc.constant('touch' as const), at: fc.nat(99), mark: fc.nat(3) }),
      fc.record({ do: fc.constant('hide' as const), at: fc.nat(120), mark: fc.nat(3) }),
      fc.record({
        do: fc.constant('count' as const),
        at: fc.integer({ min: -50, max: 150 }),
        mark: fc.nat(3),
      }),
    )
    fc.assert(
      fc.property(
        fc.integer({ min: 1, max: 100 }),
        fc.array(step, { maxLength: 40 }),
        (fired, steps) => {
          let lot = lotOf(fired)
          for (const { do: what, at, mark } of steps) {
            const chosen = marks[mark] ?? crack
            if (what === 'hide') lot = setNotLookedAt(lot, at)
            else if (fired > 60) lot = count(lot, chosen, at)
            else if (what === 'touch') lot = touch(lot, at % fired, chosen)
          }
          expect(marked(lot) + lot.notLookedAt).toBeLessThanOrEqual(fired)
        },
      ),
    )
  })
})

describe('a draft of a firing', () => {
  const lot = makeLot({
    uid: uidOf(1),
    pieces: 12,
    turnedAway: 2,
    losses: [makeLoss({ uid: uidOf(9), lot: uidOf(1), outcome: 'turned-away', pieces: 2 })],
  })

  it('reports a packed one: nothing said, turned-away pieces not on the board', () => {
    const draft = draftOf(makeFiring({ status: 'packed', lots: [lot] }), uidOf(50))
    expect(draft).toMatchObject({ kind: 'report', base: 1 })
    expect(draft.lots[0]).toMatchObject({ fired: 10, said: false, entries: [] })
    expect(unsaid(draft.lots)).toHaveLength(1)
  })

  it('amends a reported one: starts from what was reported, with the uids of its losses', () => {
    const reported = makeLot({
      uid: uidOf(1),
      pieces: 12,
      wasters: 2,
      losses: [makeLoss({ uid: uidOf(9), lot: uidOf(1), pieces: 2 })],
    })
    const draft = draftOf(
      makeFiring({ status: 'reported', revision: 2, lots: [reported] }),
      uidOf(50),
    )
    expect(draft).toMatchObject({ kind: 'amend', base: 2 })
    expect(draft.lots[0]).toMatchObject({ said: true })
    const { report } = reportBodyOf(draft, () => uidOf(99))
    expect(report.lots[0]?.losses).toMatchObject([
      { uid: uidOf(9), fault: 's-crack', outcome: 'waster', pieces: 2 },
    ])
  })

  it('makes a body that the contract accepts, with equal marks of a lot as one loss', () => {
    let next = 100
    const draft = draftOf(makeFiring({ status: 'packed', lots: [lot] }), uidOf(50))
    const touched: ReportDraft = {
      ...draft,
      lots: [touch(touch(draft.lots[0] ?? lotOf(1), 0, crack), 1, crack)],
    }
    const { report, lossUids } = reportBodyOf(touched, () => uidOf((next += 1)))
    expect(reportBody.parse(report).lots[0]?.losses).toMatchObject([
      { pieces: 2, fault: 's-crack' },
    ])
    expect(reportBodyOf({ ...touched, lossUids }, () => uidOf((next += 1))).report).toEqual(report)
  })

  it('says all sound of the lots that were not touched, and of no other', () => {
    const lots = sayOfTheOthers([touch(lotOf(3), 0, crack), lotOf(4)], 'sound')
    expect(lots.map(countsOf)).toMatchObject([{ wasters: 1 }, { wasters: 0, notLookedAt: 0 }])
    expect(unsaid(lots)).toEqual([])
  })

  it('marks every piece when the whole load failed', () => {
    expect(markAll([lotOf(3), lotOf(70)], pinholes).map(countsOf)).toMatchObject([
      { refires: 3 },
      { refires: 70 },
    ])
  })
})

describe('rebasing on a newer revision', () => {
  const before = makeFiring({
    status: 'packed',
    lots: [makeLot({ uid: uidOf(1), pieces: 5 }), makeLot({ uid: uidOf(2), pieces: 8 })],
  })
  const draft = draftOf(before, uidOf(50))
  const mine: ReportDraft = {
    ...draft,
    lots: draft.lots.map((lot) => touch(touch(lot, 0, crack), 4, pinholes)),
  }

  it('keeps the marks that still fit and drops lots that are gone', () => {
    const now = makeFiring({
      status: 'packed',
      revision: 2,
      lots: [makeLot({ uid: uidOf(2), pieces: 1 }), makeLot({ uid: uidOf(3), pieces: 4 })],
    })
    const next = rebase(mine, now, uidOf(51))
    expect(next).toMatchObject({ base: 2, kind: 'report', revision: uidOf(51) })
    expect(next.lots.map((lot) => [lot.lot, marked(lot)])).toEqual([
      [uidOf(2), 1],
      [uidOf(3), 0],
    ])
  })

  it('becomes an amendment when somebody else has reported it', () => {
    expect(rebase(mine, { ...before, status: 'reported', revision: 2 }, uidOf(51)).kind).toBe(
      'amend',
    )
  })
})
