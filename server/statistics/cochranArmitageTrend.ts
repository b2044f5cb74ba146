import { requireCounts } from './arguments.js'
import { chiSquareUpperTail } from './distributions.js'

/**
 * Chi-square for a linear trend of proportions over scores, one degree of freedom:
 * T = Σ s(x − n·p), statistic T² / (p(1−p)(Σ n·s² − (Σ n·s)²/N)) (N, not N − 1).
 *
 * @param input events, units and scores of the groups, lists of one length. Groups without units leave.
 * @returns both null with fewer than two distinct scores, no events or only events. Not allowed for clumping: for
 *   display of an ordered factor only.
 * @throws RangeError for impossible counts or lists of different length.
 *
 * Cochran 1954, Biometrics 10:417-451; Armitage 1955, Biometrics 11:375-386.
 */
export function cochranArmitageTrend(input: {
  events: readonly number[]
  units: readonly number[]
  scores: readonly number[]
}): { statistic: number | null; pValue: number | null } {
  const { events, units, scores } = input
  if (events.length !== units.length || scores.length !== units.length)
    throw new RangeError('events, units and scores must be lists of one length')
  units.forEach((n, i) => requireCounts(`group ${i}`, events[i] as number, n))
  const groups = units
    .map((n, i) => ({ n, x: events[i] as number, s: scores[i] as number }))
    .filter(({ n }) => n > 0)
  const N = groups.reduce((sum, { n }) => sum + n, 0)
  const p = groups.reduce((sum, { x }) => sum + x, 0) / N
  const none = { statistic: null, pValue: null }
  if (new Set(groups.map(({ s }) => s)).size < 2 || p === 0 || p === 1) return none
  // Around their mean the scores lose less to rounding, and the statistic does not change.
  const mean = groups.reduce((sum, { n, s }) => sum + n * s, 0) / N
  const T = groups.reduce((sum, { n, x, s }) => sum + (s - mean) * (x - n * p), 0)
  const spread = groups.reduce((sum, { n, s }) => sum + n * (s - mean) ** 2, 0)
  const statistic = (T * T) / (p * (1 - p) * spread)
  return { statistic, pValue: chiSquareUpperTail(statistic, 1) }
}
