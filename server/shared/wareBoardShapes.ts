/**
 * Shapes of the cells of a ware board. Shape tells what colour tells, so that a board can be read
 * without colour. Pure geometry in px: a cell becomes paths, each with the role of its paint; the
 * paints themselves come from tokens (svg for mail and print) or from the stylesheet (screen).
 */
export const CELL_KINDS = [
  'first',
  'second',
  'refire',
  'waster',
  'undecided',
  'notLookedAt',
  'turnedAway',
] as const
export type CellKind = (typeof CELL_KINDS)[number]

/** One piece, or several of a kind where a cell stands for more. */
export interface BoardCell {
  kind: CellKind
  /** Sound, and looked at and described: a spot-checked piece. */
  checked?: boolean | undefined
  /** The outcome was seen after the report. */
  late?: boolean | undefined
}

/** What a path is painted with, in the order in which paths lie on each other. */
export const PAINT_ROLES = [
  'sound',
  'blemished',
  'half',
  'refire',
  'waster',
  'crack',
  'open',
  'dot',
  'unseen',
  'hatch',
  'away',
  'bar',
  'tick',
] as const
export type PaintRole = (typeof PAINT_ROLES)[number]

export interface Shape {
  role: PaintRole
  d: string
}

/** Left and top edge, side and drawn width (narrower for a cell that stands for fewer pieces), px. */
export interface CellBox {
  x: number
  y: number
  size: number
  width: number
}

/** Paths of one cell. Lines of outlines lie half a px inside, so that they stay crisp. */
export function cellShapes(cell: BoardCell, box: CellBox): Shape[] {
  const frame = outline(box, cell.late === true)
  switch (cell.kind) {
    case 'first':
      return [
        { role: 'sound', d: frame },
        ...(cell.checked ? [{ role: 'tick' as const, d: tick(box) }] : []),
      ]
    case 'second':
      return [
        { role: 'blemished', d: frame },
        { role: 'half', d: lowerRightHalf(box) },
      ]
    case 'refire':
      return [{ role: 'refire', d: solid(box, cell.late === true) + hole(box) }]
    case 'waster':
      return [
        { role: 'waster', d: solid(box, cell.late === true) },
        { role: 'crack', d: crack(box) },
      ]
    case 'undecided':
      return [
        { role: 'open', d: frame },
        { role: 'dot', d: disc(box, 0.16) },
      ]
    case 'notLookedAt':
      return [
        { role: 'unseen', d: frame },
        { role: 'hatch', d: hatch(box) },
      ]
    case 'turnedAway':
      return [
        { role: 'away', d: frame },
        { role: 'bar', d: bar(box) },
      ]
  }
}

/** Share of the side that a late cell's upper left corner loses. */
const NOTCH = 0.34

const round = (n: number): string => String(Math.round(n * 100) / 100)

/** A point of the unit square as "x y" in the box. */
function at({ x, y, size, width }: CellBox, u: number, v: number): string {
  return `${round(x + u * width)} ${round(y + v * size)}`
}

function polygon(left: number, top: number, right: number, bottom: number, cut: number): string {
  const start =
    cut > 0
      ? `M${round(left)} ${round(top + cut)}L${round(left + cut)} ${round(top)}`
      : `M${round(left)} ${round(top)}`
  return `${start}H${round(right)}V${round(bottom)}H${round(left)}Z`
}

function outline({ x, y, size, width }: CellBox, notched: boolean): string {
  const inset = Math.min(0.5, width / 4)
  return polygon(
    x + inset,
    y + inset,
    x + width - inset,
    y + size - inset,
    notched ? Math.min(size * NOTCH, width / 2) : 0,
  )
}

function solid({ x, y, size, width }: CellBox, notched: boolean): string {
  return polygon(x, y, x + width, y + size, notched ? Math.min(size * NOTCH, width / 2) : 0)
}

function lowerRightHalf({ x, y, size, width }: CellBox): string {
  const inset = Math.min(0.5, width / 4)
  const right = round(x + width - inset)
  const bottom = round(y + size - inset)
  return `M${right} ${round(y + inset)}V${bottom}H${round(x + inset)}Z`
}

/** A circle drawn against the sense of the square around it: a hole under either fill rule. */
function hole(box: CellBox): string {
  return disc(box, 0.23)
}

function disc({ x, y, size, width }: CellBox, share: number): string {
  const r = Math.min(size * share, width * 0.3)
  const cx = x + width / 2
  const cy = y + size / 2
  const arc = `A${round(r)} ${round(r)} 0 1 0`
  return `M${round(cx + r)} ${round(cy)}${arc} ${round(cx - r)} ${round(cy)}${arc} ${round(cx + r)} ${round(cy)}Z`
}

function crack(box: CellBox): string {
  return `M${at(box, 0.22, 0)}L${at(box, 0.46, 0.38)}L${at(box, 0.37, 0.58)}L${at(box, 0.74, 1)}`
}

function tick(box: CellBox): string {
  return `M${at(box, 0.28, 0.52)}L${at(box, 0.44, 0.69)}L${at(box, 0.74, 0.32)}`
}

/** Bar at the bottom, a fifth of the cell high, inside the dashed outline. */
function bar({ x, y, size, width }: CellBox): string {
  const height = Math.max(2, size * 0.2)
  return polygon(x, y + size - height, x + width, y + size, 0)
}

/** Rising diagonals, four to a cell. */
function hatch(box: CellBox): string {
  return [0.5, 1, 1.5]
    .map((sum) => {
      const low = Math.max(0, sum - 1)
      const high = Math.min(1, sum)
      return `M${at(box, low, high)}L${at(box, high, low)}`
    })
    .join('')
}
