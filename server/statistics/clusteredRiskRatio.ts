import { requireProbability } from './arguments.js'
import { tCdf, tQuantile, tTwoSided } from './distributions.js'
import { requireGroups, type TwoGroups } from './riskRatio.js'

export interface ClusteredRiskRatio {
  ratio: number | null
  /** Of the natural logarithm of the ratio. */
  standardError: number | null
  lower: number | null
  upper: number | null
  /** Two-sided. */
  pValue: number | null
  /** One-sided, for a ratio above 1. */
  pValueRaised: number | null
  degreesOfFreedom: number | null
}

/**
 * Crude ratio of two pooled rates whose error comes from leaving out one firing at a time (jackknife).
 *
 * b = ln of the ratio of the pooled rates, b₍g₎ without firing g, G firings with units:
 * standardError² = (G−1)/G·Σ(b₍g₎ − b)²; t with min(firings with exposed, firings with unexposed units) − 1
 * degrees of freedom.
 *
 * @param input one entry a firing.
 * @returns the ratio alone when it rests on one firing (some b₍g₎ not finite, or one firing on a side: count it as
 *   p = 1 in a screen); ratio 0 when nothing was lost among the exposed, null when nothing was lost among the
 *   unexposed or a side has no units; degreesOfFreedom null below 1.
 * @throws RangeError for impossible counts or level.
 *
 * Efron and Stein 1981, Annals of Statistics 9:586-596; Cochran 1977.
 */
export function clusteredRiskRatio(input: {
  clusters: readonly TwoGroups[]
  level: number
}): ClusteredRiskRatio {
  requireProbability('level', input.level)
  input.clusters.forEach((cluster, index) => requireGroups(`clusters[${index}]`, cluster))
  const clusters = input.clusters.filter(
    (cluster) => cluster.exposedUnits + cluster.unexposedUnits > 0,
  )
  const total = sum(clusters)
  const fewer = Math.min(
    clusters.filter((cluster) => cluster.exposedUnits > 0).length,
    clusters.filter((cluster) => cluster.unexposedUnits > 0).length,
  )
  const degreesOfFreedom = fewer - 1 >= 1 ? fewer - 1 : null
  const alone = (ratio: number | null): ClusteredRiskRatio => ({
    ratio,
    standardError: null,
    lower: null,
    upper: null,
    pValue: null,
    pValueRaised: null,
    degreesOfFreedom,
  })
  if (total.exposedUnits === 0 || total.unexposedUnits === 0 || total.unexposedEvents === 0)
    return alone(null)
  if (total.exposedEvents === 0) return alone(0)
  const b = logRatio(total)
  const ratio = Math.exp(b)
  const G = clusters.length
  let squares = 0
  for (const cluster of clusters) squares += (logRatio(minus(total, cluster)) - b) ** 2
  if (degreesOfFreedom === null || !Number.isFinite(squares)) return alone(ratio)
  const standardError = Math.sqrt(((G - 1) / G) * squares)
  // Every firing tells exactly the same: the limits are the estimate and the test has nothing to divide by.
  const t = standardError > 0 ? b / standardError : b === 0 ? 0 : Math.sign(b) * Number.MAX_VALUE
  const reach = Math.exp(tQuantile(1 - (1 - input.level) / 2, degreesOfFreedom) * standardError)
  if (!Number.isFinite(ratio * reach)) return alone(ratio)
  return {
    ratio,
    standardError,
    lower: ratio / reach,
    upper: ratio * reach,
    pValue: tTwoSided(t, degreesOfFreedom),
    pValueRaised: tCdf(-t, degreesOfFreedom),
    degreesOfFreedom,
  }
}

function logRatio(groups: TwoGroups): number {
  return Math.log(
    groups.exposedEvents / groups.exposedUnits / (groups.unexposedEvents / groups.unexposedUnits),
  )
}

function sum(clusters: readonly TwoGroups[]): TwoGroups {
  return clusters.reduce(
    (total, cluster) => ({
      exposedEvents: total.exposedEvents + cluster.exposedEvents,
      exposedUnits: total.exposedUnits + cluster.exposedUnits,
      unexposedEvents: total.unexposedEvents + cluster.unexposedEvents,
      unexposedUnits: total.unexposedUnits + cluster.unexposedUnits,
    }),
    { exposedEvents: 0, exposedUnits: 0, unexposedEvents: 0, unexposedUnits: 0 },
  )
}

function minus(total: TwoGroups, one: TwoGroups): TwoGroups {
  return {
    exposedEvents: total.exposedEvents - one.exposedEvents,
    exposedUnits: total.exposedUnits - one.exposedUnits,
    unexposedEvents: total.unexposedEvents - one.unexposedEvents,
    unexposedUnits: total.unexposedUnits - one.unexposedUnits,
  }
}
