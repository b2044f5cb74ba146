import { describe, expect, it } from 'vitest'
import { checkLoad, checkReport } from '../../server/shared/loadChecks.js'
import {
  failedExceeds,
  lotsExceed,
  lotsMissing,
  turnedAwayExceeds,
} from '../../server/shared/sentences/counts.js'

const load = {
  pieces: 20,
  rest: 'rest',
  lots: [
    { uid: 'a', pieces: 5 },
    { uid: 'b', pieces: 5 },
  ],
  turnedAway: [{ uid: 't', lot: 'a', pieces: 1 }],
}
const sound = (lot: string) => ({ lot, notLookedAt: 0, losses: [] })

describe('a load', () => {
  it('may be possible', () => {
    expect(checkLoad(load)).toEqual({})
  })

  it('may not turn more away from the rest than it holds, all entries of it together', () => {
    const turnedAway = [
      { uid: 't', lot: 'rest', pieces: 6 },
      { uid: 'u', lot: 'rest', pieces: 6 },
    ]
    expect(checkLoad({ ...load, turnedAway })).toEqual({
      'turnedAway.0.pieces': '12 turned away, but the lot has 10 pieces.',
      'turnedAway.1.pieces': '12 turned away, but the lot has 10 pieces.',
    })
  })

  it('may not use the mark of the rest for a lot', () => {
    expect(
      Object.keys(checkLoad({ ...load, lots: [{ uid: 'rest', pieces: 5 }], turnedAway: [] })),
    ).toEqual(['lots.0.uid'])
  })
})

describe('a report', () => {
  it('may fail every piece that was fired', () => {
    const lots = [{ ...sound('a'), losses: [{ uid: 'x', pieces: 4 }] }, sound('b'), sound('rest')]
    expect(checkReport(load, { lots })).toEqual({})
  })

  it('may leave out a rest of no pieces', () => {
    expect(checkReport({ ...load, pieces: 10 }, { lots: [sound('a'), sound('b')] })).toEqual({})
  })

  it('may not use the mark of pieces turned away for a loss', () => {
    const lots = [{ ...sound('a'), losses: [{ uid: 't', pieces: 1 }] }, sound('b'), sound('rest')]
    expect(Object.keys(checkReport(load, { lots }))).toEqual(['lots.0.losses.0.uid'])
  })
})

describe('what is said of counts', () => {
  it('has plural forms', () => {
    expect(lotsExceed(1, 0)).toBe('The lots hold 1 piece, 1 more than the firing.')
    expect(turnedAwayExceeds(2, 1)).toBe('2 turned away, but the lot has 1 piece.')
    expect(failedExceeds(2, 0, 1)).toBe('2 failed of 1 piece fired.')
    expect(failedExceeds(0, 2, 1)).toBe('2 not looked at of 1 piece fired.')
  })

  it('names what is missing', () => {
    const end = 'missing: report each, or say how many were not looked at.'
    expect(lotsMissing([2], false)).toBe(`Lot 2 is ${end}`)
    expect(lotsMissing([1, 3], false)).toBe(`Lots 1, 3 are ${end}`)
    expect(lotsMissing([], true)).toBe(`The rest is ${end}`)
    expect(lotsMissing([1], true)).toBe(`Lot 1 and the rest are ${end}`)
  })
})
