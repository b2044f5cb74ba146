/**
 * A report while it is being made at the kiln: pure. A lot of up to 60 pieces is a board of cells, each
 * marked or sound; a larger one is counted fault by fault. Never more marked than there were.
 */
import type {
  FiringDetail,
  LossView,
  LotView,
  ReportBody,
} from '../../../server/contract/firings.js'
import type { FailedOutcome, LotCounts } from '../../../server/shared/counts.js'
import { addCounts, FAILED_OUTCOMES, fired, NO_COUNTS } from '../../../server/shared/counts.js'
import type { BoardCell } from '../../../server/shared/wareBoard.js'
import { MOST_CELLS } from '../../../server/shared/wareBoard.js'
import { faultNode } from '../../../server/shared/faults/tree.js'

/** What is wrong with a piece. */
export interface Mark {
  fault: string
  outcome: FailedOutcome
  also: string[]
  neighbour: boolean
  features: LossView['features']
}

/** A marked piece at its place on the board, or so many pieces of a counted lot (`at` null). */
export interface Entry {
  mark: Mark
  at: number | null
  pieces: number
}

export interface LotDraft {
  lot: string
  /** Pieces that went into the kiln. */
  fired: number
  /** Something was said of this lot: sound, marked, or not looked at. */
  said: boolean
  notLookedAt: number
  entries: Entry[]
}

export type WholeLoadCause = NonNullable<ReportBody['wholeLoadFailed']>

export interface ReportDraft {
  /** 1: form of this draft in storage. */
  v: 1
  kind: 'report' | 'amend'
  /** Revision that it is written on. */
  base: number
  /** uid of the revision to be; kept with the draft, so that sending it twice makes one. */
  revision: string
  /** ISO instant of the first time it was sent. */
  deviceTime: string | null
  lots: LotDraft[]
  wholeLoadFailed: WholeLoadCause | null
  openingTemperatureC: number | null
  openedAt: string | null
  note: string
  reason: string
  /** uids of losses by what they say, so that a repeated body is the same body. */
  lossUids: Record<string, string>
}

/** Lots above this are counted instead of touched. */
export const isCounted = (lot: Pick<LotDraft, 'fired'>): boolean => lot.fired > MOST_CELLS

export const markOf = (fault: string, outcome: FailedOutcome, neighbour = false): Mark => ({
  fault,
  outcome,
  also: [],
  neighbour,
  features: {},
})

/** Two marks that say the same of a piece. */
export function sameMark(a: Mark, b: Mark): boolean {
  return markKey(a) === markKey(b)
}

function markKey({ fault, outcome, also, neighbour, features }: Mark): string {
  return [
    fault,
    outcome,
    neighbour ? 'neighbour' : '',
    [...also].sort().join('+'),
    JSON.stringify(features),
  ].join('|')
}

export const marked = (lot: LotDraft): number =>
  lot.entries.reduce((sum, entry) => sum + entry.pieces, 0)

/** Pieces of which nothing is said yet or which are sound. */
export const soundIn = (lot: LotDraft): number =>
  Math.max(0, lot.fired - marked(lot) - lot.notLookedAt)

/** A new report of a packed firing, or an amendment that starts from what was reported. */
export function draftOf(firing: FiringDetail, revision: string): ReportDraft {
  const reported = firing.status === 'reported'
  return {
    v: 1,
    kind: reported ? 'amend' : 'report',
    base: firing.revision,
    revision,
    deviceTime: null,
    lots: firing.lots.map((lot) => lotDraftOf(lot, reported)),
    wholeLoadFailed: firing.wholeLoadFailed as WholeLoadCause | null,
    openingTemperatureC: firing.openingTemperatureC,
    openedAt: firing.openedAt,
    note: reported ? (firing.note ?? '') : '',
    reason: '',
    lossUids: Object.fromEntries(
      firing.lots.flatMap((lot) =>
        failuresOf(lot).map((loss) => [`${lot.uid}|${markKey(markOfLoss(loss))}`, loss.uid]),
      ),
    ),
  }
}

function lotDraftOf(lot: LotView, reported: boolean): LotDraft {
  const groups = failuresOf(lot).map((loss) => ({ mark: markOfLoss(loss), pieces: loss.pieces }))
  const empty: LotDraft = {
    lot: lot.uid,
    fired: fired(lot),
    said: reported,
    notLookedAt: lot.notLookedAt,
    entries: [],
  }
  return { ...empty, entries: place(empty, groups) }
}

const failuresOf = (lot: LotView): LossView[] =>
  lot.losses.filter((loss) => loss.outcome !== 'turned-away')

