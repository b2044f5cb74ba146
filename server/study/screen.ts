import { testStrata, type TestScores, type WithinStrata } from '../statistics/strata.js'
import { exactPValue } from './exactPValue.js'
import { gather, type GatherInput } from './gather.js'
import type { LevelTotals } from './levelTotals.js'
import { seedOf } from './randomNumbers.js'
import type { StratumLevels } from './stratumLevels.js'
import type { Comparison, ComparisonKind } from './types.js'

/** What a comparison must have before it is made. */
const LEAST_INFORMATIVE = 8
const LEAST_UNITS = 50
const LEAST_EVENTS = 5
/** A side of one firing can never be told from that firing. */
const LEAST_FIRINGS_A_SIDE = 2
/** The exact p is found where the normal one is below this ... */
const WORTH_DEALING = 0.05
/** ... and could be off: few events, or a skewed statistic. */
const FEW_EVENTS = 100
const SKEWED = 0.1

export interface ScreenInput extends GatherInput {
  fault: string
  totals: LevelTotals
  sums: StratumLevels
  /** Strata with events. */
  touched: Int32Array
  comparison: ComparisonKind
  /** Levels that are compared in a better way already. */
  except?: ReadonlySet<number> | undefined
  level: number
  seed: number
}

interface Candidate {
  level: number
  strata: number[]
  exposedEvents: number
  unexposedEvents: number
}

interface Tested extends Candidate {
  result: WithinStrata
  scores: TestScores | null
  informativeFirings: number
}

/** The comparisons of one fault and factor, and the levels that enough firings held beside others. */
export interface Screened {
  comparisons: Comparison[]
  wellMixed: Set<number>
}

/**
 * Every level of a factor against all other recorded levels, inside strata, for one fault. Work is
 * proportional to the rows of strata with events times the levels met in them, whatever the number of
 * levels of the factor.
 */
export function screenFactor(input: ScreenInput): Screened {
  const leaveOut = input.comparison === 'within-firings' ? 'stratum' : 'row'
  const wellMixed = new Set<number>()
  const tested: Tested[] = []
  for (const candidate of candidatesOf(input)) {
    if (leaveOut === 'stratum' && candidate.strata.length < LEAST_INFORMATIVE) continue
    if (!isEligible(input.totals, candidate)) {
      wellMixed.add(candidate.level)
      continue
    }
    const { result, scores } = testStrata(
      gather(input, candidate.level, candidate.strata),
      input.level,
      leaveOut,
    )
    const informative = informativeFirings(input, candidate, result)
    if (informative < LEAST_INFORMATIVE) continue
    wellMixed.add(candidate.level)
    tested.push({ ...candidate, result, scores, informativeFirings: informative })
  }
  const comparisons = onceEach(input.totals, tested).map((one) => comparisonOf(input, one))
  return { comparisons, wellMixed }
}

/** Levels met in strata with events, each with the strata where it was mixed with others. */
function candidatesOf({ panel, sums, events, touched, except }: ScreenInput): Candidate[] {
  const byLevel = new Map<number, Candidate>()
  for (let t = 0; t < touched.length; t += 1) {
    const g = touched[t] as number
    sums.collect(panel, g, events)
    if (sums.total === 0) continue
    for (let k = 0; k < sums.count; k += 1) {
      const level = sums.levels[k] as number
      if (!sums.isMixed(level) || except?.has(level)) continue
      const exposedEvents = sums.exposed(level)
      const unexposedEvents = sums.unexposed(level)
      if (exposedEvents + unexposedEvents === 0) continue
      let candidate = byLevel.get(level)
      if (candidate === undefined) {
        candidate = { level, strata: [], exposedEvents: 0, unexposedEvents: 0 }
        byLevel.set(level, candidate)
      }
      candidate.strata.push(g)
      candidate.exposedEvents += exposedEvents
      candidate.unexposedEvents += unexposedEvents
    }
  }
  return [...byLevel.values()].sort((a, b) => a.level - b.level)
}

function isEligible(totals: LevelTotals, candidate: Candidate): boolean {
  const { level, exposedEvents, unexposedEvents } = candidate
  return enoughUnits(totals, level) && exposedEvents + unexposedEvents >= LEAST_EVENTS
}

