/** Time as an input: whatever needs "now" is given a clock, and this file alone reads the real one. */
export interface Clock {
  /** The present moment (UTC inside, as every Date). */
  now(): Date
}

/** The machine's clock. */
export const systemClock: Clock = { now: () => new Date() }

/** A clock that stands still at `at`, for tests and repeatable runs. */
export function fixedClock(at: Date | string): Clock {
  const moment = new Date(at).getTime()
  return { now: () => new Date(moment) }
}
