/** The exact p deals residuals out inside strata; the tails below are R 4.2 pgamma and pnorm, or by definition. */
import { describe, expect, it } from 'vitest'
import { testStrata } from '../../../server/statistics/strata.js'
import { groupByStratum } from '../../../server/statistics/withinStrataTest.js'
import { exactPValue, pearsonTail } from '../../../server/study/exactPValue.js'

/** Firings of one exposed and three other pieces each; the exposed piece is lost in some. */
function singles(firings: number, exposedLost: number) {
  return groupByStratum(
    Array.from({ length: firings }, (_, stratum) =>
      [0, 1, 2, 3].map((place) => ({
        stratum,
        units: 1,
        exposed: place === 0,
        events: (stratum < exposedLost ? place === 0 : place === 1) ? 1 : 0,
      })),
    ).flat(),
  )
}

function exact(rows: ReturnType<typeof groupByStratum>, seed = 1) {
  const { result, scores } = testStrata(rows, 0.95)
  if (result.statistic === null || scores === null) throw new Error('nothing to test')
  return {
    normal: result.pValue as number,
    skewness: scores.skewness,
    ...exactPValue(rows, scores, result.statistic, seed),
  }
}

describe('exactPValue', () => {
  it('agrees with the binomial distribution that single pieces follow', () => {
    // One loss in each of 12 firings of four pieces falls on the exposed one with chance 1/4: T is 6 − 3 above its
    // mean; P(X ≥ 6) = 0.05440, P(X ≤ 0) = 0.03168 with R 4.2 pbinom(…, 12, 0.25); |T| is as large at both ends.
    const { pValue, method } = exact(singles(12, 6))
    expect(method).toBe('dealt')
    expect(Math.abs(pValue - 0.08608)).toBeLessThan(0.06)
  })

  it('goes over to the tail where draws can no longer tell', () => {
    const { pValue, method } = exact(singles(30, 25))
    expect(method).toBe('tail')
    expect(pValue).toBeLessThan(1e-6)
    expect(pValue).toBeGreaterThan(0)
  })

  it('gives the same for the same seed', () => {
    expect(exact(singles(12, 6), 5)).toEqual(exact(singles(12, 6), 5))
  })

  it('knows the skewness of the statistic', () => {
    // Binomial: (1 − 2p)/√(n·p(1 − p)).
    expect(exact(singles(12, 6)).skewness).toBeCloseTo(0.5 / Math.sqrt(12 * 0.25 * 0.75), 9)
  })
})

describe('pearsonTail', () => {
  it('is the normal tail without skewness', () => {
    expect(pearsonTail(1.959963984540054, 0)).toBeCloseTo(0.05, 9)
  })

  it('is that of an exponential for a skewness of 2', () => {
    // (X − 1) for X exponential: P(X ≥ 4) = e⁻⁴, nothing below −1.
    expect(pearsonTail(3, 2)).toBeCloseTo(Math.exp(-4), 12)
    expect(pearsonTail(-3, 2)).toBeCloseTo(Math.exp(-4), 12)
  })

  it('counts both sides when the short tail reaches that far', () => {
    expect(pearsonTail(0.5, 2)).toBeCloseTo(Math.exp(-1.5) + 1 - Math.exp(-0.5), 12)
  })
})
