/**
 * What one reported firing adds to the roll-ups of losses: pure, so that the same arithmetic moves
 * them with a revision and makes them anew.
 *
 * A row is a cell (kiln × kind × local month), a slice (factor and level) and a family:
 * - `fault` '' holds the slice's denominators (G, Σm, Σm² over pieces fired and looked at), the sums of
 *   every measure over all faults (Σy, Σmy, Σy²) and the counts that no rate is over.
 * - `fault` of a node holds Σy, Σmy, Σy² alone: any mention of it or of a node below it, on lots that
 *   could show it. m is that of the node's risk group.
 * - `fault` '@' + a risk group holds how the denominators of its faults *differ* from the slice's own:
 *   ΔG, ΣΔm, ΣΔm² (of refire faults, which share nothing with it, G, Σm, Σm² themselves). Most lots rule
 *   nothing out and had nothing turned away, so most of these rows do not exist: 1,500 firings with
 *   every factor come to some 190,000 rows. Rejected: denominators beside every fault (1.5 million rows:
 *   a fault is rarely there, its denominator always), and a row a measure (a waster writes twice).
 *
 * Slices: factor '' level 0 is the whole firing; a factor with a level is the firing's pieces of that
 * level; a factor with level 0 is its pieces for which the factor is recorded at all (a lot with two
 * glazes counts once); `REFIRED` is the pieces that had been fired before, which are in no other slice:
 * first-pass rates leave them out. Firings that failed as a whole are in: these are totals.
 *
 * Sums may be added over kilns, months and studios, not over levels, since a firing holds several.
 */
import type { LossOutcome, LotCounts, Measure } from './counts.js'
import type { RecordedLot, RiskGroup } from './faults/index.js'
import type { FiringKind } from './kinds.js'

/** Factor of the slice of pieces that had been fired before. */
export const REFIRED = '@refired'

export interface LevelOfFactor {
  factor: string
  levelId: number
}

export interface RollupLoss {
  fault: string
  also: readonly string[]
  outcome: LossOutcome
  pieces: number
}

export interface RollupLot extends LotCounts, RecordedLot {
  levels: readonly LevelOfFactor[]
  losses: readonly RollupLoss[]
}

export interface RollupFiring {
  studioId: number
  kilnId: number
  kind: FiringKind
  /** First day of the local month. */
  month: string
  /** Levels of firing factors. */
  levels: readonly LevelOfFactor[]
  lots: readonly RollupLot[]
}

/** Columns of sums, in the order of `sums` of a row. */
export const SUM_COLUMNS = [
  'firings',
  'units',
  'units2',
  'loss',
  'loss_units',
  'loss2',
  'waste',
  'waste_units',
  'waste2',
  'blemish',
  'blemish_units',
  'blemish2',
  'offered',
  'turned_away',
  'undecided',
  'not_looked_at',
] as const

export interface RollupRow {
  studioId: number
  kilnId: number
  kind: FiringKind
  month: string
  factor: string
  levelId: number
  fault: string
  sums: number[]
}

/** Where the three sums of a measure begin. */
export const FIRST_OF = { loss: 3, waste: 6, blemish: 9 } as const satisfies Record<Measure, number>
/** Where the counts that no rate is over begin. */
export const FIRST_OF_COUNTS = 12

export function noSums(): number[] {
  return new Array<number>(SUM_COLUMNS.length).fill(0)
}

/** The `fault` of the rows that hold a group's denominators. */
export function groupFault(group: RiskGroup): string {
  return `@${group.id}`
}

type Cell = Pick<RollupFiring, 'studioId' | 'kilnId' | 'kind' | 'month'>
/** Sums by family (`fault`). */
export type Slice = ReadonlyMap<string, readonly number[]>

/** Rows of any number of firings; what several add to the same row is summed. */
export class Rollup {
  private readonly slices = new Map<string, Map<string, RollupRow>>()

  /** Adds sums by family to a slice of a cell, or takes them away (sign −1). */
  add(cell: Cell, factor: string, levelId: number, slice: Slice, sign: 1 | -1): void {
    const { studioId, kilnId, kind, month } = cell
    const key = `${kilnId} ${kind} ${month} ${factor} ${levelId}`
    let rows = this.slices.get(key)
    if (!rows) this.slices.set(key, (rows = new Map<string, RollupRow>()))
    for (const [fault, sums] of slice) {
      let row = rows.get(fault)
      if (!row)
        rows.set(
          fault,
          (row = { studioId, kilnId, kind, month, factor, levelId, fault, sums: noSums() }),
        )
      for (let i = 0; i < sums.length; i += 1)
        row.sums[i] = (row.sums[i] as number) + sign * (sums[i] as number)
    }
  }

  /** Every row, those that came to nought among them. */
  *values(): Generator<RollupRow> {
    for (const rows of this.slices.values()) yield* rows.values()
  }
}
