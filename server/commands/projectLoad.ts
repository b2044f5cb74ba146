import type { PackBody, ReportBody } from '../contract/firings.js'
import { NO_COUNTS, addCounts } from '../shared/counts.js'
import type { LossOutcome, LotCounts } from '../shared/counts.js'

export interface ProjectedLoss {
  uid: string
  fault: string
  also: string[]
  outcome: LossOutcome
  pieces: number
  neighbour: boolean
  features: Record<string, string | string[]>
}

export interface ProjectedLot {
  uid: string
  /** From 0; the rest comes last. */
  position: number
  isRest: boolean
  counts: LotCounts
  /** What the pack said of the lot; null for the rest. */
  input: PackBody['lots'][number] | null
  losses: ProjectedLoss[]
}

/** What a load and a report of it come to: lots with their losses, and the sums of the firing. */
export interface ProjectedLoad {
  lots: ProjectedLot[]
  counts: LotCounts
}

const COUNTED_AS = {
  second: 'seconds',
  refire: 'refires',
  waster: 'wasters',
  undecided: 'undecided',
  'turned-away': 'turnedAway',
} as const satisfies Record<LossOutcome, keyof LotCounts>

/**
 * Lots, losses and counts of one firing from what was sent: the load, and the report when there is
 * one. Pure; it trusts its input (the parts may exceed the whole: check with `tooMany`), and what
 * names no lot of the load is left out.
 */
export function projectLoad(pack: PackBody, report: ReportBody | null): ProjectedLoad {
  const described = pack.lots.reduce((sum, lot) => sum + lot.pieces, 0)
  const lots = [
    ...pack.lots.map((input, position) => lotOf(input.uid, position, input.pieces, input)),
    lotOf(pack.rest, pack.lots.length, pack.pieces - described, null),
  ]
  const byUid = new Map(lots.map((lot) => [lot.uid, lot]))
  for (const { lot, ...away } of pack.turnedAway) {
    add(byUid.get(lot), {
      ...away,
      also: [],
      outcome: 'turned-away',
      neighbour: false,
      features: {},
    })
  }
  for (const reported of report?.lots ?? []) {
    const lot = byUid.get(reported.lot)
    if (lot) lot.counts.notLookedAt = reported.notLookedAt
    for (const loss of reported.losses) add(lot, loss)
  }
  return { lots, counts: lots.reduce((sum, lot) => addCounts(sum, lot.counts), { ...NO_COUNTS }) }
}

function lotOf(
  uid: string,
  position: number,
  pieces: number,
  input: ProjectedLot['input'],
): ProjectedLot {
  return {
    uid,
    position,
    isRest: input === null,
    counts: { ...NO_COUNTS, pieces },
    input,
    losses: [],
  }
}

function add(lot: ProjectedLot | undefined, loss: ProjectedLoss): void {
  if (!lot) return
  lot.losses.push(loss)
  lot.counts[COUNTED_AS[loss.outcome]] += loss.pieces
}
