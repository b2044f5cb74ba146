/** Properties by definition; the reference values stand in reference.test.ts. */
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  benjaminiHochberg,
  clusteredRiskRatio,
  fisherExact,
  mantelHaenszelRiskRatio,
  normalCdf,
  normalQuantile,
  riskRatio,
  tCdf,
  tQuantile,
  withinStrataTest,
} from '../../../server/statistics/index.js'
import { deepFreeze } from './deepFreeze.js'

const row = fc.integer({ min: 0, max: 30 }).chain((units) =>
  fc.record({
    stratum: fc.integer({ min: 1, max: 6 }).map(String),
    units: fc.constant(units),
    events: fc.integer({ min: 0, max: units }),
    exposed: fc.boolean(),
  }),
)
const rows = fc.array(row, { maxLength: 40 })

function expectNoHoles(result: object): void {
  for (const value of Object.values(result)) {
    if (value !== null) expect(Number.isFinite(value)).toBe(true)
  }
}

describe('withinStrataTest', { timeout: 30_000 }, () => {
  it('does not depend on the order of rows', () => {
    fc.assert(
      fc.property(rows, (given) => {
        const forwards = withinStrataTest(deepFreeze({ rows: given, level: 0.95 }))
        const backwards = withinStrataTest({ rows: given.toReversed(), level: 0.95 })
        for (const [key, value] of Object.entries(forwards)) {
          const other = backwards[key as keyof typeof backwards]
          if (value === null) expect(other).toBeNull()
          else expect(other).toBeCloseTo(value as number, 8)
        }
      }),
    )
  })

  it('never returns NaN or infinity', () => {
    fc.assert(
      fc.property(rows, (given) => expectNoHoles(withinStrataTest({ rows: given, level: 0.95 }))),
    )
  })

  it('turns the ratio over when the sides change places', () => {
    fc.assert(
      fc.property(rows, (given) => {
        const { ratio } = withinStrataTest({ rows: given, level: 0.95 })
        const swapped = withinStrataTest({
          rows: given.map((one) => ({ ...one, exposed: !one.exposed })),
          level: 0.95,
        })
        if (ratio !== null && ratio > 0) expect(swapped.ratio).toBeCloseTo(1 / ratio, 6)
      }),
    )
  })

  it('is not moved by firings that held one side only', () => {
    const mixed = [
      { stratum: 'A', units: 10, events: 3, exposed: true },
      { stratum: 'A', units: 12, events: 1, exposed: false },
      { stratum: 'B', units: 8, events: 2, exposed: true },
      { stratum: 'B', units: 9, events: 2, exposed: false },
      { stratum: 'B', units: 9, events: 0, exposed: false },
    ]
    const alone = { stratum: 'C', units: 50, events: 50, exposed: true }
    expect(withinStrataTest({ rows: [...mixed, alone], level: 0.95 })).toEqual(
      withinStrataTest({ rows: mixed, level: 0.95 }),
    )
  })

  it('finds no difference where both sides lost the same share', () => {
    const same = ['A', 'B', 'C'].flatMap((stratum) => [
      { stratum, units: 10, events: 1, exposed: true },
      { stratum, units: 20, events: 2, exposed: false },
    ])
    expect(withinStrataTest({ rows: same, level: 0.95 })).toMatchObject({
      ratio: 1,
      statistic: null,
      pValue: null,
    })
  })

  it('has no ratio when nothing was lost unexposed, and 0 when nothing exposed', () => {
    const side = (exposed: boolean) =>
      ['A', 'B'].flatMap((stratum) => [
        { stratum, units: 10, events: 2, exposed },
        { stratum, units: 10, events: 0, exposed: !exposed },
      ])
    expect(withinStrataTest({ rows: side(true), level: 0.95 })).toMatchObject({
      ratio: null,
      lower: null,
      upper: null,
    })
    expect(withinStrataTest({ rows: side(false), level: 0.95 })).toMatchObject({
      ratio: 0,
      lower: null,
      upper: null,
    })
  })

  it('has nothing to say without rows', () => {
    expect(withinStrataTest({ rows: [], level: 0.95 })).toEqual({
      ratio: null,
      lower: null,
      upper: null,
      statistic: null,
      pValue: null,
      mixedStrata: 0,
      informativeStrata: 0,
      correlation: null,
      exposedUnits: 0,
      exposedEvents: 0,
      unexposedUnits: 0,
      unexposedEvents: 0,
    })
  })
})