const markOfLoss = (loss: LossView): Mark => ({
  fault: loss.fault,
  outcome: loss.outcome as FailedOutcome,
  also: loss.also,
  neighbour: loss.neighbour,
  features: loss.features,
})

/** Counted groups as entries: on a board after the sound pieces, in the order of the outcomes. */
function place(lot: LotDraft, groups: { mark: Mark; pieces: number }[]): Entry[] {
  if (isCounted(lot)) return groups.map(({ mark, pieces }) => ({ mark, at: null, pieces }))
  const inOrder = FAILED_OUTCOMES.flatMap((outcome) =>
    groups.filter(({ mark }) => mark.outcome === outcome),
  )
  const cells = inOrder
    .flatMap(({ mark, pieces }) => Array.from({ length: pieces }, () => mark))
    .slice(0, lot.fired)
  const from = Math.max(0, lot.fired - lot.notLookedAt - cells.length)
  return cells.map((mark, index) => ({ mark, at: from + index, pieces: 1 }))
}

/** The cells of a lot's board: marked ones at their places, those not looked at among the last of the others. */
export function cellsOf(lot: LotDraft): (BoardCell & { note?: string })[] {
  const marks = new Map(lot.entries.map((entry) => [entry.at, entry.mark]))
  let hidden = lot.notLookedAt
  const cells: (BoardCell & { note?: string })[] = []
  for (let at = lot.fired - 1; at >= 0; at -= 1) {
    const mark = marks.get(at)
    if (mark) cells.push({ kind: mark.outcome, note: markInWords(mark) })
    else if (hidden > 0) {
      hidden -= 1
      cells.push({ kind: 'notLookedAt' })
    } else cells.push({ kind: 'first' })
  }
  return cells.reverse()
}

/** "S-crack, also crazing, a neighbour did it". */
export function markInWords(mark: Mark): string {
  const name = (id: string): string => faultNode(id)?.short ?? id
  const also = mark.also.map(name).join(', ').toLowerCase()
  return [name(mark.fault), also && `also ${also}`, mark.neighbour && 'a neighbour did it']
    .filter(Boolean)
    .join(', ')
}

/** A touch of a cell: it takes the mark in hand; touched again with the same, it is sound again. */
export function touch(lot: LotDraft, at: number, mark: Mark): LotDraft {
  const before = lot.entries.find((entry) => entry.at === at)
  const others = lot.entries.filter((entry) => entry.at !== at)
  if (before && sameMark(before.mark, mark)) return { ...lot, entries: others, said: true }
  return fit({ ...lot, entries: [...others, { mark, at, pieces: 1 }], said: true })
}

/** Gives the piece at a place another mark, or (null) makes it sound. */
export function setMark(lot: LotDraft, at: number, mark: Mark | null): LotDraft {
  const others = lot.entries.filter((entry) => entry.at !== at)
  return fit({ ...lot, entries: mark ? [...others, { mark, at, pieces: 1 }] : others, said: true })
}

/** So many more (or fewer) pieces of a counted lot with this mark; as many as there are. */
export function count(lot: LotDraft, mark: Mark, by: number): LotDraft {
  const before = lot.entries.find((entry) => sameMark(entry.mark, mark))?.pieces ?? 0
  return setCount(lot, mark, before + by)
}

/** Exactly so many pieces of a counted lot with this mark; 0 takes it away. */
export function setCount(lot: LotDraft, mark: Mark, pieces: number): LotDraft {
  const room =
    lot.fired -
    marked({ ...lot, entries: lot.entries.filter((entry) => !sameMark(entry.mark, mark)) })
  const n = Math.min(room, Math.max(0, Math.round(pieces)))
  const known = lot.entries.some((entry) => sameMark(entry.mark, mark))
  const entries = known
    ? lot.entries.map((entry) => (sameMark(entry.mark, mark) ? { ...entry, pieces: n } : entry))
    : [...lot.entries, { mark, at: null, pieces: n }]
  return fit({ ...lot, entries: entries.filter((entry) => entry.pieces > 0), said: true })
}

/** Collected before anyone could look. */
export function setNotLookedAt(lot: LotDraft, pieces: number): LotDraft {
  return {
    ...lot,
    notLookedAt: Math.min(lot.fired - marked(lot), Math.max(0, Math.round(pieces))),
    said: true,
  }
}

/** Marked pieces were looked at: the others give way. */
function fit(lot: LotDraft): LotDraft {
  return { ...lot, notLookedAt: Math.max(0, Math.min(lot.notLookedAt, lot.fired - marked(lot))) }
}

