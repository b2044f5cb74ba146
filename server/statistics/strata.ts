/**
 * The arithmetic of withinStrataTest on typed arrays: the study calls it some thousand times a night on the same
 * scratch arrays, so nothing here allocates per row. Definitions stand at withinStrataTest.
 */
import { normalTwoSided, tQuantile } from './distributions.js'

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
  /** √V */
  scale: number
  /** Third standardised moment of T when the residuals are dealt out at random. */
  skewness: number
  correlation: number
}

interface Totals {
  exposedUnits: number
  exposedEvents: number
  unexposedUnits: number
  unexposedEvents: number
}

/** Ratio, limits, statistic and p of rows grouped into strata, and the scores for the exact p (null: no test). */
export function testStrata(
  rows: StrataRows,
  level: number,
): { result: WithinStrata; scores: TestScores | null } {
  const ratio = ratioWithLimits(rows, level)
  const correlation = rowCorrelation(rows)
  const test = correlation === null ? null : moments(rows, correlation)
  const usable = test !== null && test.V > 0
  const statistic = usable ? test.T / Math.sqrt(test.V) : null
  return {
    result: {
      ...ratio.interval,
      statistic,
      pValue: statistic === null ? null : normalTwoSided(statistic),
      mixedStrata: ratio.mixedStrata,
      informativeStrata: ratio.informativeStrata,
      correlation,
      ...ratio.totals,
    },
    scores:
      usable && correlation !== null
        ? { scale: Math.sqrt(test.V), skewness: test.third / test.V ** 1.5, correlation }
        : null,
  }
}

/** Mantel–Haenszel ratio over the mixed strata; limits by leaving out one stratum with events at a time. */
function ratioWithLimits(rows: StrataRows, level: number) {
  const totals: Totals = { exposedUnits: 0, exposedEvents: 0, unexposedUnits: 0, unexposedEvents: 0 }
  const parts: { R: number; S: number }[] = []
  let mixedStrata = 0
  let informativeStrata = 0
  for (let g = 0; g < rows.strata; g += 1) {
    const t = stratumTotals(rows, g)
    if (t.exposedUnits === 0 || t.unexposedUnits === 0) continue
    mixedStrata += 1
    totals.exposedUnits += t.exposedUnits
    totals.exposedEvents += t.exposedEvents
    totals.unexposedUnits += t.unexposedUnits
    totals.unexposedEvents += t.unexposedEvents
    const events = t.exposedEvents + t.unexposedEvents
    if (events === 0) continue
    const N = t.exposedUnits + t.unexposedUnits
    if (isInformative(rows, g)) informativeStrata += 1
    parts.push({ R: (t.exposedEvents * t.unexposedUnits) / N, S: (t.unexposedEvents * t.exposedUnits) / N })
  }
  return { interval: leaveOneOut(parts, level), totals, mixedStrata, informativeStrata }
}

/** Ratio ΣR/ΣS with jackknife limits on the log scale, one part left out at a time. */
export function leaveOneOut(
  parts: readonly { R: number; S: number }[],
  level: number,
): { ratio: number | null; lower: number | null; upper: number | null } {
  let R = 0
  let S = 0
  for (const part of parts) {
    R += part.R
    S += part.S
  }
  if (!(S > 0)) return { ratio: null, lower: null, upper: null }
  if (!(R > 0)) return { ratio: 0, lower: null, upper: null }
  const ratio = R / S
  const G = parts.length
  if (G < 2) return { ratio, lower: null, upper: null }
  const b = Math.log(ratio)
  // The last part that carries a side leaves only rounding behind, not a true 0.
  const nothing = 1e-12 * Math.max(R, S)
  let squares = 0
  for (const part of parts) {
    if (R - part.R <= nothing || S - part.S <= nothing) return { ratio, lower: null, upper: null }
    squares += (Math.log((R - part.R) / (S - part.S)) - b) ** 2
  }
  const reach = Math.exp(tQuantile(1 - (1 - level) / 2, G - 1) * Math.sqrt(((G - 1) / G) * squares))
  if (!Number.isFinite(ratio * reach)) return { ratio, lower: null, upper: null }
  return { ratio, lower: ratio / reach, upper: ratio * reach }
}

function stratumTotals(rows: StrataRows, g: number): Totals {
  const { starts, events, exposed } = rows
  const counted = rows.represents ?? rows.units
  const t: Totals = { exposedUnits: 0, exposedEvents: 0, unexposedUnits: 0, unexposedEvents: 0 }
  for (let i = starts[g] as number; i < (starts[g + 1] as number); i += 1) {
    if (exposed[i] === 1) {
      t.exposedUnits += counted[i] as number
      t.exposedEvents += events[i] as number
    } else {
      t.unexposedUnits += counted[i] as number
      t.unexposedEvents += events[i] as number
    }
  }
  return t
}

/** Mixed, and 0 < Y < M. */
function isInformative(rows: StrataRows, g: number): boolean {
  const { starts, units, events, exposed } = rows
  let M = 0
  let Y = 0
  let sides = 0
  for (let i = starts[g] as number; i < (starts[g + 1] as number); i += 1) {
    M += units[i] as number
    Y += events[i] as number
    sides |= exposed[i] === 1 ? 1 : 2
  }
  return sides === 3 && Y > 0 && Y < M
}

