/** How values are compared: reference files say tolerance × max(1, |expected|), null is null, further keys are free. */
import { describe, expect, it } from 'vitest'
import { checkReference } from '../../../server/statistics/checkReference.js'

const wilson = (expected: unknown, more: object = {}) =>
  checkReference({
    method: 'wilsonInterval',
    cases: [
      {
        name: 'one',
        input: { events: 0, units: 20, level: 0.95 },
        expected,
        tolerance: 1e-6,
        ...more,
      },
    ],
  }).cases[0]

describe('checkReference', () => {
  it('passes a value within the tolerance', () => {
    expect(wilson({ upper: 0.16112516 })).toMatchObject({ passes: true, problems: [] })
  })

  it('fails a value beyond the tolerance and says both numbers', () => {
    expect(wilson({ upper: 0.1613 })?.problems).toEqual([
      expect.stringMatching(/^upper: expected 0\.1613, got 0\.1611/),
    ])
  })

  it('fails a value that is near but not by the relative tolerance', () => {
    expect(wilson({ upper: 0.1611255 }, { relativeTolerance: 1e-9 })?.passes).toBe(false)
  })

  it('takes 0 for no null', () => {
    expect(wilson({ lower: null })?.passes).toBe(false)
  })

  it('fails a key that the result does not have', () => {
    expect(wilson({ middle: 0 })?.problems).toEqual(['middle: expected 0, got nothing'])
  })

  it('fails an array of another length', () => {
    const { cases } = checkReference({
      method: 'benjaminiHochberg',
      cases: [
        { name: 'one', input: { pValues: [0.5] }, expected: { qValues: [0.5, 0.5] }, tolerance: 1 },
      ],
    })
    expect(cases[0]?.passes).toBe(false)
  })

  it('counts a method that throws as a failed case', () => {
    const { cases } = checkReference({
      method: 'wilsonInterval',
      cases: [
        { name: 'one', input: { events: 3, units: 2, level: 0.95 }, expected: {}, tolerance: 1 },
      ],
    })
    expect(cases[0]?.problems).toEqual([
      expect.stringMatching(/^threw .*events must lie between 0 and 2/),
    ])
  })

  it('calls a method that does not exist missing', () => {
    expect(checkReference({ method: 'tarot', cases: [{}] })).toEqual({
      method: 'tarot',
      status: 'missing',
      cases: [],
    })
  })

  it.each([
    ['the truth of made data', { description: 'made', effects: [] }],
    ['a whole screen', { method: 'cohortLevels', cases: [{}] }],
    ['no object', 3],
  ])('calls %s not a method', (_, file) => {
    expect(checkReference(file)).toMatchObject({ status: 'not a method', cases: [] })
  })
})
