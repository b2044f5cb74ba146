import type { Denominator, Viewed } from './denominator.js'
import type { FaultEvents } from './faultEvents.js'
import type { Scratch } from './gather.js'
import { coverage } from './levelTotals.js'
import { levelTable } from './levelTable.js'
import { expectedByFiring } from './mix.js'
import { screenFactor, someEligible } from './screen.js'
import { REST_PIECE, type FactorColumn, type StudyTable } from './table.js'
import type { Comparison, LevelLine, StudyFault } from './types.js'

/** Factors whose pairs are screened for faults of glaze fit: the glaze and the clay it sits on. */
const PAIR = ['glaze', 'clay_body'] as const

/** One fault with its events laid on the rows that can show it. */
export interface FaultScreen {
  table: StudyTable
  fault: StudyFault
  denominator: Denominator
  laid: FaultEvents
  level: number
  seed: number
  scratch: Scratch
}

/**
 * All comparisons of one fault: lot factors inside firings (levels hardly ever mixed: between firings), glaze × clay
 * body pairs for faults of glaze fit, and firing factors between firings of the same studio and kind after what the
 * mix of lots explains.
 */
export function screenFault(screen: FaultScreen): Comparison[] {
  const { table, denominator } = screen
  const lots = table.factors.flatMap((column) => lotFactor(screen, denominator.onLots(column)))
  const pair = screen.fault.glazeFit ? pairColumns(table) : null
  const pairs = pair === null ? [] : lotFactor(screen, denominator.pairs(pair[0], pair[1]))
  return [...lots, ...pairs, ...firingFactors(screen)]
}

/** Coverage and the table by level of one comparison of the fault. */
export function describe(
  screen: FaultScreen,
  comparison: Comparison,
): { coverage: number; table: LevelLine[] } {
  const { table, denominator, laid, level } = screen
  const columns = comparison.factors.map((id) =>
    table.factors.find((column) => column.factor.id === id),
  )
  const [first, second] = columns
  if (first) {
    const on = second ? denominator.pairs(first, second) : denominator.onLots(first)
    return {
      coverage: denominator.lotCoverage(second ? [first, second] : [first], on.view),
      table: levelTable(on.panel, on.view, laid.events, level, comparison.levels),
    }
  }
  const column = table.firings.factors.find(
    ({ factor }) => factor.id === comparison.factors[0],
  ) as FactorColumn
  const { panel, view } = denominator.onFirings(column)
  const events = byFiring(screen)
  return {
    coverage: coverage(panel, view, () => true),
    table: levelTable(
      panel,
      view,
      Float64Array.from(panel.firing, (f) => events[f] as number),
      level,
      comparison.levels,
    ),
  }
}

function pairColumns(table: StudyTable): [FactorColumn, FactorColumn] | null {
  const [first, second] = PAIR.map((id) => table.factors.find((column) => column.factor.id === id))
  return first && second ? [first, second] : null
}

function lotFactor(screen: FaultScreen, on: Viewed): Comparison[] {
  if (on.view.levels < 2) return []
  const { laid } = screen
  const within = screenFactor({
    ...common(screen),
    ...on,
    events: laid.events,
    touched: laid.strata,
    comparison: 'within-firings',
  })
  return [...within.comparisons, ...lotFactorBetween(screen, on, within.wellMixed)]
}

/**
 * Levels that too few firings held beside others: firings that held nothing else against firings
 * without.
 */
function lotFactorBetween(
  screen: FaultScreen,
  on: Viewed,
  except: ReadonlySet<number>,
): Comparison[] {
  const whole = screen.denominator.byFirings(on.view)
  // Most levels are mixed well: then there is nothing left to compare and no events need be added up.
  if (!someEligible(whole.totals, except)) return []
  const events = whole.events(screen.laid.events)
  const touched = strataWith(whole.panel.starts, events)
  const comparison = 'between-firings'
  return screenFactor({ ...common(screen), ...whole, events, touched, comparison, except })
    .comparisons
}

function firingFactors(screen: FaultScreen): Comparison[] {
  const { table, denominator, laid } = screen
  const columns = table.firings.factors.filter((column) => column.levels.length > 1)
  if (columns.length === 0) return []
  const { panel } = denominator.onFirings(columns[0] as FactorColumn)
  const lost = byFiring(screen)
  const expectation = expectedByFiring(table, denominator.lots, laid.events, table.factors)
  const events = Float64Array.from(panel.firing, (f) => lost[f] as number)
  const expected = Float64Array.from(panel.firing, (f) => expectation[f] as number)
  const touched = strataWith(panel.starts, events)
  return columns.flatMap(
    (column) =>
      screenFactor({
        ...common(screen),
        ...denominator.onFirings(column),
        events,
        expected,
        touched,
        comparison: 'between-firings',
      }).comparisons,
  )
}

function common(screen: FaultScreen) {
  return { fault: screen.fault.id, level: screen.level, seed: screen.seed, scratch: screen.scratch }
}

/** Events by firing of the table; a described piece of the rest is already in the rest. */
function byFiring({ table, denominator: { lots }, laid }: FaultScreen): Float64Array {
  const lost = new Float64Array(table.firings.count)
  for (let i = 0; i < lots.rows; i += 1) {
    if (table.part[lots.source[i] as number] === REST_PIECE) continue
    const f = lots.firing[i] as number
    lost[f] = (lost[f] as number) + (laid.events[i] as number)
  }
  return lost
}

function strataWith(starts: Int32Array, events: Float64Array): Int32Array {
  const strata: number[] = []
  for (let g = 0; g + 1 < starts.length; g += 1) {
    for (let i = starts[g] as number; i < (starts[g + 1] as number); i += 1) {
      if ((events[i] as number) === 0) continue
      strata.push(g)
      break
    }
  }
  return Int32Array.from(strata)
}
