import { openingTemperatureBand, type Factor } from '../shared/factors.js'
import type { FiringKind } from '../shared/kinds.js'
import type { SheetProblem } from './lotSheetCells.js'
import { normalise, type SheetColumn, type SheetField } from './lotSheetColumns.js'

/** One lot of a sheet; null is "not recorded". */
export interface LotSheetRow {
  /** Line of the sheet; the header is 1. */
  line: number
  studio: string | null
  kiln: string | null
  firing: string
  kind: FiringKind | null
  /** Local day, 2025-03-31. */
  date: string | null
  cone: string | null
  /** Pieces offered. */
  pieces: number
  turnedAway: number
  notLookedAt: number
  refireCount: number
  /** By factor id: the code of a fixed level, else the name as written; a list for factors that allow several. */
  levels: Record<string, string | string[] | null>
  firingLevels: Record<string, string | null>
  /** As read, where the sheet gives degrees and not a band. */
  openingTemperatureC: number | null
  /** Wasters by fault, none of 0 pieces. */
  losses: { fault: string; pieces: number }[]
  /** Cells of columns that are nothing we know, by header. */
  others: Record<string, string | null>
}

const KINDS: Readonly<Record<string, FiringKind>> = {
  bisque: 'bisque',
  biscuit: 'bisque',
  glaze: 'glaze',
  glost: 'glaze',
  single: 'single',
  once_fired: 'single',
  once: 'single',
  lustre: 'lustre',
  luster: 'lustre',
  raku: 'raku',
}

/** How sheets write "not recorded". */
const NOT_RECORDED = new Set(['', '-', '–', '?', 'na', 'n/a', 'not recorded'])

/** Reads one line; the row is whole only when there are no problems. */
export function readRow(
  line: number,
  cells: readonly string[],
  columns: readonly SheetColumn[],
): { row: LotSheetRow; problems: SheetProblem[] } {
  const row = emptyRow(line)
  const problems: SheetProblem[] = []
  let lostTotal: { header: string; pieces: number } | null = null
  columns.forEach((column, index) => {
    const cell = recorded(cells[index])
    const problem = (message: string): void => {
      problems.push({ row: line, column: column.header, message })
    }
    if (column.is === 'factor') setLevel(row, column.factor, cell)
    else if (column.is === 'unknown') row.others[column.header] = cell
    else if (column.is === 'fault') addLoss(row, column.fault, wholeNumber(cell, problem))
    else if (column.is === 'field' && column.field === 'lostTotal')
      lostTotal =
        cell === null ? null : { header: column.header, pieces: wholeNumber(cell, problem) }
    else if (column.is === 'field') setField(row, column.field, cell, problem)
  })
  if (problems.length === 0) problems.push(...settleLosses(row, lostTotal, columns))
  return { row, problems }
}

function emptyRow(line: number): LotSheetRow {
  return {
    line,
    studio: null,
    kiln: null,
    firing: '',
    kind: null,
    date: null,
    cone: null,
    pieces: 0,
    turnedAway: 0,
    notLookedAt: 0,
    refireCount: 0,
    levels: {},
    firingLevels: {},
    openingTemperatureC: null,
    losses: [],
    others: {},
  }
}

function recorded(cell: string | undefined): string | null {
  return cell === undefined || NOT_RECORDED.has(cell.toLowerCase()) ? null : cell
}

type Complain = (message: string) => void

function setField(
  row: LotSheetRow,
  field: SheetField,
  cell: string | null,
  problem: Complain,
): void {
  if (field === 'firing') {
    if (cell === null) problem('A lot belongs to a firing: give its number.')
    else row.firing = cell
  } else if (field === 'kind') row.kind = kindOf(cell, problem)
  else if (field === 'date') row.date = dateOf(cell, problem)
  else if (field === 'studio' || field === 'kiln' || field === 'cone') row[field] = cell
  else if (field === 'pieces') {
    row.pieces = cell === null ? 0 : wholeNumber(cell, problem)
    if (cell === null) problem('How many pieces were in the lot? Give a whole number.')
  } else if (field !== 'lostTotal') row[field] = wholeNumber(cell, problem)
}

