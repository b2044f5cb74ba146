import { requireCounts, type Counts } from './arguments.js'

export interface IntraclassCorrelation {
  /** How alike pieces of one firing fare, by the analysis of variance; may be below 0. */
  icc: number | null
  /** How many times more pieces it takes than if they were independent; not floored at 1. */
  designEffect: number | null
  /** Σm²/Σm. */
  weightedMeanSize: number | null
}

/**
 * Intraclass correlation of pieces in firings, analysis-of-variance estimator. K firings with units, N = Σ m:
 * MSA = (Σ y²/m − (Σ y)²/N)/(K−1), MSW = (Σ y − Σ y²/m)/(N−K), n₀ = (N − Σ m²/N)/(K−1),
 * icc = (MSA − MSW)/(MSA + (n₀−1)·MSW); designEffect = 1 + (m₀ − 1)·icc with m₀ = Σ m²/Σ m. (n₀ serves the estimator,
 * m₀ the design effect.)
 *
 * @param input one entry a firing; entries without units are left out.
 * @returns icc and designEffect null with fewer than two firings, one piece a firing, no events or only events, or a
 *   denominator of 0 or less; weightedMeanSize null only without units.
 * @throws RangeError for impossible counts.
 *
 * Ridout, Demetrio and Firth 1999, Biometrics 55:137-148.
 */
export function intraclassCorrelation(input: {
  clusters: readonly Counts[]
}): IntraclassCorrelation {
  input.clusters.forEach(({ events, units }, index) =>
    requireCounts(`clusters[${index}]`, events, units),
  )
  const clusters = input.clusters.filter(({ units }) => units > 0)
  const sum = (term: (m: number, y: number) => number): number =>
    clusters.reduce((total, { units, events }) => total + term(units, events), 0)
  const K = clusters.length
  const N = sum((m) => m)
  const Y = sum((_, y) => y)
  if (N === 0) return { icc: null, designEffect: null, weightedMeanSize: null }
  const weightedMeanSize = sum((m) => m * m) / N
  const none = { icc: null, designEffect: null, weightedMeanSize }
  if (K < 2 || N === K || Y === 0 || Y === N) return none
  const between = sum((m, y) => (y * y) / m)
  const MSA = (between - (Y * Y) / N) / (K - 1)
  const MSW = (Y - between) / (N - K)
  const n0 = (N - weightedMeanSize) / (K - 1)
  const denominator = MSA + (n0 - 1) * MSW
  if (!(denominator > 0)) return none
  const icc = (MSA - MSW) / denominator
  return { icc, designEffect: 1 + (weightedMeanSize - 1) * icc, weightedMeanSize }
}
