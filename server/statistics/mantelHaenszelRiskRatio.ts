import { requireProbability } from './arguments.js'
import { normalQuantile } from './distributions.js'
import {
  logInterval,
  NO_RATIO,
  requireGroups,
  type RatioInterval,
  type TwoGroups,
} from './riskRatio.js'

/**
 * Common ratio of rates over strata: like is compared with like, then pooled.
 *
 * With N the units of a stratum: R = Σ a·n₀/N, S = Σ c·n₁/N, P = Σ((a+c)·n₁·n₀ − a·c·N)/N²; ratio R/S,
 * variance of its log P/(R·S). Strata without units on one side add nothing and are left out.
 *
 * @returns all null when S = 0 or no stratum remains; ratio 0 without limits when R = 0. The limits take pieces
 *   of a stratum as independent; withinStrataTest gives limits that do not.
 * @throws RangeError for impossible counts or level.
 *
 * Greenland and Robins 1985, Biometrics 41:55-68.
 */
export function mantelHaenszelRiskRatio(input: {
  strata: readonly TwoGroups[]
  level: number
}): RatioInterval {
  requireProbability('level', input.level)
  let R = 0
  let S = 0
  let P = 0
  input.strata.forEach((stratum, index) => {
    requireGroups(`strata[${index}]`, stratum)
    const { exposedEvents: a, exposedUnits: n1, unexposedEvents: c, unexposedUnits: n0 } = stratum
    if (n1 === 0 || n0 === 0) return
    const N = n1 + n0
    R += (a * n0) / N
    S += (c * n1) / N
    P += ((a + c) * n1 * n0 - a * c * N) / (N * N)
  })
  if (S === 0) return { ...NO_RATIO }
  if (R === 0) return { ratio: 0, lower: null, upper: null }
  const variance = Math.max(0, P / (R * S))
  return logInterval(R / S, Math.sqrt(variance), normalQuantile(1 - (1 - input.level) / 2))
}
