import { firingPanel, type AtRiskLots, type Panel } from './atRisk.js'
import { codeAt, type FactorView } from './factorView.js'
import { REST_PIECE, type StudyTable } from './table.js'

/** Whole firings by a factor of the lot: a firing is on a side only when all its recorded lots are. */
export interface FiringsByLots {
  panel: Panel
  view: FactorView
  /** Events of recorded lots by row of the panel, from events of the lots. */
  events: (lotEvents: Float64Array) => Float64Array
}

/**
 * Firings as rows, with the levels of a lot factor that any of their lots and that all of their lots
 * had. Lots of a firing are neighbours, so one pass does it.
 */
export function firingsByLots(
  table: StudyTable,
  lots: AtRiskLots,
  view: FactorView,
): FiringsByLots {
  const units = new Float64Array(table.firings.count)
  const any: Int32Array[] = [new Int32Array(0)]
  const all: Int32Array[] = [new Int32Array(0)]
  const codes = new Uint32Array(table.firings.count)
  const levels = new LevelsOfFiring(view)
  for (let i = 0; i < lots.rows; i += 1) {
    const f = lots.firing[i] as number
    if (!isRestPiece(table, lots, i) && levels.add(codeAt(view, i)))
      units[f] = (units[f] as number) + (lots.units[i] as number)
    if ((i + 1 < lots.rows && lots.firing[i + 1] === f) || levels.rows === 0) continue
    codes[f] = any.length
    any.push(levels.any())
    all.push(levels.all())
    levels.clear()
  }
  const panel = firingPanel(table, units)
  return {
    panel,
    view: { ...view, at: panel.firing, codes, sets: any, all },
    events: (lotEvents) => eventsOfFirings(table, lots, view, panel, lotEvents),
  }
}

/** Levels of the lots of one firing, and in how many of them each was. */
class LevelsOfFiring {
  rows = 0
  private readonly having: Int32Array
  private met: number[] = []

  constructor(private readonly view: FactorView) {
    this.having = new Int32Array(view.levels + 1)
  }

  /** Takes a lot in; false when the factor is not recorded for it. */
  add(code: number): boolean {
    if (code === 0) return false
    this.rows += 1
    if (this.view.sets === null) this.count(code)
    else for (const level of this.view.sets[code] as Int32Array) this.count(level)
    return true
  }

  any(): Int32Array {
    return Int32Array.from(this.met)
  }

  all(): Int32Array {
    return Int32Array.from(this.met.filter((level) => this.having[level] === this.rows))
  }

  clear(): void {
    for (const level of this.met) this.having[level] = 0
    this.met = []
    this.rows = 0
  }

  private count(level: number): void {
    if (this.having[level] === 0) this.met.push(level)
    this.having[level] = (this.having[level] as number) + 1
  }
}

function eventsOfFirings(
  table: StudyTable,
  lots: AtRiskLots,
  view: FactorView,
  panel: Panel,
  lotEvents: Float64Array,
): Float64Array {
  const lost = new Float64Array(table.firings.count)
  for (let i = 0; i < lots.rows; i += 1) {
    if (lotEvents[i] === 0 || isRestPiece(table, lots, i) || codeAt(view, i) === 0) continue
    const f = lots.firing[i] as number
    lost[f] = (lost[f] as number) + (lotEvents[i] as number)
  }
  const events = new Float64Array(panel.rows)
  for (let i = 0; i < panel.rows; i += 1) events[i] = lost[panel.firing[i] as number] as number
  return events
}

/** A described piece of the rest is in the rest already. */
function isRestPiece(table: StudyTable, lots: AtRiskLots, i: number): boolean {
  return table.part[lots.source[i] as number] === REST_PIECE
}
