import type { Counts } from './arguments.js'
import { chartWithSigma, pChart, type PChart } from './pChart.js'

export interface LaneyPChart extends PChart {
  /** How much wider than binomial the points really scatter from one to the next; below 1 when they are more alike. */
  sigmaZ: number | null
}

/** Mean moving range of two normal values in standard deviations (d₂ for n = 2). */
const MEAN_RANGE_OF_TWO = 1.128

/**
 * The p chart whose limits allow for pieces failing together (p′): limits c ± 3·σᵢ·sigmaZ with sigmaZ = the mean
 * |zᵢ − zᵢ₋₁| / 1.128 over points with units (points without are skipped, their neighbours become adjacent).
 *
 * @param input points in the order of time.
 * @returns z stays the plain z of pChart: run signals on this chart use z / sigmaZ. Fewer than two points with units:
 *   sigmaZ and all limits null.
 * @throws RangeError for impossible counts.
 *
 * Laney 2002, Quality Engineering 14(4):531-537.
 */
export function laneyPChart(input: { points: readonly Counts[] }): LaneyPChart {
  const z = pChart(input).z.filter((value) => value !== null)
  const ranges = z.slice(1).map((value, index) => Math.abs(value - (z[index] as number)))
  const sigmaZ =
    ranges.length === 0
      ? null
      : ranges.reduce((sum, range) => sum + range, 0) / ranges.length / MEAN_RANGE_OF_TWO
  return { ...chartWithSigma(input.points, sigmaZ), sigmaZ }
}
