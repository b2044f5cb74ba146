import { readFileSync } from 'node:fs'
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { NO_COUNTS } from '../../server/shared/counts.js'
import { DARK } from '../../server/shared/tokens.js'
import type { BoardCell, BoardCounts } from '../../server/shared/wareBoard.js'
import {
  boardCountsOf,
  boardScale,
  boardTotal,
  CELL_KINDS,
  cellShapes,
  countCells,
  describeBoard,
  describeScale,
  drawBoard,
  drawCells,
} from '../../server/shared/wareBoard.js'
import { boardSvg, dashOf, faviconSvg, lineWidth } from '../../server/shared/wareBoardSvg.js'

const few: BoardCounts = { first: 36, second: 1, waster: 3 }
/** Area of the rectangles in a path made of M, H and V, px². */
const areaOf = (d: string): number =>
  d
    .split('M')
    .filter((part) => /^[\d.]+ [\d.]+H/.test(part))
    .reduce((sum, part) => {
      const [left, top, right, bottom] = (/^([\d.]+) ([\d.]+)H([\d.]+)V([\d.]+)/.exec(part) ?? [])
        .slice(1)
        .map(Number)
      return sum + ((right ?? 0) - (left ?? 0)) * ((bottom ?? 0) - (top ?? 0))
    }, 0)

describe('describeBoard', () => {
  it('names what there is and leaves out what there is not', () => {
    expect(describeBoard(few)).toBe('40 pieces: 36 first, 1 second, 3 wasters')
  })

  it('speaks of one piece in the singular', () => {
    expect(describeBoard({ first: 0, refire: 1 })).toBe('1 piece: 1 refire')
  })

  it('says that a board is empty', () => {
    expect(describeBoard({ first: 0 })).toBe('no pieces')
  })

  it('tells spot-checked pieces and late losses apart', () => {
    const counts = {
      first: 1200,
      checked: 8,
      second: 2,
      waster: 3,
      late: { waster: 1 },
      notLookedAt: 2,
      turnedAway: 1,
    }
    expect(describeBoard(counts)).toBe(
      '1,208 pieces: 1,200 first (8 spot-checked), 2 seconds, 3 wasters (1 seen late), 2 not looked at, 1 turned away',
    )
  })
})

describe('boardScale', () => {
  it.each([
    [0, 1],
    [60, 1],
    [61, 2],
    [120, 2],
    [121, 5],
    [300, 5],
    [912, 20],
    [17_806, 500],
  ])('lets a cell of a board of %i pieces stand for %i', (total, perCell) => {
    expect(boardScale([{ first: total }])).toBe(perCell)
  })

  it('takes the largest of the boards that are compared', () => {
    expect(boardScale([{ first: 12 }, { first: 200 }])).toBe(5)
  })

  it('says in words what a cell is', () => {
    expect(describeScale(10)).toBe('each cell is 10 pieces')
    expect(describeScale(1)).toBe('')
  })
})

describe('drawBoard', () => {
  it('lays cells out in rows with a gap of 2 px', () => {
    const board = drawBoard(few, { size: 12, columns: 30 })
    expect([board.width, board.height, board.rows]).toEqual([30 * 14 - 2, 2 * 14 - 2, 2])
  })

  it('is no wider than its pieces', () => {
    expect(drawBoard({ first: 3 }, { size: 24, columns: 10 })).toMatchObject({
      width: 76,
      height: 24,
    })
  })

  it('draws nothing of nothing', () => {
    expect(drawBoard({ first: 0 }, { size: 12, columns: 10 })).toMatchObject({
      width: 0,
      height: 0,
      layers: [],
    })
  })

  it('draws the pieces left over as a cell of their share', () => {
    const board = drawBoard({ first: 0, waster: 78 }, { size: 20, columns: 40, perCell: 10 })
    const wasters = board.layers.find((layer) => layer.role === 'waster')?.d ?? ''
    expect(wasters.split('M').length - 1).toBe(8)
    expect(areaOf(wasters)).toBeCloseTo(7.8 * 20 * 20, 6)
  })

  it('never draws a loss too narrow to be seen', () => {
    const board = drawBoard({ first: 49_999, waster: 1 }, { size: 12, columns: 30 })
    expect(areaOf(board.layers.find((layer) => layer.role === 'waster')?.d ?? '')).toBe(24)
  })

  it('keeps the area of wasters in proportion to their number, whatever the numbers', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 0, max: 3000 }),
        fc.integer({ min: 1, max: 400 }),
        (first, waster) => {
          const board = drawBoard({ first, waster }, { size: 1000, columns: 20 })
          const area = areaOf(board.layers.find((layer) => layer.role === 'waster')?.d ?? '')
          expect(area / 1e6).toBeCloseTo(Math.max(waster / board.perCell, 0.002), 3)
        },
      ),
    )
  })
})

