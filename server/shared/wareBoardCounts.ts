/** What lies on a ware board: pieces by what became of them, and the words that say the same. */
import type { LotCounts } from './counts.js'
import { firsts } from './counts.js'
import { formatCount, plural } from './plural.js'
import type { BoardCell, CellKind } from './wareBoardShapes.js'
import { CELL_KINDS } from './wareBoardShapes.js'

/** Pieces by what became of them. `checked` is a part of `first`; `late` a part of each outcome. */
export interface BoardCounts {
  first: number
  second?: number | undefined
  refire?: number | undefined
  waster?: number | undefined
  undecided?: number | undefined
  notLookedAt?: number | undefined
  turnedAway?: number | undefined
  checked?: number | undefined
  late?: { second?: number; refire?: number; waster?: number } | undefined
}

/** Counts of a lot as a board. */
export function boardCountsOf(counts: LotCounts): BoardCounts {
  return {
    first: Math.max(0, firsts(counts)),
    second: counts.seconds,
    refire: counts.refires,
    waster: counts.wasters,
    undecided: counts.undecided,
    notLookedAt: counts.notLookedAt,
    turnedAway: counts.turnedAway,
  }
}

/** All pieces of a board. */
export function boardTotal(counts: BoardCounts): number {
  return CELL_KINDS.reduce((sum, kind) => sum + (counts[kind] ?? 0), 0)
}

/** Counts of a list of cells, each one piece. */
export function countCells(cells: readonly BoardCell[]): BoardCounts {
  const of = (test: (cell: BoardCell) => boolean): number => cells.filter(test).length
  const late = (kind: CellKind): number => of((cell) => cell.kind === kind && cell.late === true)
  return {
    ...(Object.fromEntries(
      CELL_KINDS.map((kind) => [kind, of((cell) => cell.kind === kind)]),
    ) as Record<CellKind, number>),
    checked: of((cell) => cell.kind === 'first' && cell.checked === true),
    late: { second: late('second'), refire: late('refire'), waster: late('waster') },
  }
}

/** "40 pieces: 36 first, 1 second, 3 wasters": the board in words; what is nought is left out. */
export function describeBoard(counts: BoardCounts): string {
  const total = boardTotal(counts)
  if (total === 0) return 'no pieces'
  const parts = CELL_KINDS.flatMap((kind) => {
    const n = counts[kind] ?? 0
    return n > 0 ? [kindInWords(kind, n) + aside(counts, kind)] : []
  })
  return `${plural(total, 'piece')}: ${parts.join(', ')}`
}

/** "each cell is 10 pieces"; nothing where a cell is one piece. */
export function describeScale(perCell: number): string {
  return perCell > 1 ? `each cell is ${plural(perCell, 'piece')}` : ''
}

/** One outcome with its number: "1 second", "3 wasters", "36 first", "2 not looked at". */
export function kindInWords(kind: CellKind, n: number): string {
  switch (kind) {
    case 'second':
    case 'refire':
    case 'waster':
      return plural(n, kind)
    case 'first':
    case 'undecided':
      return `${formatCount(n)} ${kind}`
    case 'notLookedAt':
      return `${formatCount(n)} not looked at`
    case 'turnedAway':
      return `${formatCount(n)} turned away`
  }
}

/** The outcome of one piece in words. */
export function outcomeName(kind: CellKind): string {
  return kind === 'notLookedAt' ? 'not looked at' : kind === 'turnedAway' ? 'turned away' : kind
}

function aside(counts: BoardCounts, kind: CellKind): string {
  const checked = kind === 'first' ? (counts.checked ?? 0) : 0
  const late =
    kind === 'second' || kind === 'refire' || kind === 'waster' ? (counts.late?.[kind] ?? 0) : 0
  if (checked > 0) return ` (${formatCount(checked)} spot-checked)`
  return late > 0 ? ` (${formatCount(late)} seen late)` : ''
}
