import { requireCounts, requireProbability } from './arguments.js'
import { normalQuantile } from './distributions.js'

/** Two groups of pieces: with the level (exposed) and without. */
export interface TwoGroups {
  readonly exposedEvents: number
  readonly exposedUnits: number
  readonly unexposedEvents: number
  readonly unexposedUnits: number
}

export interface RatioInterval {
  ratio: number | null
  lower: number | null
  upper: number | null
}

export const NO_RATIO: RatioInterval = { ratio: null, lower: null, upper: null }

/** Checks both groups. */
export function requireGroups(name: string, groups: TwoGroups): void {
  requireCounts(`${name} exposed`, groups.exposedEvents, groups.exposedUnits)
  requireCounts(`${name} unexposed`, groups.unexposedEvents, groups.unexposedUnits)
}

/** ratio · exp(± z·se), z for the confidence level. */
export function logInterval(ratio: number, standardError: number, quantile: number): RatioInterval {
  const factor = Math.exp(quantile * standardError)
  const upper = ratio * factor
  // A hopelessly wide interval overflows: then there is no limit to state.
  return Number.isFinite(upper)
    ? { ratio, lower: ratio / factor, upper }
    : { ratio, lower: null, upper: null }
}

/**
 * Ratio of two rates with the log interval: (a/n₁)/(c/n₀), se² of its log = 1/a − 1/n₁ + 1/c − 1/n₀.
 * Takes pieces as independent: for display of a single table, not for inference over firings.
 *
 * @returns no 0.5 is ever added: nothing lost among the unexposed, or a side without units: all null; nothing
 *   lost among the exposed: ratio 0 without limits; everything lost on both sides: 1, 1, 1.
 * @throws RangeError for impossible counts or level.
 *
 * Katz, Baptista, Azen and Pike 1978, Biometrics 34:469-474.
 */
export function riskRatio(input: TwoGroups & { level: number }): RatioInterval {
  requireGroups('riskRatio', input)
  requireProbability('level', input.level)
  const { exposedEvents: a, exposedUnits: n1, unexposedEvents: c, unexposedUnits: n0 } = input
  if (c === 0 || n1 === 0 || n0 === 0) return { ...NO_RATIO }
  if (a === 0) return { ratio: 0, lower: null, upper: null }
  const variance = Math.max(0, 1 / a - 1 / n1 + 1 / c - 1 / n0)
  return logInterval(
    a / n1 / (c / n0),
    Math.sqrt(variance),
    normalQuantile(1 - (1 - input.level) / 2),
  )
}
