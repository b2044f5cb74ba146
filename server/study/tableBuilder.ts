import { FIRING_KINDS, type FiringKind } from '../shared/kinds.js'
import { arrangeTable } from './arrangeTable.js'
import { CodeColumn, Dictionary, NumberColumn } from './levelColumn.js'
import { LOT, NO, REST, REST_PIECE, UNKNOWN, YES, type StudyTable } from './table.js'
import type { StudyFactor, StudyRow } from './types.js'

/** Between the levels of a set in its key: no name holds it. */
const SEPARATOR = '\u0000'

/** Columns as they grow, in the order of arrival; arrangeTable puts them in an order of their own. */
export interface RawColumns {
  firing: NumberColumn
  part: NumberColumn
  offered: NumberColumn
  fired: NumberColumn
  refireCount: NumberColumn
  glaze: NumberColumn
  joint: NumberColumn
  forming: CodeColumn
  formings: Dictionary
  /** Only for described pieces, by row. */
  standsFor: Map<number, number>
  factors: { factor: StudyFactor; codes: CodeColumn; names: Dictionary }[]
  firings: { names: Dictionary; studio: number[]; kind: FiringKind[]; studios: Dictionary }
  firingFactors: { factor: StudyFactor; codes: number[]; names: Dictionary }[]
  lossRow: NumberColumn
  lossPieces: NumberColumn
  lossBefore: NumberColumn
  lossFaults: CodeColumn
  faultSets: Dictionary
  leftOut: number
}

/**
 * Fills a StudyTable row by row, so that a network of any size can be streamed in. Holds about 60 bytes a lot.
 * The order of the rows does not matter to the table that is built.
 */
export class StudyTableBuilder {
  private readonly raw: RawColumns

  /** @param factors the registry; levels of other factors are ignored. */
  constructor(factors: readonly StudyFactor[]) {
    const lotFactors = factors.filter((factor) => factor.of === 'lot')
    const firingFactors = factors.filter((factor) => factor.of === 'firing')
    this.raw = {
      firing: new NumberColumn(),
      part: new NumberColumn(),
      offered: new NumberColumn(),
      fired: new NumberColumn(),
      refireCount: new NumberColumn(),
      glaze: new NumberColumn(),
      joint: new NumberColumn(),
      forming: new CodeColumn(),
      formings: new Dictionary(),
      standsFor: new Map(),
      factors: lotFactors.map((factor) => ({
        factor,
        codes: new CodeColumn(),
        names: new Dictionary(),
      })),
      firings: { names: new Dictionary(), studio: [], kind: [], studios: new Dictionary() },
      firingFactors: firingFactors.map((factor) => ({
        factor,
        codes: [],
        names: new Dictionary(),
      })),
      lossRow: new NumberColumn(),
      lossPieces: new NumberColumn(),
      lossBefore: new NumberColumn(),
      lossFaults: new CodeColumn(),
      faultSets: new Dictionary(),
      leftOut: 0,
    }
  }

  /** Number of rows taken in so far. */
  get rows(): number {
    return this.raw.firing.length
  }

  /**
   * Takes one row in. Rows of loads that failed as a whole are counted and left out.
   *
   * @throws RangeError naming the firing when counts cannot be, or when a firing changes its studio or kind.
   */
  push(row: StudyRow): void {
    if (row.wholeLoadFailed) {
      this.raw.leftOut += 1
      return
    }
    requirePossible(row)
    const { raw } = this
    // All that may throw comes before the first push: a refused row leaves no trace.
    const firing = this.firingOf(row)
    const codes = raw.factors.map(({ factor, names }) =>
      levelCode(factor, row.levels[factor.id], names),
    )
    const taken = eventPieces(row)
    const index = raw.firing.length
    raw.firing.push(firing)
    raw.part.push(row.isRest ? (row.described ? REST_PIECE : REST) : LOT)
    raw.offered.push(row.pieces - row.notLookedAt - taken.offered)
    raw.fired.push(row.pieces - row.turnedAway - row.notLookedAt - taken.fired)
    raw.refireCount.push(row.refireCount)
    raw.glaze.push(flag(row.hasGlaze))
    raw.joint.push(flag(row.hasJoint))
    raw.forming.push(row.formingCode === null ? 0 : raw.formings.code(row.formingCode))
    if (row.standsFor !== undefined && row.standsFor !== 1) raw.standsFor.set(index, row.standsFor)
    raw.factors.forEach((column, f) => column.codes.push(codes[f] as number))
    this.pushLosses(row, index)
  }

