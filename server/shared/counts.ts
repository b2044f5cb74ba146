/**
 * Outcomes of pieces and the arithmetic of their counts. One place for what is over what:
 * waste = wasters; loss = wasters + refires; blemish = seconds. Pieces not looked at are in no
 * denominator; an undecided piece has been looked at and is not yet lost.
 */
export const FAILED_OUTCOMES = ['second', 'refire', 'waster', 'undecided'] as const
export type FailedOutcome = (typeof FAILED_OUTCOMES)[number]

/** What a loss row can say of its pieces: a failed outcome, or turned away before the firing. */
export const LOSS_OUTCOMES = [...FAILED_OUTCOMES, 'turned-away'] as const
export type LossOutcome = (typeof LOSS_OUTCOMES)[number]

export const MEASURES = ['loss', 'waste', 'blemish'] as const
export type Measure = (typeof MEASURES)[number]

/** Counts of one lot (or of a whole firing): whole numbers of pieces, `pieces` being those offered. */
export interface LotCounts {
  pieces: number
  turnedAway: number
  seconds: number
  refires: number
  wasters: number
  undecided: number
  notLookedAt: number
}

export const NO_COUNTS: Readonly<LotCounts> = {
  pieces: 0,
  turnedAway: 0,
  seconds: 0,
  refires: 0,
  wasters: 0,
  undecided: 0,
  notLookedAt: 0,
}

/** Sum of counts, field by field. */
export function addCounts(a: LotCounts, b: LotCounts): LotCounts {
  return {
    pieces: a.pieces + b.pieces,
    turnedAway: a.turnedAway + b.turnedAway,
    seconds: a.seconds + b.seconds,
    refires: a.refires + b.refires,
    wasters: a.wasters + b.wasters,
    undecided: a.undecided + b.undecided,
    notLookedAt: a.notLookedAt + b.notLookedAt,
  }
}

/** Pieces that went into the kiln. */
export function fired(counts: LotCounts): number {
  return counts.pieces - counts.turnedAway
}

/** Firsts: fired, looked at, and nothing wrong. */
export function firsts(counts: LotCounts): number {
  return (
    fired(counts) -
    counts.seconds -
    counts.refires -
    counts.wasters -
    counts.undecided -
    counts.notLookedAt
  )
}

/** Pieces of a lot that a rate is over. Totals are over pieces fired and looked at. */
export function piecesFor(counts: LotCounts, over: 'offered' | 'fired' = 'fired'): number {
  return (over === 'offered' ? counts.pieces : fired(counts)) - counts.notLookedAt
}

/** Events of a measure among the fired pieces of a lot. */
export function eventsFor(counts: LotCounts, measure: Measure): number {
  if (measure === 'waste') return counts.wasters
  if (measure === 'blemish') return counts.seconds
  return counts.wasters + counts.refires
}

/** Does a piece with this outcome count as an event of the measure? Turned-away pieces are lost before firing. */
export function isEvent(outcome: LossOutcome, measure: Measure): boolean {
  if (measure === 'blemish') return outcome === 'second'
  if (measure === 'waste') return outcome === 'waster' || outcome === 'turned-away'
  return outcome === 'waster' || outcome === 'refire' || outcome === 'turned-away'
}

/** How many more parts than pieces there are; 0 when the counts are possible. */
export function tooMany(counts: LotCounts): number {
  const parts =
    counts.turnedAway +
    counts.seconds +
    counts.refires +
    counts.wasters +
    counts.undecided +
    counts.notLookedAt
  return Math.max(0, parts - counts.pieces)
}
