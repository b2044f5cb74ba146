import { requireCounts, requireProbability, type Counts } from './arguments.js'
import { wilsonInterval } from './wilsonInterval.js'

export interface ClusteredRate {
  /** Σ events / Σ units. */
  rate: number | null
  standardError: number | null
  /** Variance against that of independent pieces; below 1 when firings are more alike than chance. */
  designEffect: number | null
  /** How many independent pieces would tell as much; never more than there are. */
  effectiveUnits: number | null
  lower: number | null
  upper: number | null
}

/** What a roll-up keeps of a set of firings; sums run over firings with units (m units, y events each). */
export interface ClusterSums {
  /** Number of firings with units. */
  G: number
  /** Σ m */
  sumUnits: number
  /** Σ y */
  sumEvents: number
  /** Σ m² */
  sumUnits2: number
  /** Σ m·y */
  sumUnitsEvents: number
  /** Σ y² */
  sumEvents2: number
}

const NOTHING: ClusteredRate = {
  rate: null,
  standardError: null,
  designEffect: null,
  effectiveUnits: null,
  lower: null,
  upper: null,
}

/**
 * Rate over firings with an interval that allows for pieces of one firing failing together.
 *
 * Ratio estimator r = Σy/M with the linearised between-firing variance v = G/(G−1)·Σ(y − r·m)²/M²;
 * designEffect = v / (r(1−r)/M), not floored; effectiveUnits = M / max(designEffect, 1); the interval is
 * Wilson's on the effective number of units.
 *
 * @param input one entry a firing, in any order; entries without units are left out. level is the confidence.
 * @returns all null without firings; the rate alone with one firing (nothing is known of the spread);
 *   designEffect null when nothing or everything was lost (then effectiveUnits = M). Under 5 firings the
 *   caller should say "few firings".
 * @throws RangeError for impossible counts or level.
 *
 * Cochran 1977, Sampling Techniques, chapters 6 and 9A; Wilson 1927 for the interval.
 */
export function clusteredRate(input: {
  clusters: readonly Counts[]
  level: number
}): ClusteredRate {
  const sums: ClusterSums = {
    G: 0,
    sumUnits: 0,
    sumEvents: 0,
    sumUnits2: 0,
    sumUnitsEvents: 0,
    sumEvents2: 0,
  }
  input.clusters.forEach(({ events, units }, index) => {
    requireCounts(`clusters[${index}]`, events, units)
    if (units === 0) return
    sums.G += 1
    sums.sumUnits += units
    sums.sumEvents += events
    sums.sumUnits2 += units * units
    sums.sumUnitsEvents += units * events
    sums.sumEvents2 += events * events
  })
  return clusteredRateFromSums({ ...sums, level: input.level })
}

/**
 * The same numbers from the sums that the roll-up keeps, without the firings: Σ(y − r·m)² is
 * Σy² − 2r·Σmy + r²·Σm², exact for whole counts (sums stay far below 2⁵³). Sums of disjoint sets of firings
 * may be added; sums over levels that share a firing may not.
 *
 * @throws RangeError for impossible sums or level.
 */
export function clusteredRateFromSums(input: ClusterSums & { level: number }): ClusteredRate {
  const { G, sumUnits: M, sumEvents: Y, level } = input
  requireCounts('sums', Y, M)
  requireProbability('level', level)
  if (G === 0 || M === 0) return { ...NOTHING }
  const rate = Y / M
  if (G === 1) return { ...NOTHING, rate }
  const spread = Math.max(
    0,
    input.sumEvents2 - 2 * rate * input.sumUnitsEvents + rate * rate * input.sumUnits2,
  )
  const variance = ((G / (G - 1)) * spread) / (M * M)
  const certain = Y === 0 || Y === M
  const designEffect = certain ? null : variance / ((rate * (1 - rate)) / M)
  const effectiveUnits = M / Math.max(designEffect ?? 1, 1)
  const interval = wilsonInterval({ events: rate * effectiveUnits, units: effectiveUnits, level })
  return { rate, standardError: Math.sqrt(variance), designEffect, effectiveUnits, ...interval }
}
