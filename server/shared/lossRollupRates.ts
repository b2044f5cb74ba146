/** Rates and counts from roll-ups: the reading side of lossRollup.ts. */
import type { LotCounts, Measure } from './counts.js'
import { riskGroup } from './faults/index.js'
import { FIRST_OF, FIRST_OF_COUNTS, groupFault, noSums } from './lossRollup.js'

/** Sums of a set of firings for one measure, as `clusteredRateFromSums` takes them. */
export interface MeasureSums {
  G: number
  sumUnits: number
  sumEvents: number
  sumUnits2: number
  sumUnitsEvents: number
  sumEvents2: number
}

/**
 * Sums of one measure from the families of a slice (each summed over kilns, months and studios).
 * @param byFault sums by family; a missing one is nought
 * @param fault a node of the tree, or null for all faults
 */
export function measureSums(
  byFault: ReadonlyMap<string, readonly number[]>,
  fault: string | null,
  measure: Measure,
): MeasureSums {
  const base = byFault.get('') ?? noSums()
  const group = fault === null ? undefined : riskGroup(fault)
  const differs = (group && byFault.get(groupFault(group))) ?? noSums()
  const events = byFault.get(fault ?? '') ?? noSums()
  const own = group?.rule.needsRefire ? 0 : 1
  const unit = (i: number): number => own * (base[i] as number) + (differs[i] as number)
  const event = (i: number): number => events[FIRST_OF[measure] + i] as number
  return {
    G: unit(0),
    sumUnits: unit(1),
    sumUnits2: unit(2),
    sumEvents: event(0),
    sumUnitsEvents: event(1),
    sumEvents2: event(2),
  }
}

/** The families that the rates of a fault are made of. */
export function familiesOf(fault: string | null): string[] {
  const group = fault === null ? undefined : riskGroup(fault)
  return fault === null || !group ? [''] : ['', groupFault(group), fault]
}

/** Counts of a slice's own pieces from its sums of family ''. */
export function countsOf(sums: readonly number[] | undefined): LotCounts {
  const at = (i: number): number => sums?.[i] ?? 0
  return {
    pieces: at(FIRST_OF_COUNTS),
    turnedAway: at(FIRST_OF_COUNTS + 1),
    seconds: at(FIRST_OF.blemish),
    refires: at(FIRST_OF.loss) - at(FIRST_OF.waste),
    wasters: at(FIRST_OF.waste),
    undecided: at(FIRST_OF_COUNTS + 2),
    notLookedAt: at(FIRST_OF_COUNTS + 3),
  }
}
