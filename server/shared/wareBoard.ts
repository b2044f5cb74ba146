/**
 * The ware board: pieces as cells. From counts (or a list of cells) to a drawing that the screen,
 * mails and print share; its words are in wareBoardCounts.ts, its shapes in wareBoardShapes.ts.
 */
import type { BoardCounts } from './wareBoardCounts.js'
import { boardTotal } from './wareBoardCounts.js'
import type { BoardCell, PaintRole } from './wareBoardShapes.js'
import { CELL_KINDS, cellShapes, PAINT_ROLES } from './wareBoardShapes.js'

export * from './wareBoardCounts.js'
export type { BoardCell, CellKind, PaintRole } from './wareBoardShapes.js'
export { CELL_KINDS, cellShapes } from './wareBoardShapes.js'

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

/**
 * Pieces a cell stands for so that the largest board has at most `most` cells: 1, 2, 5, 10, 20, 50 ...
 * Boards that are compared must share it.
 */
export function boardScale(boards: readonly BoardCounts[], most = MOST_CELLS): number {
  const largest = Math.max(0, ...boards.map(boardTotal))
  for (let ten = 1; ; ten *= 10)
    for (const step of [1, 2, 5]) if (largest <= step * ten * most) return step * ten
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
export function drawCells(
  cells: readonly BoardCell[],
  options: Omit<BoardOptions, 'perCell'>,
): BoardDrawing {
  return layOut(
    cells.map((cell) => ({ cell, share: 1 })),
    1,
    options,
  )
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
    const marked =
      kind === 'first'
        ? checked
        : kind === 'second' || kind === 'refire' || kind === 'waster'
          ? (counts.late?.[kind] ?? 0)
          : 0
    const mark = kind === 'first' ? { checked: true } : { late: true }
    return [
      { cell: { kind }, pieces: Math.max(0, (counts[kind] ?? 0) - marked) },
      { cell: { kind, ...mark }, pieces: marked },
    ]
  })
}

function layOut(
  parts: readonly Part[],
  perCell: number,
  { size, columns, gap = BOARD_GAP }: BoardOptions,
): BoardDrawing {
  const pitch = size + gap
  const byRole = new Map<PaintRole, string>()
  for (const [index, { cell, share }] of parts.entries()) {
    const width = Math.max(NARROWEST, size * share)
    const box = {
      x: (index % columns) * pitch,
      y: Math.floor(index / columns) * pitch,
      size,
      width,
    }
    for (const { role, d } of cellShapes(cell, box)) byRole.set(role, (byRole.get(role) ?? '') + d)
  }
  const rows = Math.ceil(parts.length / columns)
  return {
    width: Math.max(0, Math.min(columns, parts.length) * pitch - gap),
    height: Math.max(0, rows * pitch - gap),
    columns,
    rows,
    perCell,
    layers: PAINT_ROLES.flatMap((role) =>
      byRole.has(role) ? [{ role, d: byRole.get(role) ?? '' }] : [],
    ),
  }
}
