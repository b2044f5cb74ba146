import { describe, expect, it } from 'vitest'
import { coverageSentences, percent, rateSentence } from '../../server/shared/sentences/rate.js'

const rate = {
  events: 31,
  pieces: 412,
  firings: 27,
  rate: 31 / 412,
  lower: 0.0521,
  upper: 0.1058,
  note: 'ok',
} as const

describe('rateSentence', () => {
  it('gives counts before the percentage, then the interval', () => {
    expect(rateSentence(rate)).toBe(
      '31 of 412 pieces in 27 firings, 7.5 %, likely between 5.2 and 10.6 %',
    )
  })

  it('speaks of one firing and one piece in the singular, and gives no rate for it', () => {
    expect(
      rateSentence({
        events: 1,
        pieces: 1,
        firings: 1,
        rate: null,
        lower: null,
        upper: null,
        note: 'one-firing',
      }),
    ).toBe('1 of 1 piece in 1 firing: one firing says too little for a rate')
  })

  it('warns of few firings', () => {
    expect(rateSentence({ ...rate, firings: 3, note: 'few-firings' })).toMatch(
      /in 3 firings, 7\.5 %, .* \(few firings\)$/,
    )
  })

  it('says that nothing was counted yet instead of nought', () => {
    expect(
      rateSentence({
        events: 0,
        pieces: 0,
        firings: 0,
        rate: null,
        lower: null,
        upper: null,
        note: 'none',
      }),
    ).toBe('no pieces to count yet')
  })

  it('separates thousands', () => {
    expect(rateSentence({ ...rate, events: 1318, pieces: 17_806 })).toContain(
      '1,318 of 17,806 pieces',
    )
  })
})

describe('percent', () => {
  it('never rounds a loss away', () => {
    expect(percent(0.0002)).toBe('under 0.1 %')
    expect(percent(0)).toBe('0.0 %')
  })
})

describe('coverageSentences', () => {
  it('names the firings that are missing, and the rate had they been clean', () => {
    expect(
      coverageSentences({
        reported: 11,
        expected: 14,
        rateIfMissingClean: 0.061,
        recordedShare: 0.71,
      }),
    ).toEqual([
      'The kilns count 14 firings, 11 of them reported here: 3 missing; had they all been clean, it would be 6.1 %.',
      'Recorded for 71 % of pieces.',
    ])
  })

  it('says that nothing is missing', () => {
    expect(
      coverageSentences({
        reported: 14,
        expected: 14,
        rateIfMissingClean: null,
        recordedShare: null,
      }),
    ).toEqual(['All 14 firings that the kilns count are reported here.'])
  })

  it('is silent where no counter is kept', () => {
    expect(
      coverageSentences({
        reported: 14,
        expected: null,
        rateIfMissingClean: null,
        recordedShare: null,
      }),
    ).toEqual([])
  })
})
