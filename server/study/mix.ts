import type { AtRiskLots } from './atRisk.js'
import { REST_PIECE, type FactorColumn, type StudyTable } from './table.js'

/** Pull of every level towards "no effect", in losses: a level with 4 losses goes half of its way. */
const PULL = 4
const SWEEPS = 3

/**
 * What the mix of lots leads one to expect of every firing: Σ over its lots of pieces × the product of one multiplier
 * a lot factor. The multipliers are fitted inside firings only (every firing has an effect of its own), so that what
 * kilns or programmes do cannot hide in them; each is (observed + 4)/(expected + 4), so that a level with few losses
 * stays near 1. Used to compare kilns by what is not explained by their lots.
 *
 * @param events by row of the lots.
 * @returns expectation by firing of the table, up to a constant; pieces alone where nothing is known of the lots.
 */
export function expectedByFiring(
  table: StudyTable,
  lots: AtRiskLots,
  events: Float64Array,
  columns: readonly FactorColumn[],
): Float64Array {
  const lost = new Float64Array(table.firings.count)
  for (let i = 0; i < lots.rows; i += 1) {
    const f = lots.firing[i] as number
    if (counts(table, lots, i)) lost[f] = (lost[f] as number) + (events[i] as number)
  }
  const rows: number[] = []
  for (let i = 0; i < lots.rows; i += 1)
    if ((lost[lots.firing[i] as number] as number) > 0 && counts(table, lots, i)) rows.push(i)
  const multipliers = fit(lots, events, columns, Int32Array.from(rows), lost)
  return project(table, lots, columns, multipliers)
}

function counts(table: StudyTable, lots: AtRiskLots, i: number): boolean {
  return table.part[lots.source[i] as number] !== REST_PIECE
}

/** Multipliers by code (0 = not recorded), one list a factor, found factor by factor in a few sweeps. */
function fit(
  lots: AtRiskLots,
  events: Float64Array,
  columns: readonly FactorColumn[],
  rows: Int32Array,
  lost: Float64Array,
): Float64Array[] {
  const multipliers = columns.map((column) => new Float64Array(codesOf(column)).fill(1))
  const working: Working = {
    rows,
    weight: Float64Array.from(rows, (i) => lots.units[i] as number),
    ofFiring: new Float64Array(lost.length),
    lost,
  }
  for (let sweep = 0; sweep < SWEEPS; sweep += 1)
    columns.forEach((column, c) =>
      refit(lots, events, column, multipliers[c] as Float64Array, working),
    )
  return multipliers
}

interface Working {
  rows: Int32Array
  /** Pieces × all multipliers, by place in rows. */
  weight: Float64Array
  /** Σ weight by firing. */
  ofFiring: Float64Array
  /** Losses by firing. */
  lost: Float64Array
}

/** One factor anew, the others as they are. */
function refit(
  lots: AtRiskLots,
  events: Float64Array,
  column: FactorColumn,
  mine: Float64Array,
  { rows, weight, ofFiring, lost }: Working,
): void {
  const { codes } = column
  const { firing, source } = lots
  const observed = new Float64Array(mine.length)
  const expected = new Float64Array(mine.length)
  ofFiring.fill(0)
  for (let j = 0; j < rows.length; j += 1) {
    const f = firing[rows[j] as number] as number
    ofFiring[f] = (ofFiring[f] as number) + (weight[j] as number)
  }
  for (let j = 0; j < rows.length; j += 1) {
    const i = rows[j] as number
    const f = firing[i] as number
    const code = codes[source[i] as number] as number
    observed[code] = (observed[code] as number) + (events[i] as number)
    const share = ((lost[f] as number) * (weight[j] as number)) / (ofFiring[f] as number)
    expected[code] = (expected[code] as number) + share / (mine[code] as number)
  }
  // From here on `expected` holds the factor by which each multiplier changes.
  for (let code = 0; code < mine.length; code += 1) {
    const next = ((observed[code] as number) + PULL) / ((expected[code] as number) + PULL)
    expected[code] = next / (mine[code] as number)
    mine[code] = next
  }
  for (let j = 0; j < rows.length; j += 1) {
    const code = codes[source[rows[j] as number] as number] as number
    weight[j] = (weight[j] as number) * (expected[code] as number)
  }
}

function codesOf(column: FactorColumn): number {
  return column.sets === null ? column.levels.length + 1 : column.sets.length
}

/** Pieces × multipliers, summed by firing. */
function project(
  table: StudyTable,
  lots: AtRiskLots,
  columns: readonly FactorColumn[],
  multipliers: readonly Float64Array[],
): Float64Array {
  const expected = new Float64Array(table.firings.count)
  for (let i = 0; i < lots.rows; i += 1) {
    if (!counts(table, lots, i)) continue
    const row = lots.source[i] as number
    let weight = lots.units[i] as number
    for (let c = 0; c < columns.length; c += 1) {
      const code = (columns[c] as FactorColumn).codes[row] as number
      weight *= (multipliers[c] as Float64Array)[code] as number
    }
    const f = lots.firing[i] as number
    expected[f] = (expected[f] as number) + weight
  }
  return expected
}
