import type { Panel } from './atRisk.js'
import { codeAt, type FactorView } from './factorView.js'
import type { StratumLevels } from './stratumLevels.js'

/** For every level of a factor, over the strata where it was mixed with others; index = level, from 1. */
export interface LevelTotals {
  mixedStrata: Int32Array
  exposedUnits: Float64Array
  unexposedUnits: Float64Array
}

/**
 * Pieces on both sides of every level, over all mixed strata, with losses or not. The same for all faults with the
 * same denominator, so it is counted once for them. One pass over the rows, whatever the number of levels.
 */
export function levelTotals(panel: Panel, view: FactorView, sums: StratumLevels): LevelTotals {
  const mixedStrata = new Int32Array(view.levels + 1)
  const exposedUnits = new Float64Array(view.levels + 1)
  const unexposedUnits = new Float64Array(view.levels + 1)
  const counted = panel.represents ?? panel.units
  for (let g = 0; g < panel.strata; g += 1) {
    sums.collect(panel, g, counted)
    for (let k = 0; k < sums.count; k += 1) {
      const level = sums.levels[k] as number
      if (!sums.isMixed(level)) continue
      mixedStrata[level] = (mixedStrata[level] as number) + 1
      exposedUnits[level] = (exposedUnits[level] as number) + sums.exposed(level)
      unexposedUnits[level] = (unexposedUnits[level] as number) + sums.unexposed(level)
    }
  }
  return { mixedStrata, exposedUnits, unexposedUnits }
}

/** Share of the pieces for which the factor is recorded, of those that it applies to. */
export function coverage(
  panel: Panel,
  view: FactorView,
  applies: (row: number) => boolean,
): number {
  let recorded = 0
  let all = 0
  for (let i = 0; i < panel.rows; i += 1) {
    if (!applies(i)) continue
    all += panel.units[i] as number
    if (codeAt(view, i) !== 0) recorded += panel.units[i] as number
  }
  return all > 0 ? recorded / all : 0
}