/** Lots of which nothing was said are sound (or not looked at). */
export function sayOfTheOthers(
  lots: readonly LotDraft[],
  what: 'sound' | 'not-looked-at',
): LotDraft[] {
  return lots.map((lot) =>
    lot.said ? lot : { ...lot, said: true, notLookedAt: what === 'sound' ? 0 : lot.fired },
  )
}

/** Every piece of the load gets the mark: the whole load failed. */
export function markAll(lots: readonly LotDraft[], mark: Mark): LotDraft[] {
  return lots.map((lot) => {
    const empty: LotDraft = { ...lot, notLookedAt: 0, said: true, entries: [] }
    return { ...empty, entries: lot.fired > 0 ? place(empty, [{ mark, pieces: lot.fired }]) : [] }
  })
}

/** Lots with pieces of which nothing was said. */
export const unsaid = (lots: readonly LotDraft[]): LotDraft[] =>
  lots.filter((lot) => !lot.said && lot.fired > 0)

const COUNTED_AS = {
  second: 'seconds',
  refire: 'refires',
  waster: 'wasters',
  undecided: 'undecided',
} as const

/** Counts of what the draft says of a lot; `pieces` are those fired. */
export function countsOf(lot: LotDraft): LotCounts {
  const counts: LotCounts = { ...NO_COUNTS, pieces: lot.fired, notLookedAt: lot.notLookedAt }
  for (const { mark, pieces } of lot.entries) counts[COUNTED_AS[mark.outcome]] += pieces
  return counts
}

export function totalOf(lots: readonly LotDraft[]): LotCounts {
  return lots.reduce((sum, lot) => addCounts(sum, countsOf(lot)), { ...NO_COUNTS })
}

/** Faults in the draft, the most frequent first. */
export function faultsOf(lots: readonly LotDraft[]): string[] {
  const pieces = new Map<string, number>()
  for (const { mark, pieces: n } of lots.flatMap((lot) => lot.entries))
    pieces.set(mark.fault, (pieces.get(mark.fault) ?? 0) + n)
  return [...pieces].sort((a, b) => b[1] - a[1]).map(([fault]) => fault)
}

/** The body to send, and the uids of its losses, to be kept with the draft. */
export function reportBodyOf(
  draft: ReportDraft,
  makeUid: () => string,
): { report: ReportBody; lossUids: Record<string, string> } {
  const lossUids = { ...draft.lossUids }
  const lots = draft.lots.map((lot) => {
    const groups = new Map<string, { mark: Mark; pieces: number }>()
    for (const { mark, pieces } of lot.entries) {
      const key = `${lot.lot}|${markKey(mark)}`
      groups.set(key, { mark, pieces: (groups.get(key)?.pieces ?? 0) + pieces })
    }
    const losses = [...groups].map(([key, { mark, pieces }]) => ({
      uid: (lossUids[key] ??= makeUid()),
      ...mark,
      pieces,
    }))
    return { lot: lot.lot, notLookedAt: lot.notLookedAt, losses }
  })
  const { openedAt, openingTemperatureC, wholeLoadFailed } = draft
  return {
    report: {
      openedAt,
      openingTemperatureC,
      wholeLoadFailed,
      lots,
      note: draft.note.trim() || null,
    },
    lossUids,
  }
}

/**
 * The draft on top of the firing as it is now: lots that are still there keep their marks as far as
 * they fit, new ones start as they are, lots that are gone are dropped. A new revision uid, since the
 * body is another one.
 */
export function rebase(draft: ReportDraft, firing: FiringDetail, revision: string): ReportDraft {
  const fresh = draftOf(firing, revision)
  const mine = new Map(draft.lots.map((lot) => [lot.lot, lot]))
  return {
    ...draft,
    kind: fresh.kind,
    base: fresh.base,
    revision,
    deviceTime: null,
    lossUids: { ...draft.lossUids, ...fresh.lossUids },
    lots: fresh.lots.map((lot) => refit(mine.get(lot.lot), lot)),
  }
}

function refit(mine: LotDraft | undefined, now: LotDraft): LotDraft {
  if (!mine?.said) return now
  if (mine.fired === now.fired) return mine
  const empty: LotDraft = {
    ...now,
    said: true,
    notLookedAt: Math.min(mine.notLookedAt, now.fired),
    entries: [],
  }
  let room = now.fired
  const groups = mine.entries.flatMap(({ mark, pieces }) => {
    const n = Math.min(room, pieces)
    room -= n
    return n > 0 ? [{ mark, pieces: n }] : []
  })
  return fit({ ...empty, entries: place(empty, groups) })
}
