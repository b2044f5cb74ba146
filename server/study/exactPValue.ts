import { chiSquareUpperTail, normalTwoSided } from '../statistics/index.js'
import type { StrataRows, TestScores } from '../statistics/strata.js'
import { dealOnce, dealtStrata } from '../statistics/strataDealing.js'
import { randomNumbers } from './randomNumbers.js'

/** Besag and Clifford's h: with 10 exceedances the p found is within about a third of the true one. */
const EXCEEDANCES = 10
const MOST_DRAWS = 20_000
/** Below this tail a thousand draws without an exceedance say as much as twenty thousand would. */
const FAR_TAIL = 1e-6
const FAR_DRAWS = 1_000

/**
 * Exact p of a withinStrataTest: the residuals of a stratum are dealt out to its rows at random again and again, and
 * |T| is compared with the observed one. Sequential: drawing stops at 10 exceedances (p = 10/draws); after 20,000
 * draws with fewer, the tail of a Pearson III with the first three permutation moments takes over, never above what
 * the draws allow.
 *
 * @returns the p-value and how it was found. The same rows and seed give the same number.
 *
 * Besag and Clifford 1991, Biometrika 78:301-304; Pearson III tail as in Berry and Mielke's moment tests.
 */
export function exactPValue(
  rows: StrataRows,
  scores: TestScores,
  statistic: number,
  seed: number,
): { pValue: number; method: 'dealt' | 'tail' } {
  const dealt = dealtStrata(rows, scores.correlation)
  const random = randomNumbers(seed)
  // A draw that equals the observed T but for rounding is as extreme as it.
  const limit = Math.abs(dealt.observed) * (1 - 1e-9)
  const tail = pearsonTail(statistic, scores.skewness)
  const most = tail < FAR_TAIL ? FAR_DRAWS : MOST_DRAWS
  let exceedances = 0
  for (let draw = 1; draw <= MOST_DRAWS; draw += 1) {
    if (Math.abs(dealOnce(dealt, random)) >= limit) exceedances += 1
    if (exceedances === EXCEEDANCES) return { pValue: EXCEEDANCES / draw, method: 'dealt' }
    if (draw === most && exceedances === 0)
      return { pValue: Math.min(tail, 1 / (draw + 1)), method: 'tail' }
  }
  return { pValue: Math.min(tail, (exceedances + 1) / (MOST_DRAWS + 1)), method: 'tail' }
}

/**
 * Two-sided tail P(|Z| ≥ |z|) of a standardised Pearson III (shifted gamma) with the given skewness γ: its shape is
 * 4/γ², so the upper tail is that of a chi-square with 8/γ² degrees of freedom.
 */
export function pearsonTail(z: number, skewness: number): number {
  // A gamma this close to normal is normal to three digits, and its shape grows without bound.
  if (Math.abs(skewness) < 0.01) return normalTwoSided(z)
  const shape = 4 / (skewness * skewness)
  const upper = (t: number): number =>
    chiSquareUpperTail(2 * (shape + t * Math.sqrt(shape)), 2 * shape)
  const size = Math.abs(z)
  return Math.min(1, upper(size) + (1 - upper(-size)))
}
