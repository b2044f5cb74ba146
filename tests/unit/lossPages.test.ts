import { describe, expect, it } from 'vitest'
import { perHundred } from '../../src/components/losses/perHundred'
import { ratioScale, ratioTick } from '../../src/components/findings/ratioScale'
import { lastDayOf } from '../../src/composables/useLossLinks'
import { monthsBefore } from '../../src/composables/usePeriod'

describe('outcomes of a hundred pieces', () => {
  it('add up to a hundred by the largest remainders', () => {
    expect(perHundred({ first: 2, second: 1, refire: 0, waster: 0 })).toEqual({
      first: 67,
      second: 33,
      refire: 0,
      waster: 0,
    })
    expect(perHundred({ first: 881, second: 52, refire: 19, waster: 48 })).toEqual({
      first: 88,
      second: 5,
      refire: 2,
      waster: 5,
    })
  })

  it('are none without pieces', () => {
    expect(perHundred({ first: 0, second: 0, refire: 0, waster: 0 })).toBeNull()
  })
})

describe('the scale of ratios', () => {
  it('goes by doublings and always holds 1', () => {
    expect(ratioScale([2.7, 2.2, 3.3])).toEqual({ min: 1, max: 4, ticks: [1, 2, 4] })
    expect(ratioScale([0.3, 0.2, 0.6])).toEqual({
      min: 0.125,
      max: 2,
      ticks: [0.125, 0.25, 0.5, 1, 2],
    })
  })

  it('stays finite for a ratio of nought, none, and a limit beyond all measure', () => {
    expect(ratioScale([0, null, null])).toEqual({ min: 1, max: 2, ticks: [1, 2] })
    expect(ratioScale([45, 17, 1180]).max).toBe(32)
  })

  it('says its ticks', () => {
    expect([0.25, 0.5, 1, 4].map(ratioTick)).toEqual(['1/4 ×', '½ ×', '1 ×', '4 ×'])
  })
})

describe('months', () => {
  it('are counted back over the turn of the year', () => {
    expect(monthsBefore('2026-02', 3)).toBe('2025-11')
    expect(monthsBefore('2026-12', 11)).toBe('2026-01')
    expect(monthsBefore('2026-01', 12)).toBe('2025-01')
  })

  it('end on their last day, in leap years too', () => {
    expect(['2026-02', '2028-02', '2026-12'].map(lastDayOf)).toEqual([
      '2026-02-28',
      '2028-02-29',
      '2026-12-31',
    ])
  })
})
