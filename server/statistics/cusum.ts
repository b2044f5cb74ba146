import { requireCounts, requireProbability, type Counts } from './arguments.js'

/**
 * Log-likelihood-ratio CUSUM for a rise of the odds of loss:
 * Sₜ = max(0, Sₜ₋₁ + events·ln(oddsRatio) − units·ln(1 − target + oddsRatio·target)), S₀ = 0.
 *
 * @param input target is the rate in control; oddsRatio the rise to find, for example 2; points in the order of time.
 * @returns one value a point; a point without units keeps the value before it. The limit that makes it a signal comes
 *   from calibration, not from here.
 * @throws RangeError for impossible counts, target or odds ratio.
 *
 * Steiner, Cook, Farewell and Treasure 2000, Biostatistics 1:441-452.
 */
export function cusum(input: { target: number; oddsRatio: number; points: readonly Counts[] }): {
  statistic: number[]
} {
  const { target, oddsRatio, points } = input
  requireProbability('target', target)
  if (!(oddsRatio > 0)) throw new RangeError(`oddsRatio must be above 0, not ${oddsRatio}`)
  const aLoss = Math.log(oddsRatio)
  const aPiece = Math.log(1 - target + oddsRatio * target)
  let S = 0
  const statistic = points.map(({ events, units }, index) => {
    requireCounts(`points[${index}]`, events, units)
    S = Math.max(0, S + events * aLoss - units * aPiece)
    return S
  })
  return { statistic }
}
