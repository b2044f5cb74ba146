import { residual, rowScale, stratumSums, type StrataRows } from './strata.js'

/** The informative strata laid out for dealing: exposed rows first in each stratum. */
export interface DealtStrata {
  readonly strata: number
  readonly starts: Int32Array
  /** Number of exposed rows of each stratum. */
  readonly exposedRows: Int32Array
  /** s of the exposed rows (others unused). */
  readonly scores: Float64Array
  /** Centred residuals r′; dealing moves them about inside a stratum. */
  readonly residuals: Float64Array
  /** Σ a·r′ as observed. */
  readonly observed: number
}

/** Lays the informative strata out. Σ a′r′ = Σ a·r′, so only exposed rows need a score. */
export function dealtStrata(rows: StrataRows, correlation: number): DealtStrata {
  const sums = stratumSums(rows)
  const capacity = rows.starts[rows.strata] as number
  const starts = new Int32Array(sums.informative + 1)
  const exposedRows = new Int32Array(sums.informative)
  const scores = new Float64Array(capacity)
  const residuals = new Float64Array(capacity)
  let strata = 0
  let next = 0
  let observed = 0
  for (let g = 0; g < rows.strata; g += 1) {
    const M = sums.M[g] as number
    if (M === 0) continue
    const start = next
    const last = start + (rows.starts[g + 1] as number) - (rows.starts[g] as number)
    let other = last
    let sum = 0
    for (let i = rows.starts[g] as number; i < (rows.starts[g + 1] as number); i += 1) {
      const s = rowScale(rows.units[i] as number, M, correlation)
      const r = residual(rows, i, (sums.Y[g] as number) / M) / s
      sum += r
      if (rows.exposed[i] === 1) {
        scores[next] = s
        residuals[next] = r
        next += 1
      } else {
        other -= 1
        residuals[other] = r
      }
    }
    exposedRows[strata] = next - start
    const mean = sum / (last - start)
    for (let i = start; i < last; i += 1) residuals[i] = (residuals[i] as number) - mean
    for (let i = start; i < next; i += 1)
      observed += (scores[i] as number) * (residuals[i] as number)
    next = last
    strata += 1
    starts[strata] = next
  }
  return { strata, starts, exposedRows, scores, residuals, observed }
}

/**
 * One dealing: the exposed rows of every stratum get residuals drawn without replacement.
 *
 * @param random numbers in [0, 1).
 * @returns T of this dealing; the residuals stay where they fell, which is as good a start for the next.
 */
export function dealOnce(dealt: DealtStrata, random: () => number): number {
  const { starts, exposedRows, scores, residuals } = dealt
  let T = 0
  for (let g = 0; g < dealt.strata; g += 1) {
    const start = starts[g] as number
    const end = starts[g + 1] as number
    const last = start + (exposedRows[g] as number)
    for (let i = start; i < last; i += 1) {
      const j = i + Math.floor(random() * (end - i))
      const drawn = residuals[j] as number
      residuals[j] = residuals[i] as number
      residuals[i] = drawn
      T += (scores[i] as number) * drawn
    }
  }
  return T
}
