import { clip, requireCounts, requireProbability } from './arguments.js'
import { normalQuantile } from './distributions.js'

export interface Interval {
  lower: number | null
  upper: number | null
}

/**
 * Wilson's score interval of a proportion, without continuity correction, held in 0..1.
 *
 * With p = events/units, n = units, z the normal quantile of 1 − (1 − level)/2:
 * centre (p + z²/2n)/(1 + z²/n), half-width z/(1 + z²/n)·√(p(1−p)/n + z²/4n²).
 *
 * @param input events and units need not be whole (clusteredRate hands over an effective number);
 *   level is the confidence, for example 0.95.
 * @returns limits as proportions; both null when there are no units.
 * @throws RangeError for impossible counts or level.
 *
 * Wilson 1927, Journal of the American Statistical Association 22:209-212; method 3 of Newcombe 1998,
 * Statistics in Medicine 17:857-872.
 */
export function wilsonInterval(input: { events: number; units: number; level: number }): Interval {
  const { events, units, level } = input
  requireCounts('wilsonInterval', events, units)
  requireProbability('level', level)
  if (units === 0) return { lower: null, upper: null }
  const p = Math.min(1, events / units)
  const z = normalQuantile(1 - (1 - level) / 2)
  const shrink = 1 + (z * z) / units
  const centre = (p + (z * z) / (2 * units)) / shrink
  const half = (z / shrink) * Math.sqrt((p * (1 - p)) / units + (z * z) / (4 * units * units))
  // At the ends of the scale the limit is exactly the estimate; rounding must not move it inside.
  return {
    lower: p === 0 ? 0 : clip(centre - half),
    upper: p === 1 ? 1 : clip(centre + half),
  }
}
