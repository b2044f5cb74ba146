import { requireCounts, requireProbability } from './arguments.js'
import { testStrata, type StrataRows, type WithinStrata } from './strata.js'

export interface StrataRow {
  readonly stratum: string | number
  readonly units: number
  readonly events: number
  /** Has the level. */
  readonly exposed: boolean | number
}

/**
 * The study's comparison: pieces with a level against pieces without, inside strata that hold both.
 *
 * Rows are lots and strata firings, or rows are firings and strata studio × kind of firing. Rows without units leave.
 * - *Mixed* strata have exposed and unexposed rows; the four totals count these.
 * - ratio: Mantel–Haenszel over the mixed strata. lower, upper: leave one stratum with events out (G of them),
 *   se² = (G−1)/G·Σ(b₍g₎ − b)² of the log ratio, t with G − 1.
 * - *Informative* strata are mixed with 0 < Y < M (Y events, M units). There, for every row of m units and y events:
 *   e = y − m·Y/M, h = m(Y/M)(1−Y/M)(M−m)/(M−1); correlation ρ = Σ(e² − h)/Σh(m−1), held in 0..1: how much pieces
 *   of one row clump. s = √(m(1−m/M)(1+(m−1)ρ)), r = e/s, a = exposed·s, both centred inside the stratum (a′, r′).
 *   T = Σa′r′ has mean 0 and variance V = Σ over strata of Σa′²·Σr′²/(rows−1) when the r of a stratum are dealt
 *   out to its rows at random; statistic = T/√V, pValue two-sided normal. Dividing by s keeps the test honest when
 *   lots of the level are larger or smaller than the others.
 *
 * @returns ratio null when nothing was lost unexposed, 0 when nothing exposed; limits null with fewer than two
 *   strata with events or when one stratum carries a side; statistic, pValue null when nothing is informative or
 *   V = 0; correlation null when nothing is informative. Linear in the number of rows.
 * @throws RangeError for impossible counts or level.
 *
 * Mantel and Haenszel 1959; linear permutation statistics: Wald and Wolfowitz 1944, Annals of Mathematical
 * Statistics 15:358-372; blocks: Strasser and Weber 1999. The standardising by a clumped variance is our own.
 */
export function withinStrataTest(input: {
  rows: readonly StrataRow[]
  level: number
}): WithinStrata {
  requireProbability('level', input.level)
  return testStrata(groupByStratum(input.rows), input.level).result
}

/** Counting sort of the rows by stratum, in order of first appearance. */
export function groupByStratum(input: readonly StrataRow[]): StrataRows {
  const index = new Map<string | number, number>()
  const stratumOf = new Int32Array(input.length).fill(-1)
  const sizes: number[] = []
  input.forEach((row, i) => {
    requireCounts(`rows[${i}]`, row.events, row.units)
    if (row.units === 0) return
    let g = index.get(row.stratum)
    if (g === undefined) {
      g = index.size
      index.set(row.stratum, g)
      sizes.push(0)
    }
    stratumOf[i] = g
    sizes[g] = (sizes[g] as number) + 1
  })
  const strata = sizes.length
  const starts = new Int32Array(strata + 1)
  sizes.forEach((size, g) => {
    starts[g + 1] = (starts[g] as number) + size
  })
  const next = starts.slice(0, strata)
  const total = starts[strata] as number
  const units = new Float64Array(total)
  const events = new Float64Array(total)
  const exposed = new Uint8Array(total)
  input.forEach((row, i) => {
    const g = stratumOf[i] as number
    if (g < 0) return
    const at = next[g] as number
    next[g] = at + 1
    units[at] = row.units
    events[at] = row.events
    exposed[at] = row.exposed ? 1 : 0
  })
  return { strata, starts, units, events, exposed }
}
