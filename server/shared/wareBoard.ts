/**
 * The ware board: pieces as cells. From counts (or a list of cells) to a drawing that the screen,
 * mails and print share, and to the words that say the same.
 */
import type { LotCounts } from './counts.js'
import { firsts } from './counts.js'
import { formatCount, plural } from './plural.js'
import type { BoardCell, CellKind, PaintRole } from './wareBoardShapes.js'
import { CELL_KINDS, cellShapes, PAINT_ROLES } from './wareBoardShapes.js'

export type { BoardCell, CellKind, PaintRole } from './wareBoardShapes.js'
export { CELL_KINDS, cellShapes } from './wareBoardShapes.js'

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

/** Sides in px: tables, mails, findings, kiln. */
export const BOARD_SIZES = [12, 16, 24, 48] as const
export type BoardSize = (typeof BOARD_SIZES)[number]

/** Cells side by side where nothing else is said. */
export const BOARD_COLUMNS: Readonly<Record<BoardSize, number>> = { 12: 30, 16: 20, 24: 10, 48: 7 }

/** Gap between cells, px. */
export const BOARD_GAP = 2
/** More pieces than this, and a cell stands for several. */
export const MOST_CELLS = 60

export interface BoardOptions {
  /** Side of a cell, px. */
  size: number
  columns: number
  /** Pieces a cell stands for; worked out when left out. */
  perCell?: number | undefined
  gap?: number | undefined
}

export interface BoardDrawing {
  /** px. */
  width: number
  height: number
  columns: number
  rows: number
  /** Pieces that a whole cell stands for. */
  perCell: number
  /** One path a paint, in painting order; a board of hundreds of cells is a dozen elements. */
  layers: { role: PaintRole; d: string }[]
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
    ...(Object.fromEntries(CELL_KINDS.map((kind) => [kind, of((cell) => cell.kind === kind)])) as Record<CellKind, number>),
    checked: of((cell) => cell.kind === 'first' && cell.checked === true),
    late: { second: late('second'), refire: late('refire'), waster: late('waster') },
  }
}

/**
 * Pieces a cell stands for so that the largest board has at most `most` cells: 1, 2, 5, 10, 20, 50 ...
 * Boards that are compared must share it.
 */
export function boardScale(boards: readonly BoardCounts[], most = MOST_CELLS): number {
  const largest = Math.max(0, ...boards.map(boardTotal))
  for (let ten = 1; ; ten *= 10) for (const step of [1, 2, 5]) if (largest <= step * ten * most) return step * ten
}

/** A cell and the share of it that is drawn: 1, or less for the pieces left over. */
interface Part {
  cell: BoardCell
  share: number
}

/** Narrowest remainder, px: a loss is never too small to be seen. */
const NARROWEST = 2

/**
 * The board of these counts. With `perCell` above 1, every outcome gets its whole cells and then one
 * cell as wide as the pieces left over, so that areas stay exact.
 */
export function drawBoard(counts: BoardCounts, options: BoardOptions): BoardDrawing {
  const perCell = options.perCell ?? boardScale([counts])
  return layOut(partsOf(counts, perCell), perCell, options)
}

/** The board of a list of cells, each one piece, in the given order. */
export function drawCells(cells: readonly BoardCell[], options: Omit<BoardOptions, 'perCell'>): BoardDrawing {
  return layOut(cells.map((cell) => ({ cell, share: 1 })), 1, options)
}

function partsOf(counts: BoardCounts, perCell: number): Part[] {
  return groupsOf(counts).flatMap(({ cell, pieces }) => {
    const whole = Math.floor(pieces / perCell)
    const rest = pieces - whole * perCell
    const parts: Part[] = Array.from({ length: whole }, () => ({ cell, share: 1 }))
    return rest > 0 ? [...parts, { cell, share: rest / perCell }] : parts
  })
}

/** Groups of like pieces in the order of the board: sound first, losses last before what is not known. */
function groupsOf(counts: BoardCounts): { cell: BoardCell; pieces: number }[] {
  const checked = Math.min(counts.checked ?? 0, counts.first)
  return CELL_KINDS.flatMap((kind) => {
    const marked = kind === 'first' ? checked : kind === 'second' || kind === 'refire' || kind === 'waster' ? (counts.late?.[kind] ?? 0) : 0
    const mark = kind === 'first' ? { checked: true } : { late: true }
    return [
      { cell: { kind }, pieces: Math.max(0, (counts[kind] ?? 0) - marked) },
      { cell: { kind, ...mark }, pieces: marked },
    ]
  })
}

function layOut(parts: readonly Part[], perCell: number, { size, columns, gap = BOARD_GAP }: BoardOptions): BoardDrawing {
  const pitch = size + gap
  const byRole = new Map<PaintRole, string>()
  for (const [index, { cell, share }] of parts.entries()) {
    const width = Math.max(NARROWEST, size * share)
    const box = { x: (index % columns) * pitch, y: Math.floor(index / columns) * pitch, size, width }
    for (const { role, d } of cellShapes(cell, box)) byRole.set(role, (byRole.get(role) ?? '') + d)
  }
  const rows = Math.ceil(parts.length / columns)
  return {
    width: Math.max(0, Math.min(columns, parts.length) * pitch - gap),
    height: Math.max(0, rows * pitch - gap),
    columns,
    rows,
    perCell,
    layers: PAINT_ROLES.flatMap((role) => (byRole.has(role) ? [{ role, d: byRole.get(role) ?? '' }] : [])),
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
  const late = kind === 'second' || kind === 'refire' || kind === 'waster' ? (counts.late?.[kind] ?? 0) : 0
  if (checked > 0) return ` (${formatCount(checked)} spot-checked)`
  return late > 0 ? ` (${formatCount(late)} seen late)` : ''
}
