import { clip, requireCounts, requireProbability, type Counts } from './arguments.js'
import { normalQuantile } from './distributions.js'
import type { Interval } from './wilsonInterval.js'

export interface FunnelOverdispersion {
  /** Mean square of the winsorised z: how much wider than binomial the points scatter. Not floored at 1. */
  phi: number | null
  /** Plain z of each point. */
  z: (number | null)[]
  limits: Interval[]
}

/**
 * Funnel limits widened for over-dispersion: zᵢ = (pᵢ − target)/√(target(1−target)/nᵢ); z outside the quantiles at
 * `winsorise` and 1 − `winsorise` (linear interpolation at (n−1)·p) are set to them; phi = mean of their squares;
 * limits target ± z(level)·√(max(phi, 1)·target(1−target)/nᵢ), held in 0..1.
 *
 * @param input winsorise is a share below one half, 0 for none. Meant for 10 points or more.
 * @returns null for points without units, which do not count; phi null without any point or when the target is not
 *   strictly between 0 and 1.
 * @throws RangeError for impossible counts, level or share.
 *
 * Spiegelhalter 2005, Statistics in Medicine 24:1185-1202.
 */
export function funnelOverdispersion(input: {
  target: number
  points: readonly Counts[]
  winsorise: number
  level: number
}): FunnelOverdispersion {
  const { target, points, winsorise, level } = input
  requireProbability('level', level)
  if (!(winsorise >= 0 && winsorise < 0.5))
    throw new RangeError(`winsorise must be 0 or more and below 0.5, not ${winsorise}`)
  points.forEach(({ events, units }, index) => requireCounts(`points[${index}]`, events, units))
  const usable = target > 0 && target < 1
  const sigma = (n: number): number => Math.sqrt((target * (1 - target)) / n)
  const z = points.map(({ events, units }) =>
    units === 0 || !usable ? null : (events / units - target) / sigma(units),
  )
  const phi = meanSquare(
    z.filter((value) => value !== null),
    winsorise,
  )
  const reach = normalQuantile(1 - (1 - level) / 2) * Math.sqrt(Math.max(phi ?? 1, 1))
  const limits = points.map(({ units }) =>
    units === 0 || !usable
      ? { lower: null, upper: null }
      : { lower: clip(target - reach * sigma(units)), upper: clip(target + reach * sigma(units)) },
  )
  return { phi, z, limits }
}

function meanSquare(z: readonly number[], winsorise: number): number | null {
  if (z.length === 0) return null
  const sorted = z.toSorted((a, b) => a - b)
  const low = quantile(sorted, winsorise)
  const high = quantile(sorted, 1 - winsorise)
  return z.reduce((sum, value) => sum + Math.min(high, Math.max(low, value)) ** 2, 0) / z.length
}

function quantile(sorted: readonly number[], p: number): number {
  const place = (sorted.length - 1) * p
  const below = Math.floor(place)
  const low = sorted[below] as number
  const high = sorted[Math.min(below + 1, sorted.length - 1)] as number
  return low + (place - below) * (high - low)
}