describe('cells', () => {
  const box = { x: 0, y: 0, size: 24, width: 24 }

  it('differ in shape, not in paint alone, between any two outcomes', () => {
    const shapes = CELL_KINDS.map((kind) =>
      cellShapes({ kind }, box)
        .map((shape) => shape.d)
        .join('|'),
    )
    expect(new Set(shapes).size).toBe(CELL_KINDS.length)
  })

  it('fill the lower right half of a second', () => {
    expect(cellShapes({ kind: 'second' }, box).find((shape) => shape.role === 'half')?.d).toBe(
      'M23.5 0.5V23.5H0.5Z',
    )
  })

  it('crack a waster from edge to edge', () => {
    const crack =
      cellShapes({ kind: 'waster' }, box).find((shape) => shape.role === 'crack')?.d ?? ''
    expect(crack).toMatch(/^M[\d.]+ 0L.*L[\d.]+ 24$/)
  })

  it('notch the upper left corner of a late loss', () => {
    expect(cellShapes({ kind: 'waster', late: true }, box)[0]?.d).toBe('M0 8.16L8.16 0H24V24H0Z')
  })

  it('tick a spot-checked sound piece', () => {
    expect(cellShapes({ kind: 'first', checked: true }, box).map((shape) => shape.role)).toEqual([
      'sound',
      'tick',
    ])
  })

  it('are drawn in the given order', () => {
    const cells: BoardCell[] = [{ kind: 'waster' }, { kind: 'first' }, { kind: 'waster' }]
    const board = drawCells(cells, { size: 48, columns: 7 })
    expect(board.layers.find((layer) => layer.role === 'waster')?.d.match(/M[\d.]+/g)).toEqual([
      'M0',
      'M100',
    ])
  })
})

describe('countCells', () => {
  it('counts each outcome, the checked and the late', () => {
    const cells: BoardCell[] = [
      { kind: 'first', checked: true },
      { kind: 'first' },
      { kind: 'waster', late: true },
      { kind: 'turnedAway' },
    ]
    const counts = countCells(cells)
    expect(counts).toMatchObject({
      first: 2,
      checked: 1,
      waster: 1,
      turnedAway: 1,
      second: 0,
      late: { waster: 1 },
    })
    expect(boardTotal(counts)).toBe(4)
  })
})

describe('boardCountsOf', () => {
  it('has all pieces offered on the board', () => {
    const lot = {
      ...NO_COUNTS,
      pieces: 40,
      turnedAway: 1,
      seconds: 2,
      refires: 3,
      wasters: 4,
      undecided: 5,
      notLookedAt: 6,
    }
    expect(boardCountsOf(lot)).toEqual({
      first: 19,
      second: 2,
      refire: 3,
      waster: 4,
      undecided: 5,
      notLookedAt: 6,
      turnedAway: 1,
    })
    expect(boardTotal(boardCountsOf(lot))).toBe(40)
  })
})

describe('boardSvg', () => {
  it('carries its text alternative, escaped', () => {
    const svg = boardSvg(drawBoard(few, { size: 16, columns: 20 }), 16, 'Mugs & <bowls> "tall"')
    expect(svg).toContain('role="img" aria-label="Mugs &amp; &lt;bowls&gt; &quot;tall&quot;"')
  })

  it('is painted with the palette it is given', () => {
    const drawing = drawBoard({ first: 0, waster: 1 }, { size: 16, columns: 20 })
    expect(boardSvg(drawing, 16, '', DARK)).toContain(DARK.fillWaster)
    expect(boardSvg(drawing, 16, '')).not.toContain(DARK.fillWaster)
  })

  it('dashes the outline of pieces turned away, at any size', () => {
    expect(
      boardSvg(drawBoard({ first: 0, turnedAway: 1 }, { size: 48, columns: 7 }), 48, ''),
    ).toContain(`stroke-dasharray="${dashOf(48)}"`)
    expect([12, 24, 48].map(dashOf)).toEqual(['2 2', '4 4', '8 8'])
  })

  it('thickens the crack with the cell', () => {
    expect(lineWidth('crack', 12)).toBe(1.25)
    expect(lineWidth('crack', 48)).toBe(3.84)
    expect(lineWidth('waster', 48)).toBe(0)
  })
})

describe('favicon.svg', () => {
  it('is three cells of the board, the last one cracked', () => {
    expect(readFileSync('src/public/favicon.svg', 'utf8')).toBe(`${faviconSvg()}\n`)
  })
})
