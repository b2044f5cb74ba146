import type { AtRiskLots, Panel } from './atRisk.js'
import { compareText, type Codes } from './levelColumn.js'
import type { FactorColumn } from './table.js'

/** Levels of one factor (or of a pair of factors) on the rows of a panel. */
export interface FactorView {
  /** Factor ids. */
  factors: readonly string[]
  /** Number of levels; they count from 1. */
  levels: number
  /** Level keys, one a factor. */
  keys: (level: number) => readonly string[]
  codes: Codes
  /** Place in `codes` of every row of the panel; null = the row's own place. */
  at: Int32Array | null
  /** Levels of a code; null where the code is the level. */
  sets: readonly Int32Array[] | null
  /** Levels that everything behind the code has, where that can differ from `sets` (whole firings as rows). */
  all: readonly Int32Array[] | null
}

/** Code of a row, 0 = not recorded. */
export function codeAt(view: FactorView, row: number): number {
  return view.codes[view.at === null ? row : (view.at[row] as number)] as number
}

/** 1 = the row has the level, 0 = it has others, −1 = some of both: it can be on neither side. */
export function exposure(view: FactorView, code: number, level: number): -1 | 0 | 1 {
  if (view.sets === null) return code === level ? 1 : 0
  if (!(view.sets[code] as Int32Array).includes(level)) return 0
  return view.all === null || (view.all[code] as Int32Array).includes(level) ? 1 : -1
}

/** A factor of the lot on lots. */
export function lotView(column: FactorColumn, lots: AtRiskLots): FactorView {
  return { ...named(column), codes: column.codes, at: lots.source, sets: column.sets, all: null }
}

/** A factor of the firing on firings. */
export function firingView(column: FactorColumn, panel: Panel): FactorView {
  return { ...named(column), codes: column.codes, at: panel.firing, sets: column.sets, all: null }
}

function named(column: FactorColumn): Pick<FactorView, 'factors' | 'levels' | 'keys'> {
  return {
    factors: [column.factor.id],
    levels: column.levels.length,
    keys: (level) => [column.levels[level - 1] as string],
  }
}

/** Every pair of a level of one factor and a level of another, on lots where both are recorded. */
export function pairView(first: FactorColumn, second: FactorColumn, lots: AtRiskLots): FactorView {
  const codes = new Uint32Array(lots.rows)
  const combinations = new Map<number, number>()
  const pairs = new Map<number, number>()
  const members: { a: number; b: number }[] = []
  const sets: Int32Array[] = [new Int32Array(0)]
  const width = second.sets === null ? second.levels.length + 1 : second.sets.length
  for (let i = 0; i < lots.rows; i += 1) {
    const a = first.codes[lots.source[i] as number] as number
    const b = second.codes[lots.source[i] as number] as number
    if (a === 0 || b === 0) continue
    let code = combinations.get(a * width + b)
    if (code === undefined) {
      code = sets.length
      combinations.set(a * width + b, code)
      sets.push(
        pairsOf(levelsOf(first, a), levelsOf(second, b), second.levels.length + 1, pairs, members),
      )
    }
    codes[i] = code
  }
  return {
    factors: [first.factor.id, second.factor.id],
    levels: members.length,
    keys: (level) => {
      const { a, b } = members[level - 1] as { a: number; b: number }
      return [first.levels[a - 1] as string, second.levels[b - 1] as string]
    },
    codes,
    at: null,
    sets,
    all: null,
  }
}

function levelsOf(column: FactorColumn, code: number): readonly number[] {
  return column.sets === null ? [code] : [...(column.sets[code] as Int32Array)]
}

function pairsOf(
  first: readonly number[],
  second: readonly number[],
  width: number,
  pairs: Map<number, number>,
  members: { a: number; b: number }[],
): Int32Array {
  return Int32Array.from(
    first.flatMap((a) =>
      second.map((b) => {
        let pair = pairs.get(a * width + b)
        if (pair === undefined) {
          members.push({ a, b })
          pair = members.length
          pairs.set(a * width + b, pair)
        }
        return pair
      }),
    ),
  )
}

/** Order of two level keys, for results that do not depend on the order of rows. */
export function compareKeys(a: readonly string[], b: readonly string[]): number {
  for (let i = 0; i < a.length; i += 1) {
    const order = compareText(a[i] as string, b[i] as string)
    if (order !== 0) return order
  }
  return 0
}
