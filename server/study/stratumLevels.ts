import type { Panel } from './atRisk.js'
import { codeAt, exposure, type FactorView } from './factorView.js'

/**
 * Sums of one stratum by level: how many rows have the level, and how much of a value lies with it. One object a
 * view, reused for every stratum; only the levels that a stratum holds are touched, so a factor of thousands of
 * levels costs no more than one of five.
 */
export class StratumLevels {
  /** Recorded rows of the stratum, and their value. */
  rows = 0
  total = 0
  /** Levels met, in order of appearance: levels[0] … levels[count − 1]. */
  readonly levels: Int32Array
  count = 0
  /** By level: rows that have it, those of them that are on neither side, and the value of both sides. */
  private readonly having: Int32Array
  private readonly neither: Int32Array
  private readonly valueExposed: Float64Array
  private readonly valueNeither: Float64Array

  constructor(private readonly view: FactorView) {
    const size = view.levels + 1
    this.levels = new Int32Array(size)
    this.having = new Int32Array(size)
    this.neither = new Int32Array(size)
    this.valueExposed = new Float64Array(size)
    this.valueNeither = new Float64Array(size)
  }

  /** Sums up stratum g; values by row of the panel. */
  collect(panel: Panel, g: number, values: Float64Array): void {
    const { view, levels, having } = this
    for (let k = 0; k < this.count; k += 1) having[levels[k] as number] = 0
    this.count = 0
    this.rows = 0
    this.total = 0
    for (let i = panel.starts[g] as number; i < (panel.starts[g + 1] as number); i += 1) {
      const code = codeAt(view, i)
      if (code === 0) continue
      const value = values[i] as number
      this.rows += 1
      this.total += value
      if (view.sets === null) {
        this.add(code, value, true)
        continue
      }
      const set = view.sets[code] as Int32Array
      for (let k = 0; k < set.length; k += 1) {
        const level = set[k] as number
        this.add(level, value, view.all === null || exposure(view, code, level) === 1)
      }
    }
  }

  /** Some rows have the level, and some have others alone. */
  isMixed(level: number): boolean {
    const having = this.having[level] as number
    return having < this.rows && having > (this.neither[level] as number)
  }

  /** Value of the rows with the level. */
  exposed(level: number): number {
    return this.valueExposed[level] as number
  }

  /** Value of the rows without it. */
  unexposed(level: number): number {
    return this.total - (this.valueExposed[level] as number) - (this.valueNeither[level] as number)
  }

  private add(level: number, value: number, isExposed: boolean): void {
    if (this.having[level] === 0) {
      this.levels[this.count] = level
      this.count += 1
      this.neither[level] = 0
      this.valueExposed[level] = 0
      this.valueNeither[level] = 0
    }
    this.having[level] = (this.having[level] as number) + 1
    if (isExposed) this.valueExposed[level] = (this.valueExposed[level] as number) + value
    else {
      this.neither[level] = (this.neither[level] as number) + 1
      this.valueNeither[level] = (this.valueNeither[level] as number) + value
    }
  }
}
