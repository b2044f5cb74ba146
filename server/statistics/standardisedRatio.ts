import { requireProbability } from './arguments.js'
import { chiSquareQuantile } from './distributions.js'
import type { RatioInterval } from './riskRatio.js'

/**
 * Losses against those expected, with exact Poisson limits: lower = χ²(α/2; 2·O)/2/E (0 at O = 0),
 * upper = χ²(1−α/2; 2·O+2)/2/E.
 *
 * @param input observed a whole number of pieces, expected from other studios' rates.
 * @returns all null when nothing was expected. Takes losses as independent: widen by the design effect over firings.
 * @throws RangeError for a negative number observed or an impossible level.
 *
 * Garwood 1936, Biometrika 28:437-442.
 */
export function standardisedRatio(input: {
  observed: number
  expected: number
  level: number
}): RatioInterval {
  const { observed: O, expected: E, level } = input
  requireProbability('level', level)
  if (!(O >= 0 && Number.isFinite(O))) throw new RangeError(`observed must be 0 or more, not ${O}`)
  if (!(E > 0)) return { ratio: null, lower: null, upper: null }
  const tail = (1 - level) / 2
  return {
    ratio: O / E,
    lower: O === 0 ? 0 : chiSquareQuantile(tail, 2 * O) / 2 / E,
    upper: chiSquareQuantile(1 - tail, 2 * O + 2) / 2 / E,
  }
}
