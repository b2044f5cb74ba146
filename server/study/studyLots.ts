import { benjaminiHochberg } from '../statistics/index.js'
import { atRiskKey, isRuledOut } from './atRisk.js'
import { Denominator } from './denominator.js'
import { layEvents, lossesByFault, type FaultLosses } from './faultEvents.js'
import { groupBy } from './groupBy.js'
import { compareText } from './levelColumn.js'
import { makeScratch } from './gather.js'
import { describe, screenFault, type FaultScreen } from './screenFault.js'
import { LOT, REST_PIECE, type StudyTable } from './table.js'
import type { Comparison, Finding, StudyFault, StudyOptions, StudyResult } from './types.js'

/**
 * The study's screen: which faults go with which levels, like compared with like.
 *
 * Every fault node (a loss counts for its fault, its also-faults and all nodes above) × factor × level against all
 * other recorded levels, where ≥ 8 firings can tell, with ≥ 50 pieces a side and ≥ 5 losses: withinStrataTest with an
 * exact p where the normal one may be off, then benjaminiHochberg over all comparisons of the scope. A node that holds
 * nothing but the losses of one node below it is the same question and is not asked twice.
 *
 * @param table lots of the window, from StudyTableBuilder. Not changed.
 * @returns findings with q up to `keep`, smallest first. The same table and options give the same result.
 *
 * Work is linear in lots times the faults seen. Steps 1 to 3 of the study; the fields for what follows are null.
 */
export function studyLots(table: StudyTable, options: StudyOptions): StudyResult {
  const scope = scopeOf(table, options.studio)
  const losses = lossesByFault(table, options.faults)
  const asked = askedFaults(options.faults, losses)
  const every: Comparison[] = []
  const notAtRisk: StudyResult['notAtRisk'] = []
  eachFault(table, options, losses, asked, scope, (screen) => {
    if (screen.laid.notAtRisk > 0)
      notAtRisk.push({ fault: screen.fault.id, pieces: screen.laid.notAtRisk })
    every.push(...screenFault(screen))
  })
  const { qValues } = benjaminiHochberg({ pValues: every.map((one) => one.pValue) })
  const keep = options.keep ?? 0.1
  const found = every
    .map((one, i) => ({ one, qValue: qValues[i] as number }))
    .filter(({ qValue }) => qValue <= keep)
  const findings = withTables(table, options, losses, asked, scope, found)
  notAtRisk.sort((a, b) => compareText(a.fault, b.fault))
  return {
    comparisons: every.length,
    findings: findings.sort(bySureness),
    ...sizeOf(table, scope),
    notAtRisk,
    ...(options.everyComparison ? { every } : {}),
  }
}

/** Index of the studio; null = all; −1 = a studio without lots here. */
function scopeOf(table: StudyTable, studio: string | undefined): number | null {
  return studio === undefined ? null : table.firings.studios.indexOf(studio)
}

/** Faults with losses, without those that hold the losses of a single child and no others. */
function askedFaults(faults: readonly StudyFault[], losses: FaultLosses): number[] {
  const size = (k: number): number => (losses.start[k + 1] as number) - (losses.start[k] as number)
  const index = new Map(faults.map((fault, k) => [fault.id, k]))
  const asked = new Set(faults.keys())
  faults.forEach((fault, k) => {
    const parent = fault.parent === null ? undefined : index.get(fault.parent)
    if (size(k) === 0) asked.delete(k)
    else if (parent !== undefined && size(parent) === size(k)) asked.delete(parent)
  })
  return [...asked]
}

/** Lays the events of each fault in turn, faults with the same denominator one after another. */
function eachFault(
  table: StudyTable,
  options: StudyOptions,
  losses: FaultLosses,
  asked: readonly number[],
  scope: number | null,
  visit: (screen: FaultScreen) => void,
): void {
  const scratch = makeScratch(Math.max(table.rows, table.firings.count))
  const firingOf = firingOfRows(table)
  const groups = groupBy(asked, (k) => atRiskKey(options.faults[k] as StudyFault))
  for (const group of groups.values()) {
    const denominator = new Denominator(
      table,
      options.faults[group[0] as number] as StudyFault,
      scope,
    )
    const { lots, placeOf, stratumOf } = denominator
    const events = new Float64Array(lots.rows)
    for (const k of group) {
      const fault = options.faults[k] as StudyFault
      const isOut = (row: number): boolean => {
        const firing = firingOf[row] as number
        return (
          (scope === null || table.firings.studio[firing] === scope) &&
          isRuledOut(table, fault, row, firing)
        )
      }
      events.fill(0)
      const laid = layEvents(table, losses, k, lots, placeOf, stratumOf, events, isOut)
      visit({
        table,
        fault,
        denominator,
        laid,
        level: options.level ?? 0.95,
        seed: options.seed ?? 1,
        scratch,
      })
    }
  }
}

function firingOfRows(table: StudyTable): Int32Array {
  const firingOf = new Int32Array(table.rows)
  for (let f = 0; f < table.firings.count; f += 1)
    firingOf.fill(f, table.firings.start[f], table.firings.start[f + 1])
  return firingOf
}

/** A second pass over the faults with findings draws up their tables: events are scratch and not kept. */
function withTables(
  table: StudyTable,
  options: StudyOptions,
  losses: FaultLosses,
  asked: readonly number[],
  scope: number | null,
  found: readonly { one: Comparison; qValue: number }[],
): Finding[] {
  const byFault = groupBy(found, ({ one }) => one.fault)
  const again = asked.filter((k) => byFault.has((options.faults[k] as StudyFault).id))
  const findings: Finding[] = []
  eachFault(table, options, losses, again, scope, (screen) => {
    for (const { one, qValue } of byFault.get(screen.fault.id) ?? []) {
      const seams = { verdict: null, adjusted: null, worth: null, memory: null }
      findings.push({ ...one, qValue, ...describe(screen, one), ...seams })
    }
  })
  return findings
}

function bySureness(a: Finding, b: Finding): number {
  return (
    a.qValue - b.qValue ||
    a.pValue - b.pValue ||
    Math.abs(b.statistic ?? 0) - Math.abs(a.statistic ?? 0) ||
    compareText(a.fault, b.fault) ||
    compareText(a.factors.join(), b.factors.join()) ||
    compareText(a.levels.join(), b.levels.join())
  )
}

function sizeOf(
  table: StudyTable,
  scope: number | null,
): Pick<StudyResult, 'firings' | 'lots' | 'pieces'> {
  let firings = 0
  let lots = 0
  let pieces = 0
  for (let f = 0; f < table.firings.count; f += 1) {
    if (scope !== null && table.firings.studio[f] !== scope) continue
    firings += 1
    for (
      let row = table.firings.start[f] as number;
      row < (table.firings.start[f + 1] as number);
      row += 1
    ) {
      if (table.part[row] === LOT) lots += 1
      if (table.part[row] !== REST_PIECE) pieces += Math.max(0, table.fired[row] as number)
    }
  }
  return { firings, lots, pieces }
}
