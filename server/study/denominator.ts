import { atRiskFirings, atRiskLots, type AtRiskLots, type Panel } from './atRisk.js'
import { firingView, lotView, pairView, type FactorView } from './factorView.js'
import { firingsByLots, type FiringsByLots } from './firingsByLots.js'
import { coverage, levelTotals, type LevelTotals } from './levelTotals.js'
import { NO, REST_PIECE, type FactorColumn, type StudyTable } from './table.js'
import { StratumLevels } from './stratumLevels.js'
import type { StudyFault } from './types.js'

/** A factor on the rows of a panel with its totals. */
export interface Viewed {
  panel: Panel
  view: FactorView
  totals: LevelTotals
  sums: StratumLevels
}

/**
 * All that faults with the same at-risk rule share: rows, strata, factor views and their totals. Views are made when
 * first asked for and kept until the denominator is dropped.
 */
export class Denominator {
  readonly lots: AtRiskLots
  readonly firings: Panel
  /** Row of the lots for every row of the table; −1 = not at risk. */
  readonly placeOf: Int32Array
  readonly stratumOf: Int32Array
  private readonly kept = new Map<string, unknown>()

  constructor(
    private readonly table: StudyTable,
    fault: StudyFault,
    studio: number | null,
  ) {
    this.lots = atRiskLots(table, fault, studio)
    this.firings = atRiskFirings(table, this.lots)
    this.placeOf = new Int32Array(table.rows).fill(-1)
    this.lots.source.forEach((row, place) => {
      this.placeOf[row] = place
    })
    this.stratumOf = new Int32Array(this.lots.rows)
    for (let g = 0; g < this.lots.strata; g += 1)
      this.stratumOf.fill(g, this.lots.starts[g], this.lots.starts[g + 1])
  }

  /** A lot factor on the lots. */
  onLots(column: FactorColumn): Viewed {
    return this.once(`lots ${column.factor.id}`, () =>
      viewed(this.lots, lotView(column, this.lots)),
    )
  }

  /** Pairs of two lot factors on the lots. */
  pairs(first: FactorColumn, second: FactorColumn): Viewed {
    return this.once(`pairs ${first.factor.id} ${second.factor.id}`, () =>
      viewed(this.lots, pairView(first, second, this.lots)),
    )
  }

  /** A firing factor on the firings. */
  onFirings(column: FactorColumn): Viewed {
    return this.once(`firings ${column.factor.id}`, () =>
      viewed(this.firings, firingView(column, this.firings)),
    )
  }

  /** A lot factor on whole firings. */
  byFirings(view: FactorView): Viewed & Pick<FiringsByLots, 'events'> {
    return this.once(`by firings ${view.factors.join()}`, () => {
      const whole = firingsByLots(this.table, this.lots, view)
      return { ...viewed(whole.panel, whole.view), events: whole.events }
    })
  }

  /** Share of the pieces at risk for which every one of the lot factors is recorded, where it applies. */
  lotCoverage(columns: readonly FactorColumn[], view: FactorView): number {
    return this.once(`coverage ${view.factors.join()}`, () =>
      coverage(this.lots, view, (i) =>
        this.applies(columns, this.lots.source[i] as number, this.lots.firing[i] as number),
      ),
    )
  }

  private applies(columns: readonly FactorColumn[], row: number, firing: number): boolean {
    if (this.table.part[row] === REST_PIECE) return false
    return columns.every(({ factor }) => {
      if (factor.applies === 'joint') return this.table.joint[row] !== NO
      return (
        factor.applies !== 'glaze' ||
        (this.table.glaze[row] !== NO && this.table.firings.kind[firing] !== 'bisque')
      )
    })
  }

  private once<T>(key: string, make: () => T): T {
    if (!this.kept.has(key)) this.kept.set(key, make())
    return this.kept.get(key) as T
  }
}

function viewed(panel: Panel, view: FactorView): Viewed {
  const sums = new StratumLevels(view)
  return { panel, view, sums, totals: levelTotals(panel, view, sums) }
}
