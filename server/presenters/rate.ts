import type { Rate } from '../contract/common.js'
import type { LossSummary } from '../contract/losses.js'
import type { FiringKind } from '../shared/kinds.js'
import { faultRule } from '../shared/faults/index.js'
import { measureSums } from '../shared/lossRollupRates.js'
import { clusteredRateFromSums } from '../statistics/index.js'
import type { ClusterSums } from '../statistics/index.js'

/** Confidence of every interval that is shown. */
const LEVEL = 0.95
/** Under this many firings a rate is shown with "few firings". */
const FEW = 5

/** A rate with its counts and interval. One firing says nothing of the spread: its counts alone are shown. */
export function presentRate(sums: ClusterSums): Rate {
  const { G: firings, sumEvents: events, sumUnits: pieces } = sums
  const counts = { events, pieces, firings }
  if (firings < 2) {
    return {
      ...counts,
      rate: null,
      lower: null,
      upper: null,
      note: firings === 0 ? 'none' : 'one-firing',
    }
  }
  const { rate, lower, upper } = clusteredRateFromSums({ ...sums, level: LEVEL })
  return { ...counts, rate, lower, upper, note: firings < FEW ? 'few-firings' : 'ok' }
}

const NOTHING: ReadonlyMap<string, readonly number[]> = new Map()

/**
 * The three rates of a slice of the roll-ups. A fault that cannot be seen in firings of the kind has no pieces.
 * @param byFault sums by family; undefined where there are none
 */
export function presentRates(
  byFault: ReadonlyMap<string, readonly number[]> | undefined,
  fault: string | null,
  kind: FiringKind,
): LossSummary['rates'] {
  const seen = fault === null || (faultRule(fault)?.seenIn.includes(kind) ?? false)
  const families = seen && byFault ? byFault : NOTHING
  return {
    loss: presentRate(measureSums(families, fault, 'loss')),
    waste: presentRate(measureSums(families, fault, 'waste')),
    blemish: presentRate(measureSums(families, fault, 'blemish')),
  }
}
