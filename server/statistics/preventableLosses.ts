export interface PreventableLosses {
  /** Share of the losses with the level that the level explains, if it is the cause; negative when it protects. */
  attributableFraction: number | null
  /** Pieces. */
  preventable: number | null
  lower: number | null
  upper: number | null
  /** preventable / all losses of the fault. */
  populationFraction: number | null
}

/**
 * Pieces that would be saved if a level lost no more than the reference: f(r) = (r − 1)/r of the losses with it, for
 * the ratio and for its two limits.
 *
 * @param input exposedUnits is carried for display; ratio and limits come from an adjusted comparison.
 * @returns null where its ratio is null or not above 0; populationFraction null without losses. Not floored, and never
 *   to be added up over practices: fractions of overlapping causes do not add.
 *
 * Miettinen 1974, American Journal of Epidemiology 99:325-332.
 */
export function preventableLosses(input: {
  exposedEvents: number
  exposedUnits: number
  referenceRatio: number | null
  ratioLower: number | null
  ratioUpper: number | null
  totalEvents: number
}): PreventableLosses {
  const attributableFraction = fraction(input.referenceRatio)
  const pieces = (ratio: number | null): number | null => {
    const share = fraction(ratio)
    return share === null ? null : share * input.exposedEvents
  }
  const preventable = pieces(input.referenceRatio)
  return {
    attributableFraction,
    preventable,
    lower: pieces(input.ratioLower),
    upper: pieces(input.ratioUpper),
    populationFraction:
      preventable === null || input.totalEvents === 0 ? null : preventable / input.totalEvents,
  }
}

function fraction(ratio: number | null): number | null {
  return ratio === null || !(ratio > 0) ? null : (ratio - 1) / ratio
}
