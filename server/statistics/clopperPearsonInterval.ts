import { requireCounts, requireProbability } from './arguments.js'
import { betaQuantile } from './distributions.js'
import type { Interval } from './wilsonInterval.js'

/**
 * Exact (Clopper–Pearson) interval of a binomial proportion.
 *
 * lower = beta quantile of α/2 with (x, n − x + 1), 0 at x = 0; upper = beta quantile of 1 − α/2 with
 * (x + 1, n − x), 1 at x = n. It is wider than it need be and takes pieces as independent: for a rate over
 * firings use clusteredRate.
 *
 * @param input whole counts, level as confidence.
 * @returns limits as proportions; both null when there are no units.
 * @throws RangeError for impossible counts or level.
 *
 * Clopper and Pearson 1934, Biometrika 26:404-413.
 */
export function clopperPearsonInterval(input: {
  events: number
  units: number
  level: number
}): Interval {
  const { events, units, level } = input
  requireCounts('clopperPearsonInterval', events, units)
  requireProbability('level', level)
  if (units === 0) return { lower: null, upper: null }
  const tail = (1 - level) / 2
  return {
    lower: events === 0 ? 0 : betaQuantile(tail, events, units - events + 1),
    upper: events === units ? 1 : betaQuantile(1 - tail, events + 1, units - events),
  }
}
