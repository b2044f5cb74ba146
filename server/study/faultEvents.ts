import type { AtRiskLots } from './atRisk.js'
import type { StudyTable } from './table.js'
import type { StudyFault } from './types.js'

/** For every fault, the losses that mention it or a fault below it. */
export interface FaultLosses {
  /** Losses of fault k: loss[start[k]] … loss[start[k + 1] − 1]. */
  start: Int32Array
  loss: Int32Array
}

/** Groups the losses by fault: any mention, main or also, counts once for the fault and every node above it. */
export function lossesByFault(table: StudyTable, faults: readonly StudyFault[]): FaultLosses {
  const index = new Map(faults.map((fault, k) => [fault.id, k]))
  const nodesOfSet = table.losses.faultSets.map((set) => nodesOf(set, faults, index))
  const start = new Int32Array(faults.length + 1)
  for (let i = 0; i < table.losses.count; i += 1)
    for (const k of nodesOfSet[table.losses.faults[i] as number] as number[])
      start[k + 1] = (start[k + 1] as number) + 1
  for (let k = 0; k < faults.length; k += 1)
    start[k + 1] = (start[k + 1] as number) + (start[k] as number)
  const next = start.slice()
  const loss = new Int32Array(start[faults.length] as number)
  for (let i = 0; i < table.losses.count; i += 1) {
    for (const k of nodesOfSet[table.losses.faults[i] as number] as number[]) {
      loss[next[k] as number] = i
      next[k] = (next[k] as number) + 1
    }
  }
  return { start, loss }
}

function nodesOf(
  set: readonly string[],
  faults: readonly StudyFault[],
  index: ReadonlyMap<string, number>,
): number[] {
  const nodes = new Set<number>()
  for (const id of set) {
    let at: string | null = id
    while (at !== null) {
      const k: number | undefined = index.get(at)
      if (k === undefined) break
      nodes.add(k)
      at = (faults[k] as StudyFault).parent
    }
  }
  return [...nodes]
}

/** Events of one fault on the rows of a panel, and the losses that found no row there. */
export interface FaultEvents {
  events: Float64Array
  /** Strata with events, rising. */
  strata: Int32Array
  total: number
  /** Pieces lost to it on lots that could not show it. */
  notAtRisk: number
}

/**
 * Lays the events of fault k on the rows at risk.
 *
 * @param events scratch of the panel's length, all 0; the caller clears it.
 * @param isRuledOut of a row of the table in scope: the fault cannot be there.
 * @param placeOf row of the panel for every row of the table, −1 where not at risk.
 */
export function layEvents(
  table: StudyTable,
  losses: FaultLosses,
  k: number,
  lots: AtRiskLots,
  placeOf: Int32Array,
  stratumOf: Int32Array,
  events: Float64Array,
  isRuledOut: (row: number) => boolean,
): FaultEvents {
  const touched = new Set<number>()
  let total = 0
  let notAtRisk = 0
  for (let j = losses.start[k] as number; j < (losses.start[k + 1] as number); j += 1) {
    const i = losses.loss[j] as number
    const row = table.losses.row[i] as number
    const pieces = table.losses.pieces[i] as number
    if (table.losses.before[i] === 1 && !lots.overOffered) continue
    const place = placeOf[row] as number
    if (place < 0) {
      if (isRuledOut(row)) notAtRisk += pieces
      continue
    }
    const room = (lots.units[place] as number) - (events[place] as number)
    const counted = Math.min(pieces, room)
    events[place] = (events[place] as number) + counted
    total += counted
    touched.add(stratumOf[place] as number)
  }
  return { events, strata: Int32Array.from(touched).sort(), total, notAtRisk }
}
