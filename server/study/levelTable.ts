import { clusteredRateFromSums } from '../statistics/index.js'
import type { Panel } from './atRisk.js'
import { codeAt, compareKeys, type FactorView } from './factorView.js'
import type { LevelLine } from './types.js'

/** The largest levels are shown; a list of classes or makers may have thousands. */
const LINES = 100

/**
 * Every level of a factor with its pieces, losses and rate over firings, largest first, at most 100; `wanted` is
 * among them. Rows of one firing must be neighbours in the panel (as they are).
 */
export function levelTable(
  panel: Panel,
  view: FactorView,
  events: Float64Array,
  level: number,
  wanted: readonly string[],
): LevelLine[] {
  const sums = new Map<number, LevelSums>()
  for (let i = 0; i < panel.rows; i += 1) {
    const code = codeAt(view, i)
    if (code === 0) continue
    const lost = events[i] as number
    const units =
      panel.represents !== null && lost === 0
        ? (panel.represents[i] as number)
        : (panel.units[i] as number)
    for (const one of view.sets === null ? [code] : (view.sets[code] as Int32Array)) {
      let mine = sums.get(one)
      if (mine === undefined) {
        mine = new LevelSums()
        sums.set(one, mine)
      }
      mine.add(panel.firing[i] as number, units, lost)
    }
  }
  const lines = [...sums].map(([one, mine]) => mine.line(view.keys(one), level))
  lines.sort((a, b) => b.units - a.units || compareKeys(a.level, b.level))
  return lines.filter((line, index) => index < LINES || compareKeys(line.level, wanted) === 0)
}

/** Sums over firings of one level, a firing closed when the next begins. */
class LevelSums {
  private firing = -1
  private units = 0
  private events = 0
  private readonly sums = {
    G: 0,
    sumUnits: 0,
    sumEvents: 0,
    sumUnits2: 0,
    sumUnitsEvents: 0,
    sumEvents2: 0,
  }

  add(firing: number, units: number, events: number): void {
    if (firing !== this.firing) this.close()
    this.firing = firing
    this.units += units
    this.events += events
  }

  line(keys: readonly string[], level: number): LevelLine {
    this.close()
    const { G, sumUnits, sumEvents } = this.sums
    const { rate, lower, upper } = clusteredRateFromSums({ ...this.sums, level })
    return { level: keys, units: sumUnits, events: sumEvents, firings: G, rate, lower, upper }
  }

  private close(): void {
    const { units: m, events: y, sums } = this
    if (m > 0) {
      sums.G += 1
      sums.sumUnits += m
      sums.sumEvents += y
      sums.sumUnits2 += m * m
      sums.sumUnitsEvents += m * y
      sums.sumEvents2 += y * y
    }
    this.units = 0
    this.events = 0
  }
}
