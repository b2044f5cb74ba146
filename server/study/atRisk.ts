import type { FiringKind } from '../shared/kinds.js'
import { NO, REST_PIECE, type StudyTable } from './table.js'
import type { StudyFault } from './types.js'

/**
 * Rows in strata, the shape that the screen works on: lots in firings, or firings in studio × kind. Rows without
 * pieces are not in it.
 */
export interface Panel {
  rows: number
  strata: number
  /** strata + 1 offsets into the rows. */
  starts: Int32Array
  units: Float64Array
  /** Pieces that a row stands for, where that differs from units; null when it nowhere does. */
  represents: Float64Array | null
  /** Firing of every row. */
  firing: Int32Array
}

/** Lots that can show a fault: the rows of a table behind a panel. */
export interface AtRiskLots extends Panel {
  /** Row of the table behind every row of the panel. */
  source: Int32Array
  /** 1 = also pieces turned away count. */
  overOffered: boolean
}

/** Everything that the at-risk rule of a fault asks; faults with the same key share their denominator. */
export function atRiskKey(fault: StudyFault): string {
  return JSON.stringify([
    [...fault.seenIn].sort(),
    fault.needsGlaze,
    fault.needsJoint,
    fault.needsRefire,
    [...fault.forming].sort(),
    fault.seenBeforeFiring,
  ])
}

/**
 * The rows at risk of a fault: kind of firing in seenIn and nothing recorded that rules it out (what is not recorded
 * counts as at risk). Refired lots are the denominator of refire faults and of nothing else. Faults that can be seen before a firing are over
 * pieces offered, the others over pieces fired.
 *
 * The rest of a firing is a stratum of its own.
 */
export function atRiskLots(
  table: StudyTable,
  fault: StudyFault,
  studio: number | null,
): AtRiskLots {
  const { firings } = table
  const pieces = fault.seenBeforeFiring ? table.offered : table.fired
  const source = new Int32Array(table.rows)
  const starts: number[] = [0]
  let rows = 0
  for (let f = 0; f < firings.count; f += 1) {
    if (!fault.seenIn.includes(firings.kind[f] as FiringKind)) continue
    if (studio !== null && firings.studio[f] !== studio) continue
    let part = -1
    for (let row = firings.start[f] as number; row < (firings.start[f + 1] as number); row += 1) {
      if ((pieces[row] as number) <= 0 || !rowAtRisk(table, fault, row)) continue
      if (part >= 0 && part !== table.part[row]) starts.push(rows)
      part = table.part[row] as number
      source[rows] = row
      rows += 1
    }
    if (part >= 0) starts.push(rows)
  }
  return panelOf(
    table,
    source.slice(0, rows),
    Int32Array.from(starts),
    pieces,
    fault.seenBeforeFiring,
  )
}

function panelOf(
  table: StudyTable,
  source: Int32Array,
  starts: Int32Array,
  pieces: Int32Array,
  overOffered: boolean,
): AtRiskLots {
  const units = new Float64Array(source.length)
  const firing = new Int32Array(source.length)
  const represents = table.standsFor === null ? null : new Float64Array(source.length)
  let f = 0
  for (let i = 0; i < source.length; i += 1) {
    const row = source[i] as number
    while (row >= (table.firings.start[f + 1] as number)) f += 1
    firing[i] = f
    units[i] = pieces[row] as number
    if (represents !== null) represents[i] = (units[i] as number) * (table.standsFor?.[row] ?? 1)
  }
  return {
    rows: source.length,
    strata: starts.length - 1,
    starts,
    units,
    represents,
    firing,
    source,
    overOffered,
  }
}

function rowAtRisk(table: StudyTable, fault: StudyFault, row: number): boolean {
  const refired = (table.refireCount[row] as number) > 0
  return (fault.needsRefire || !refired) && !lotRuledOut(table, fault, row)
}

/** Something recorded of the lot rules the fault out. */
function lotRuledOut(table: StudyTable, fault: StudyFault, row: number): boolean {
  if (fault.needsRefire && table.refireCount[row] === 0) return true
  if (fault.needsGlaze && table.glaze[row] === NO) return true
  if (fault.needsJoint && table.joint[row] === NO) return true
  const forming = table.forming[row] as number
  return (
    forming > 0 &&
    fault.forming.length > 0 &&
    !fault.forming.includes(table.formings[forming - 1] as string)
  )
}

/** The kind of firing or something recorded of the lot rules the fault out: a loss reported there is to be checked. */
export function isRuledOut(
  table: StudyTable,
  fault: StudyFault,
  row: number,
  firing: number,
): boolean {
  return (
    !fault.seenIn.includes(table.firings.kind[firing] as FiringKind) ||
    lotRuledOut(table, fault, row)
  )
}

/** Firings as rows and studio × kind as strata; pieces of lots and of the rest as a whole. */
export function atRiskFirings(table: StudyTable, lots: AtRiskLots): Panel {
  const { firings } = table
  const units = new Float64Array(firings.count)
  for (let i = 0; i < lots.rows; i += 1) {
    if (table.part[lots.source[i] as number] === REST_PIECE) continue
    const f = lots.firing[i] as number
    units[f] = (units[f] as number) + (lots.units[i] as number)
  }
  return firingPanel(table, units)
}

/** A panel of the firings that have units, by studio and kind. */
export function firingPanel(table: StudyTable, units: Float64Array): Panel {
  const { byGroup, groups } = table.firings
  const firing = new Int32Array(byGroup.length)
  const starts: number[] = [0]
  let rows = 0
  for (let h = 0; h + 1 < groups.length; h += 1) {
    const before = rows
    for (let place = groups[h] as number; place < (groups[h + 1] as number); place += 1) {
      const f = byGroup[place] as number
      if ((units[f] as number) <= 0) continue
      firing[rows] = f
      rows += 1
    }
    if (rows > before) starts.push(rows)
  }
  const kept = firing.slice(0, rows)
  const mine = new Float64Array(rows)
  for (let i = 0; i < rows; i += 1) mine[i] = units[kept[i] as number] as number
  return {
    rows,
    strata: starts.length - 1,
    starts: Int32Array.from(starts),
    units: mine,
    represents: null,
    firing: kept,
  }
}