  /** The finished table; the builder must not be used afterwards. */
  build(): StudyTable {
    return arrangeTable(this.raw)
  }

  private firingOf(row: StudyRow): number {
    const { firings, firingFactors } = this.raw
    const known = firings.studio.length
    const firing = firings.names.code(String(row.firing)) - 1
    const studio = firings.studios.code(row.studio)
    if (firing < known) {
      if (firings.studio[firing] !== studio || firings.kind[firing] !== row.kind)
        throw new RangeError(`Firing ${row.firing} has two studios or two kinds`)
      return firing
    }
    firings.studio.push(studio)
    firings.kind.push(row.kind)
    for (const { factor, codes, names } of firingFactors) {
      const level = row.firingLevels[factor.id] ?? (factor.id === 'kiln' ? row.kiln : null)
      codes.push(levelCode(factor, level, names))
    }
    return firing
  }

  private pushLosses(row: StudyRow, index: number): void {
    const { raw } = this
    for (const loss of row.losses) {
      if (loss.event || loss.pieces === 0) continue
      const faults = [...new Set([loss.fault, ...loss.also])].sort()
      raw.lossRow.push(index)
      raw.lossPieces.push(loss.pieces)
      raw.lossBefore.push(loss.outcome === 'turned-away' ? 1 : 0)
      raw.lossFaults.push(raw.faultSets.code(faults.join(SEPARATOR)) - 1)
    }
  }
}

/** Levels of the key of a set. */
export function levelsOfKey(key: string): string[] {
  return key.split(SEPARATOR)
}

function levelCode(
  factor: StudyFactor,
  level: StudyRow['levels'][string],
  names: Dictionary,
): number {
  if (level === null || level === undefined || level === '') return 0
  if (typeof level === 'string') return names.code(level)
  if (level.length === 0) return 0
  if (level.length > 1 && !factor.several)
    throw new RangeError(`A lot holds one level of ${factor.id}, not several`)
  return names.code([...new Set(level)].sort().join(SEPARATOR))
}

function flag(value: boolean | null): number {
  return value === null ? UNKNOWN : value ? YES : NO
}

/** Pieces that a neighbour took: out of comparisons, so out of the pieces too. */
function eventPieces(row: StudyRow): { offered: number; fired: number } {
  let offered = 0
  let fired = 0
  for (const loss of row.losses) {
    if (!loss.event) continue
    offered += loss.pieces
    if (loss.outcome !== 'turned-away') fired += loss.pieces
  }
  return { offered, fired }
}

function requirePossible(row: StudyRow): void {
  if (!FIRING_KINDS.includes(row.kind))
    throw new RangeError(`Firing ${row.firing}: unknown kind ${String(row.kind)}`)
  const lost = row.losses.reduce((total, loss) => total + loss.pieces, 0)
  const counts = [
    row.pieces,
    row.turnedAway,
    row.notLookedAt,
    row.refireCount,
    ...row.losses.map((loss) => loss.pieces),
  ]
  if (!counts.every((count) => Number.isInteger(count) && count >= 0))
    throw new RangeError(`Firing ${row.firing}: counts must be whole numbers of 0 or more`)
  if (row.turnedAway + row.notLookedAt > row.pieces || lost + row.notLookedAt > row.pieces)
    throw new RangeError(
      `Firing ${row.firing}: a lot of ${row.pieces} pieces cannot have lost more than that`,
    )
  if (row.standsFor !== undefined && !(row.standsFor > 0 && Number.isFinite(row.standsFor)))
    throw new RangeError(`Firing ${row.firing}: a piece must stand for a positive number of pieces`)
}
