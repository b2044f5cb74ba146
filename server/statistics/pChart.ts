import { clip, requireCounts, type Counts } from './arguments.js'
import type { Interval } from './wilsonInterval.js'

export interface PChart {
  /** Σ events / Σ units. */
  centre: number | null
  /** Three-sigma limits of each point's own number of pieces. */
  limits: Interval[]
  /** (p − centre)/σ of each point. */
  z: (number | null)[]
}

/**
 * Shewhart chart of proportions: centre c = Σ events/Σ units, σᵢ = √(c(1−c)/nᵢ), limits c ± 3σᵢ held in 0..1,
 * zᵢ = (pᵢ − c)/σᵢ, 0 where σᵢ = 0.
 *
 * @param input points in the order of time.
 * @returns limits and z null for a point without units; centre null without any. Takes pieces as independent, so on
 *   loads of clumped pieces it cries wolf: laneyPChart is for the eye, the calibrated watch for signals.
 * @throws RangeError for impossible counts.
 *
 * Montgomery, Introduction to Statistical Quality Control, chapter 7.
 */
export function pChart(input: { points: readonly Counts[] }): PChart {
  return chartWithSigma(input.points, 1)
}

/** The p chart with σ times `spread`; a spread of null leaves the limits out. */
export function chartWithSigma(points: readonly Counts[], spread: number | null): PChart {
  points.forEach(({ events, units }, index) => requireCounts(`points[${index}]`, events, units))
  const units = points.reduce((sum, point) => sum + point.units, 0)
  const none: Interval = { lower: null, upper: null }
  if (units === 0)
    return { centre: null, limits: points.map(() => none), z: points.map(() => null) }
  const centre = points.reduce((sum, point) => sum + point.events, 0) / units
  const sigma = (n: number): number => Math.sqrt((centre * (1 - centre)) / n)
  return {
    centre,
    limits: points.map(({ units: n }) => {
      if (n === 0 || spread === null) return none
      const reach = 3 * sigma(n) * spread
      return { lower: clip(centre - reach), upper: clip(centre + reach) }
    }),
    z: points.map(({ events, units: n }) => {
      if (n === 0) return null
      return sigma(n) === 0 ? 0 : (events / n - centre) / sigma(n)
    }),
  }
}
