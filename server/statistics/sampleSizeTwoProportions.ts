import { requireProbability } from './arguments.js'
import { normalQuantile } from './distributions.js'

/**
 * Pieces an arm to tell two loss rates apart, equal arms, two-sided: p̄ = (p₁+p₂)/2, d = |p₁−p₂|,
 * n = (z₁₋α/₂·√(2p̄(1−p̄)) + z_power·√(p₁(1−p₁)+p₂(1−p₂)))²/d²; with continuity correction
 * n′ = n/4·(1 + √(1 + 4/(n·d)))². Each is multiplied by the design effect and then rounded up once.
 *
 * @param input p1, p2 strictly between 0 and 1; designEffect from the studio's own history, not floored.
 * @returns both null when the rates are the same.
 * @throws RangeError for a probability outside 0..1 or a design effect that is not positive.
 *
 * Fleiss 1981, Statistical Methods for Rates and Proportions, chapter 3.
 */
export function sampleSizeTwoProportions(input: {
  p1: number
  p2: number
  alpha: number
  power: number
  designEffect: number
}): { unitsPerArm: number | null; unitsPerArmCorrected: number | null } {
  const { p1, p2, alpha, power, designEffect } = input
  for (const [name, value] of Object.entries({ p1, p2, alpha, power }))
    requireProbability(name, value)
  if (!(designEffect > 0)) throw new RangeError(`designEffect must be above 0, not ${designEffect}`)
  if (p1 === p2) return { unitsPerArm: null, unitsPerArmCorrected: null }
  const mean = (p1 + p2) / 2
  const d = Math.abs(p1 - p2)
  const ofNone = normalQuantile(1 - alpha / 2) * Math.sqrt(2 * mean * (1 - mean))
  const ofOne = normalQuantile(power) * Math.sqrt(p1 * (1 - p1) + p2 * (1 - p2))
  const n = (ofNone + ofOne) ** 2 / d ** 2
  const corrected = (n / 4) * (1 + Math.sqrt(1 + 4 / (n * d))) ** 2
  return {
    unitsPerArm: Math.ceil(n * designEffect),
    unitsPerArmCorrected: Math.ceil(corrected * designEffect),
  }
}
