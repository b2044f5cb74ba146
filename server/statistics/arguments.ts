/**
 * Checks shared by all methods. Wrong arguments are mistakes of the caller and throw a RangeError that
 * names the argument; "too little data" is never an error: methods answer null for it.
 */

/** One firing (the cluster of every method here): pieces looked at and pieces lost among them. */
export interface Counts {
  /** Pieces lost, 0 ≤ events ≤ units. */
  readonly events: number
  /** Pieces looked at. */
  readonly units: number
}

/** A confidence level or probability strictly between 0 and 1. */
export function requireProbability(name: string, value: number): void {
  if (!(value > 0 && value < 1))
    throw new RangeError(`${name} must lie between 0 and 1, not ${value}`)
}

/** Counts that can be: finite, not negative, no more events than units. They need not be whole. */
export function requireCounts(name: string, events: number, units: number): void {
  if (!Number.isFinite(units) || units < 0)
    throw new RangeError(`${name}: units must be 0 or more, not ${units}`)
  // A hair of slack: an effective number of events is a product of fractions.
  if (!(events >= 0 && events <= units * (1 + 1e-12)))
    throw new RangeError(`${name}: events must lie between 0 and ${units}, not ${events}`)
}

/** Holds a proportion between 0 and 1. */
export function clip(value: number): number {
  return Math.min(1, Math.max(0, value))
}