function kindOf(cell: string | null, problem: Complain): FiringKind | null {
  if (cell === null) return null
  const kind = KINDS[normalise(cell).replace(/_firing$/, '')]
  if (kind === undefined)
    problem(`“${cell}” is no kind of firing: bisque, glaze, once-fired, lustre or raku.`)
  return kind ?? null
}

function dateOf(cell: string | null, problem: Complain): string | null {
  if (cell === null) return null
  const [, year, month, day] = /^(\d{4})-(\d{2})-(\d{2})$/.exec(cell) ?? []
  const date = new Date(Date.UTC(Number(year), Number(month) - 1, Number(day)))
  const real = year !== undefined && date.toISOString().slice(0, 10) === cell
  if (!real) problem(`“${cell}” is no day: write it as 2025-03-31.`)
  return real ? cell : null
}

/** 0 for an empty cell. */
function wholeNumber(cell: string | null, problem: Complain): number {
  if (cell === null) return 0
  if (/^\d{1,6}$/.test(cell)) return Number(cell)
  problem(`“${cell}” is not a whole number of pieces.`)
  return 0
}

function setLevel(row: LotSheetRow, factor: Factor, cell: string | null): void {
  if (factor.of === 'firing') {
    const celsius =
      factor.id === 'opening_temperature' && cell !== null && /^\d+(\.\d+)?$/.test(cell)
    if (celsius) row.openingTemperatureC = Math.round(Number(cell))
    row.firingLevels[factor.id] = celsius
      ? openingTemperatureBand(Number(cell))
      : fixedLevel(factor, cell)
  } else if (factor.several) {
    const names = (cell ?? '')
      .split(/[|+]/)
      .map((name) => name.trim())
      .filter((name) => name !== '')
    row.levels[factor.id] = names.length === 0 ? null : [...new Set(names)]
  } else row.levels[factor.id] = fixedLevel(factor, cell)
}

/** The code of a fixed level that is called so; other names stay as written. */
function fixedLevel(factor: Factor, cell: string | null): string | null {
  if (cell === null) return null
  const name = normalise(cell)
  const fixed = factor.fixed?.find(
    (one) => normalise(one.code) === name || normalise(one.name) === name,
  )
  return fixed?.code ?? cell
}

function addLoss(row: LotSheetRow, fault: string, pieces: number): void {
  if (pieces === 0) return
  const known = row.losses.find((loss) => loss.fault === fault)
  if (known) known.pieces += pieces
  else row.losses.push({ fault, pieces })
}

/** The total includes the named faults; what it leaves over has no name. No more can be lost than was fired. */
function settleLosses(
  row: LotSheetRow,
  total: { header: string; pieces: number } | null,
  columns: readonly SheetColumn[],
): SheetProblem[] {
  const at = (column: string, message: string): SheetProblem[] => [
    { row: row.line, column, message },
  ]
  const header = (field: SheetField): string =>
    columns.find((column) => column.is === 'field' && column.field === field)?.header ?? field
  const named = row.losses.reduce((sum, loss) => sum + loss.pieces, 0)
  if (row.turnedAway + row.notLookedAt > row.pieces)
    return at(
      header('pieces'),
      `Of ${row.pieces} pieces, ${row.turnedAway + row.notLookedAt} were turned away or not looked at.`,
    )
  const looked = row.pieces - row.turnedAway - row.notLookedAt
  const lost = total === null ? named : total.pieces
  if (total !== null && total.pieces < named)
    return at(
      total.header,
      `The total of ${total.pieces} is less than the ${named} lost to named faults.`,
    )
  const last = columns.findLast((column) => column.is === 'fault')?.header ?? header('pieces')
  if (lost > looked)
    return at(total?.header ?? last, `${lost} of ${looked} pieces cannot have been lost.`)
  addLoss(row, 'other', lost - named)
  return []
}
