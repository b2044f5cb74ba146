import { clip, requireProbability } from './arguments.js'
import { binomialCdf, binomialQuantile } from './distributions.js'
import type { Interval } from './wilsonInterval.js'

/**
 * Exact control limits of a funnel plot of proportions at a number of pieces: for p = (1−level)/2 and 1 − that, r = the
 * smallest whole number with F(r) ≥ p, a = (F(r) − p)/(F(r) − F(r−1)), limit = (r − a)/units, held in 0..1. The
 * interpolation makes them continuous in p, so nothing turns on a tie at a step.
 *
 * @param input target is the rate to compare with; units a whole number of pieces.
 * @returns both null without units or when the target is not strictly between 0 and 1.
 * @throws RangeError for an impossible level.
 *
 * Spiegelhalter 2005, Statistics in Medicine 24:1185-1202, appendix.
 */
export function funnelLimits(input: { target: number; units: number; level: number }): Interval {
  const { target, units, level } = input
  requireProbability('level', level)
  if (units === 0 || !(target > 0 && target < 1)) return { lower: null, upper: null }
  const tail = (1 - level) / 2
  return { lower: limitAt(tail, target, units), upper: limitAt(1 - tail, target, units) }
}

function limitAt(p: number, target: number, units: number): number {
  const r = binomialQuantile(p, units, target)
  const reached = binomialCdf(r, units, target)
  const a = (reached - p) / (reached - binomialCdf(r - 1, units, target))
  return clip((r - a) / units)
}
