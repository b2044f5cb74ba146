/** The ware board as SVG text for mails, print and the favicon, painted with the tokens. */
import type { Palette } from './tokens.js'
import { LIGHT } from './tokens.js'
import type { BoardDrawing } from './wareBoard.js'
import { drawCells } from './wareBoard.js'
import type { PaintRole } from './wareBoardShapes.js'

interface Paint {
  fill?: keyof Palette
  stroke?: keyof Palette
  /** Width of the line in px, or a share of the cell's side. */
  line?: { px: number } | { share: number; least: number }
  dashed?: true
}

/** Paint of every role. The stylesheet of the screen (WareBoard.vue) says the same with variables. */
export const PAINTS: Readonly<Record<PaintRole, Paint>> = {
  sound: { fill: 'wash', stroke: 'cobaltSoft', line: { px: 1 } },
  blemished: { fill: 'raised', stroke: 'ochre', line: { px: 1 } },
  half: { fill: 'fillSecond', stroke: 'ochre', line: { px: 1 } },
  refire: { fill: 'fillRefire' },
  waster: { fill: 'fillWaster' },
  crack: { stroke: 'crack', line: { share: 0.08, least: 1.25 } },
  open: { fill: 'raised', stroke: 'cobalt', line: { px: 1 } },
  dot: { fill: 'cobalt' },
  unseen: { stroke: 'cobaltSoft', line: { px: 1 } },
  hatch: { stroke: 'cobaltSoft', line: { px: 1 } },
  away: { stroke: 'ink2', line: { px: 1 }, dashed: true },
  bar: { fill: 'ink2' },
  tick: { stroke: 'cobalt', line: { share: 0.1, least: 1.25 } },
}

/** Width of a role's line on a cell of this side, px; 0 where it has none. */
export function lineWidth(role: PaintRole, size: number): number {
  const { line } = PAINTS[role]
  if (!line) return 0
  return 'px' in line ? line.px : Math.max(line.least, Math.round(line.share * size * 100) / 100)
}

/** Dash and gap of a turned-away piece's outline, px: a few dashes a side at any size. */
export function dashOf(size: number): string {
  const dash = Math.max(2, Math.round(size / 6))
  return `${dash} ${dash}`
}

/**
 * A drawing as a whole `<svg>`. `label` is the text alternative; `palette` is light where nothing is
 * said (paper and most mails are white). Text is escaped; there is no other outside input.
 */
export function boardSvg(
  drawing: BoardDrawing,
  size: number,
  label: string,
  palette: Readonly<Palette> = LIGHT,
): string {
  const paths = drawing.layers.map(({ role, d }) => {
    const { fill, stroke, dashed } = PAINTS[role]
    const line = stroke
      ? ` stroke="${palette[stroke]}" stroke-width="${lineWidth(role, size)}"`
      : ''
    const dash = dashed ? ` stroke-dasharray="${dashOf(size)}"` : ''
    return `<path fill="${fill ? palette[fill] : 'none'}" fill-rule="evenodd"${line}${dash} d="${d}"/>`
  })
  const { width, height } = drawing
  return `<svg xmlns="http://www.w3.org/2000/svg" role="img" aria-label="${escapeText(label)}" width="${width}" height="${height}" viewBox="0 0 ${width} ${height}">${paths.join('')}</svg>`
}

function escapeText(text: string): string {
  return text
    .replace(/&/g, '&amp;')
    .replace(/</g, '&lt;')
    .replace(/>/g, '&gt;')
    .replace(/"/g, '&quot;')
}

/** The mark for a browser's tab, square: three cells, the last one cracked. */
export function faviconSvg(): string {
  const size = 15
  return boardSvg(
    drawCells([{ kind: 'first' }, { kind: 'first' }, { kind: 'waster' }], { size, columns: 2 }),
    size,
    'Duntless',
  )
}
