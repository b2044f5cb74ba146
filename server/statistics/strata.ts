/**
 * The arithmetic of withinStrataTest on typed arrays: the study calls it some thousand times a night on the same
 * scratch arrays, so nothing here allocates per row. Definitions stand at withinStrataTest.
 */
import { normalTwoSided } from './distributions.js'
import { ratioWithLimits } from './strataRatio.js'

/** Rows sorted by stratum; stratum g holds rows starts[g] … starts[g + 1] − 1. Rows without units stay out. */
export interface StrataRows {
  readonly strata: number
  /** strata + 1 offsets. */
  readonly starts: Int32Array
  /** Pieces of the row, > 0. */
  readonly units: Float64Array
  /** Pieces lost. */
  readonly events: Float64Array
  /** 1 = has the level. */
  readonly exposed: Uint8Array
  /**
   * Pieces that the row stands for in counts and ratios, where that differs from units: a spot-checked sound piece
   * stands for several; a firing stands for what its mix of lots would lead one to expect.
   */
  readonly represents?: Float64Array | undefined
  /** Taken off the events in the test (not in the ratio): what something else explains; adds to 0 in a stratum. */
  readonly explained?: Float64Array | undefined
}

export interface WithinStrata {
  ratio: number | null
  lower: number | null
  upper: number | null
  statistic: number | null
  pValue: number | null
  /** Strata with exposed and unexposed rows. */
  mixedStrata: number
  /** Mixed strata in which some but not all pieces were lost. */
  informativeStrata: number
  correlation: number | null
  exposedUnits: number
  exposedEvents: number
  unexposedUnits: number
  unexposedEvents: number
}

/** What the exact p-value needs beside the result. */
export interface TestScores {
  /** Third standardised moment of T when the residuals are dealt out at random. */
  skewness: number
  correlation: number
}

/**
 * Ratio, limits, statistic and p of rows grouped into strata, and the scores for the exact p (null: no test).
 *
 * @param leaveOut what the limits leave out one at a time: strata (firings with lots in them), or rows (firings in a
 *   few large strata, where leaving a whole studio out would say nothing).
 */
export function testStrata(
  rows: StrataRows,
  level: number,
  leaveOut: 'stratum' | 'row' = 'stratum',
): { result: WithinStrata; scores: TestScores | null } {
  const sums = stratumSums(rows)
  const ratio = ratioWithLimits(rows, level, leaveOut)
  const correlation = sums.informative === 0 ? null : rowCorrelation(rows, sums)
  const test = correlation === null ? null : moments(rows, sums, correlation)
  const usable = test !== null && test.V > 0
  const statistic = usable ? test.T / Math.sqrt(test.V) : null
  return {
    result: {
      ratio: ratio.ratio,
      lower: ratio.lower,
      upper: ratio.upper,
      statistic,
      pValue: statistic === null ? null : normalTwoSided(statistic),
      mixedStrata: ratio.mixedStrata,
      informativeStrata: sums.informative,
      correlation,
      ...ratio.totals,
    },
    scores:
      usable && correlation !== null ? { skewness: test.third / test.V ** 1.5, correlation } : null,
  }
}

/** Pieces M and losses Y of the informative strata; M = 0 marks the others. */
export interface StratumSums {
  informative: number
  M: Float64Array
  Y: Float64Array
}

/** Informative strata: mixed, and 0 < Y < M. */
export function stratumSums(rows: StrataRows): StratumSums {
  const { starts, units, events, exposed, strata } = rows
  const M = new Float64Array(strata)
  const Y = new Float64Array(strata)
  let informative = 0
  for (let g = 0; g < strata; g += 1) {
    let m = 0
    let y = 0
    let sides = 0
    for (let i = starts[g] as number; i < (starts[g + 1] as number); i += 1) {
      m += units[i] as number
      y += events[i] as number
      sides |= exposed[i] === 1 ? 1 : 2
    }
    if (sides !== 3 || y <= 0 || y >= m) continue
    informative += 1
    M[g] = m
    Y[g] = y
  }
  return { informative, M, Y }
}

/** How much pieces of one row clump, 0..1, over the informative strata. */
function rowCorrelation(rows: StrataRows, { M, Y }: StratumSums): number {
  const { starts, units } = rows
  let above = 0
  let below = 0
  for (let g = 0; g < rows.strata; g += 1) {
    const all = M[g] as number
    if (all === 0) continue
    const rate = (Y[g] as number) / all
    const spread = (rate * (1 - rate)) / (all - 1)
    for (let i = starts[g] as number; i < (starts[g + 1] as number); i += 1) {
      const m = units[i] as number
      const e = residual(rows, i, rate)
      const h = m * spread * (all - m)
      above += e * e - h
      below += h * (m - 1)
    }
  }
  return below > 0 ? Math.min(1, Math.max(0, above / below)) : 0
}

/** Events of a row beyond its share of the stratum's, and beyond what is explained. */
export function residual(rows: StrataRows, i: number, rate: number): number {
  const share = (rows.units[i] as number) * rate
  const e =
    (rows.events[i] as number) -
    share -
    (rows.explained === undefined ? 0 : (rows.explained[i] as number))
  // Equal rates on both sides leave only rounding: that is no difference, not a tiny one.
  return Math.abs(e) < 1e-12 * (1 + share) ? 0 : e
}

/** Row standard deviation up to a constant: √(m(1−m/M)(1+(m−1)ρ)). */
export function rowScale(m: number, M: number, correlation: number): number {
  return Math.sqrt(m * (1 - m / M) * (1 + (m - 1) * correlation))
}

/**
 * T = Σ a′r′, its variance V and third moment when the r of a stratum are dealt out to its rows at random.
 * Third moment of a linear permutation statistic: Σa′³·Σr′³·n/((n−1)(n−2)) for n rows (0 for two). Central sums come
 * from raw ones in one pass: r is near 0 on average and a of the size of its spread, so little is lost.
 */
function moments(
  rows: StrataRows,
  { M, Y }: StratumSums,
  correlation: number,
): { T: number; V: number; third: number } {
  let T = 0
  let V = 0
  let third = 0
  for (let g = 0; g < rows.strata; g += 1) {
    const all = M[g] as number
    if (all === 0) continue
    const from = rows.starts[g] as number
    const to = rows.starts[g + 1] as number
    const rate = (Y[g] as number) / all
    const n = to - from
    let a1 = 0
    let a2 = 0
    let a3 = 0
    let r1 = 0
    let r2 = 0
    let r3 = 0
    let ar = 0
    for (let i = from; i < to; i += 1) {
      const s = rowScale(rows.units[i] as number, all, correlation)
      const r = residual(rows, i, rate) / s
      r1 += r
      r2 += r * r
      r3 += r * r * r
      if (rows.exposed[i] !== 1) continue
      a1 += s
      a2 += s * s
      a3 += s * s * s
      ar += s * r
    }
    T += ar - (a1 * r1) / n
    const aSquares = a2 - (a1 * a1) / n
    const rSquares = r2 - (r1 * r1) / n
    V += (aSquares * rSquares) / (n - 1)
    if (n > 2) third += (cubes(a1, a2, a3, n) * cubes(r1, r2, r3, n) * n) / ((n - 1) * (n - 2))
  }
  return { T, V, third }
}

/** Σ(x − x̄)³ from Σx, Σx², Σx³. */
function cubes(x1: number, x2: number, x3: number, n: number): number {
  const mean = x1 / n
  return x3 - 3 * mean * x2 + 2 * n * mean * mean * mean
}