describe('benjaminiHochberg', { timeout: 30_000 }, () => {
  const pValues = fc.array(fc.double({ min: 0, max: 1, noNaN: true }), { maxLength: 60 })

  it('never makes a p-value smaller, nor larger than 1', () => {
    fc.assert(
      fc.property(pValues, (given) => {
        const { qValues } = benjaminiHochberg(deepFreeze({ pValues: given }))
        expect(qValues).toHaveLength(given.length)
        qValues.forEach((q, i) => {
          expect(q).toBeGreaterThanOrEqual(given[i] as number)
          expect(q).toBeLessThanOrEqual(1)
        })
      }),
    )
  })

  it('keeps the order of the p-values', () => {
    fc.assert(
      fc.property(pValues, (given) => {
        const { qValues } = benjaminiHochberg({ pValues: given })
        for (let i = 0; i < given.length; i += 1)
          for (let j = 0; j < given.length; j += 1)
            if ((given[i] as number) <= (given[j] as number))
              expect(qValues[i]).toBeLessThanOrEqual(qValues[j] as number)
      }),
    )
  })

  it('gives each value its own q, whatever the order', () => {
    expect(benjaminiHochberg({ pValues: [0.04, 0.01, 0.03] }).qValues).toEqual(
      [0.04, 0.03, 0.04].map((q) => expect.closeTo(q, 12)),
    )
  })

  it('refuses what is no probability and names it', () => {
    expect(() => benjaminiHochberg({ pValues: [0.1, Number.NaN] })).toThrow(/pValues\[1\]/)
  })
})

describe('ratios of two groups', () => {
  const groups = { exposedEvents: 8, exposedUnits: 40, unexposedEvents: 5, unexposedUnits: 60 }

  it('are the same by strata as in the single table when there is one stratum', () => {
    const { ratio } = riskRatio({ ...groups, level: 0.95 })
    expect(mantelHaenszelRiskRatio({ strata: [groups], level: 0.95 }).ratio).toBeCloseTo(
      ratio as number,
      12,
    )
  })

  it('have limits on both sides of the ratio', () => {
    const { ratio, lower, upper } = riskRatio({ ...groups, level: 0.95 })
    expect(lower).toBeLessThan(ratio as number)
    expect(upper).toBeGreaterThan(ratio as number)
  })

  it('refuse more losses than pieces', () => {
    expect(() => riskRatio({ ...groups, exposedEvents: 41, level: 0.95 })).toThrow(
      /exposed: events/,
    )
    expect(() =>
      mantelHaenszelRiskRatio({ strata: [{ ...groups, unexposedEvents: 99 }], level: 0.95 }),
    ).toThrow(/strata\[0\] unexposed/)
  })

  it('are certain when every firing tells exactly the same', () => {
    const clusters = [1, 2, 3].map(() => ({
      exposedEvents: 4,
      exposedUnits: 20,
      unexposedEvents: 2,
      unexposedUnits: 20,
    }))
    const { ratio, lower, upper, pValue } = clusteredRiskRatio({ clusters, level: 0.95 })
    expect([ratio, lower, upper]).toEqual([2, 2, 2].map((value) => expect.closeTo(value, 9)))
    expect(pValue).toBeCloseTo(0, 9)
  })
})

describe('fisherExact', () => {
  it('does not depend on which row or column comes first', () => {
    const cell = fc.integer({ min: 0, max: 25 })
    fc.assert(
      fc.property(cell, cell, cell, cell, (a, b, c, d) => {
        const { pValue } = fisherExact({ a, b, c, d })
        expect(fisherExact({ a: c, b: d, c: a, d: b }).pValue).toBeCloseTo(pValue, 9)
        expect(fisherExact({ a, b: c, c: b, d }).pValue).toBeCloseTo(pValue, 9)
        expect(pValue).toBeGreaterThan(0)
        expect(pValue).toBeLessThanOrEqual(1)
      }),
    )
  })

  it('refuses cells that are no counts', () => {
    expect(() => fisherExact({ a: 1.5, b: 0, c: 0, d: 1 })).toThrow(/a must be a whole number/)
  })
})

describe('quantiles', { timeout: 30_000 }, () => {
  const p = fc.double({ min: 1e-9, max: 1 - 1e-9, noNaN: true })

  it('undo their distribution functions', () => {
    fc.assert(
      fc.property(p, fc.integer({ min: 1, max: 300 }), (probability, df) => {
        expect(normalCdf(normalQuantile(probability))).toBeCloseTo(probability, 9)
        expect(tCdf(tQuantile(probability, df), df)).toBeCloseTo(probability, 8)
      }),
    )
  })

  it('refuse 0 and 1', () => {
    expect(() => normalQuantile(0)).toThrow(RangeError)
    expect(() => tQuantile(1, 3)).toThrow(RangeError)
    expect(() => tQuantile(0.5, 0)).toThrow(/df/)
  })
})