function enoughUnits({ exposedUnits, unexposedUnits }: LevelTotals, level: number): boolean {
  return (
    (exposedUnits[level] as number) >= LEAST_UNITS &&
    (unexposedUnits[level] as number) >= LEAST_UNITS
  )
}

/** Could any level be compared on these rows, whatever the fault? */
export function someEligible(totals: LevelTotals, except: ReadonlySet<number>): boolean {
  for (let level = 1; level < totals.exposedUnits.length; level += 1)
    if (!except.has(level) && enoughUnits(totals, level)) return true
  return false
}

/** Lots: firings are the strata. Firings: the rows of informative strata, if both sides have more than one. */
function informativeFirings(
  { comparison, scratch }: ScreenInput,
  { strata }: Candidate,
  result: WithinStrata,
): number {
  if (comparison === 'within-firings') return result.informativeStrata
  const rows = scratch.starts[strata.length] as number
  let exposed = 0
  for (let i = 0; i < rows; i += 1) exposed += scratch.exposed[i] as number
  return Math.min(exposed, rows - exposed) < LEAST_FIRINGS_A_SIDE ? 0 : rows
}

/**
 * Two levels that divide the same pieces between them are one comparison told from both ends (always so for a factor
 * of two levels): the raised end stays. It is chosen by the ratio, so the choice does not favour small p.
 */
function onceEach(totals: LevelTotals, tested: readonly Tested[]): Tested[] {
  const kept: Tested[] = []
  for (const one of tested) {
    const twin = kept.findIndex((other) => isMirror(totals, one, other))
    if (twin < 0) kept.push(one)
    else if (isRaised(one) && !isRaised(kept[twin] as Tested)) kept[twin] = one
  }
  return kept
}

function isRaised({ result }: Tested): boolean {
  return result.ratio === null || result.ratio > 1
}

function isMirror(totals: LevelTotals, a: Tested, b: Tested): boolean {
  return (
    totals.mixedStrata[a.level] === totals.mixedStrata[b.level] &&
    a.exposedEvents === b.unexposedEvents &&
    a.unexposedEvents === b.exposedEvents &&
    close(totals.exposedUnits[a.level] as number, totals.unexposedUnits[b.level] as number) &&
    close(totals.unexposedUnits[a.level] as number, totals.exposedUnits[b.level] as number) &&
    a.strata.length === b.strata.length &&
    a.strata.every((g, i) => g === b.strata[i])
  )
}

function close(a: number, b: number): boolean {
  return Math.abs(a - b) <= 1e-9 * Math.max(a, b)
}

function comparisonOf(input: ScreenInput, one: Tested): Comparison {
  const { view, totals } = input
  const { level, result } = one
  return {
    fault: input.fault,
    factors: view.factors,
    levels: view.keys(level),
    comparison: input.comparison,
    ratio: result.ratio,
    lower: result.lower,
    upper: result.upper,
    statistic: result.statistic,
    ...pValueOf(input, one),
    direction: isRaised(one) ? 'raised' : 'lowered',
    exposedUnits: totals.exposedUnits[level] as number,
    exposedEvents: one.exposedEvents,
    unexposedUnits: totals.unexposedUnits[level] as number,
    unexposedEvents: one.unexposedEvents,
    mixedStrata: totals.mixedStrata[level] as number,
    informativeFirings: one.informativeFirings,
  }
}

/** The normal p, or the exact one where they could differ and it could matter. */
function pValueOf(input: ScreenInput, one: Tested): Pick<Comparison, 'pValue' | 'method'> {
  const { result, scores } = one
  const pValue = result.pValue ?? 1
  const few = one.exposedEvents + one.unexposedEvents < FEW_EVENTS
  if (result.statistic === null || scores === null || pValue >= WORTH_DEALING)
    return { pValue, method: 'normal' }
  if (!few && Math.abs(scores.skewness) <= SKEWED) return { pValue, method: 'normal' }
  const seed = seedOf(
    input.seed,
    input.fault,
    input.comparison,
    ...input.view.factors,
    ...input.view.keys(one.level),
  )
  return exactPValue(gather(input, one.level, one.strata), scores, result.statistic, seed)
}