/** How much pieces of one row clump, 0..1, over the informative strata; null when there are none. */
function rowCorrelation(rows: StrataRows): number | null {
  let above = 0
  let below = 0
  let informative = 0
  for (let g = 0; g < rows.strata; g += 1) {
    if (!isInformative(rows, g)) continue
    informative += 1
    const { from, to, M, rate } = stratum(rows, g)
    for (let i = from; i < to; i += 1) {
      const m = rows.units[i] as number
      const e = residual(rows, i, rate)
      const h = (m * rate * (1 - rate) * (M - m)) / (M - 1)
      above += e * e - h
      below += h * (m - 1)
    }
  }
  if (informative === 0) return null
  return below > 0 ? Math.min(1, Math.max(0, above / below)) : 0
}

function stratum(rows: StrataRows, g: number): { from: number; to: number; M: number; rate: number } {
  const from = rows.starts[g] as number
  const to = rows.starts[g + 1] as number
  let M = 0
  let Y = 0
  for (let i = from; i < to; i += 1) {
    M += rows.units[i] as number
    Y += rows.events[i] as number
  }
  return { from, to, M, rate: Y / M }
}

function residual(rows: StrataRows, i: number, rate: number): number {
  return (
    (rows.events[i] as number) - (rows.units[i] as number) * rate - (rows.explained ? (rows.explained[i] as number) : 0)
  )
}

/** Row standard deviation up to a constant: √(m(1−m/M)(1+(m−1)ρ)). */
function rowScale(m: number, M: number, correlation: number): number {
  return Math.sqrt(m * (1 - m / M) * (1 + (m - 1) * correlation))
}

/**
 * T = Σ a′r′, its variance V and third moment when the r of a stratum are dealt out to its rows at random.
 * Third moment of a linear permutation statistic: Σa′³·Σr′³·n/((n−1)(n−2)) for n rows (0 for two).
 */
function moments(rows: StrataRows, correlation: number): { T: number; V: number; third: number } {
  let T = 0
  let V = 0
  let third = 0
  for (let g = 0; g < rows.strata; g += 1) {
    if (!isInformative(rows, g)) continue
    const { from, to, M, rate } = stratum(rows, g)
    const n = to - from
    let aSum = 0
    let rSum = 0
    for (let i = from; i < to; i += 1) {
      const s = rowScale(rows.units[i] as number, M, correlation)
      rSum += residual(rows, i, rate) / s
      if (rows.exposed[i] === 1) aSum += s
    }
    let ar = 0
    let a2 = 0
    let r2 = 0
    let a3 = 0
    let r3 = 0
    for (let i = from; i < to; i += 1) {
      const s = rowScale(rows.units[i] as number, M, correlation)
      const a = (rows.exposed[i] === 1 ? s : 0) - aSum / n
      const r = residual(rows, i, rate) / s - rSum / n
      ar += a * r
      a2 += a * a
      r2 += r * r
      a3 += a * a * a
      r3 += r * r * r
    }
    T += ar
    V += (a2 * r2) / (n - 1)
    if (n > 2) third += (a3 * r3 * n) / ((n - 1) * (n - 2))
  }
  return { T, V, third }
}

/** The dealt-out form of the informative strata: s of the exposed rows first in each stratum, r′ of all rows. */
export interface DealtStrata {
  readonly strata: number
  readonly starts: Int32Array
  /** Number of exposed rows of each stratum; they come first. */
  readonly exposedRows: Int32Array
  /** s of the exposed rows (only the first exposedRows of a stratum are used). */
  readonly scores: Float64Array
  /** Centred residuals r′. */
  readonly residuals: Float64Array
  /** Σ a·r′ as observed. */
  readonly observed: number
}

/** Lays the informative strata out for dealing. Σ a′r′ = Σ a·r′, so only exposed rows need a score. */
export function dealtStrata(rows: StrataRows, correlation: number): DealtStrata {
  const capacity = rows.starts[rows.strata] as number
  const starts = new Int32Array(rows.strata + 1)
  const exposedRows = new Int32Array(rows.strata)
  const scores = new Float64Array(capacity)
  const residuals = new Float64Array(capacity)
  let strata = 0
  let next = 0
  let observed = 0
  for (let g = 0; g < rows.strata; g += 1) {
    if (!isInformative(rows, g)) continue
    const { from, to, M, rate } = stratum(rows, g)
    const start = next
    let sum = 0
    for (const side of [1, 0]) {
      for (let i = from; i < to; i += 1) {
        if (rows.exposed[i] !== side) continue
        const s = rowScale(rows.units[i] as number, M, correlation)
        scores[next] = s
        residuals[next] = residual(rows, i, rate) / s
        sum += residuals[next] as number
        next += 1
      }
      if (side === 1) exposedRows[strata] = next - start
    }
    const mean = sum / (to - from)
    for (let i = start; i < next; i += 1) residuals[i] = (residuals[i] as number) - mean
    for (let i = start; i < start + (exposedRows[strata] as number); i += 1)
      observed += (scores[i] as number) * (residuals[i] as number)
    strata += 1
    starts[strata] = next
  }
  return { strata, starts, exposedRows, scores, residuals, observed }
}
