import { readCells, type SheetProblem } from './lotSheetCells.js'
import {
  FIELD_WORDS,
  recogniseColumn,
  type SheetColumn,
  type SheetField,
} from './lotSheetColumns.js'
import { readRow, type LotSheetRow } from './lotSheetRow.js'

export type { SheetProblem } from './lotSheetCells.js'
export type { SheetColumn, SheetField } from './lotSheetColumns.js'
export type { LotSheetRow } from './lotSheetRow.js'

export interface LotSheet {
  rows: LotSheetRow[]
  /** Everything that is wrong, in the order of the sheet; rows with a problem are not among `rows`. */
  problems: SheetProblem[]
  /** What every column was taken for; unknown ones change nothing in an import. */
  columns: SheetColumn[]
}

export interface LotSheetOptions {
  required?: readonly SheetField[]
  as?: Readonly<Record<string, string>>
}

/** Without these a lot is not a lot; its firing may be told by the day instead. */
const NEEDED: readonly SheetField[] = ['pieces']

/**
 * Reads a lot sheet: CSV with a header line, one line a lot. Columns are known by their names in any order and case
 * (see lotSheetColumns); cells are separated by comma, semicolon or tab, whichever the header uses; several glazes by
 * | or +. `lost_…` columns are wasters of that fault; `lost` alone is of no named fault, or, beside named ones, the
 * total that they are part of.
 *
 * A sheet without a column for the firing takes the loads of one kiln, day and kind for one firing.
 *
 * @param required columns that the sheet must have beside pieces, and firing or date.
 * @param as headers that are to be read as if they were called otherwise.
 * @returns rows and problems; a problem names line (the header is line 1) and column. Never throws for a bad sheet.
 */
export function parseLotSheet(
  text: string,
  { required = [], as = {} }: LotSheetOptions = {},
): LotSheet {
  const { header, records, problems } = readCells(text)
  const columns = header.map((name) => ({ ...recogniseColumn(as[name] ?? name), header: name }))
  if (problems.length === 0 || columns.length > 0)
    problems.push(...columnProblems(columns, [...NEEDED, ...required]), ...firingColumn(columns))
  const rows: LotSheetRow[] = []
  if (columns.length === 0 || problems.some((problem) => problem.row === 1))
    return { rows, problems, columns }
  const seen = new Map<string, LotSheetRow>()
  for (const { line, cells } of records) {
    const { row, problems: mine } = readRow(line, cells, columns)
    if (mine.length === 0) mine.push(...firingProblems(row, columns, seen))
    if (mine.length === 0) rows.push(row)
    problems.push(...mine)
  }
  return { rows, problems, columns }
}

/** The key of a firing: the same number in another studio or kiln is another firing; without a number, day and kind. */
export function firingKey(row: LotSheetRow): string {
  const firing = row.firing === '' ? `${row.date ?? ''} ${row.kind ?? ''}` : row.firing
  return [row.studio ?? '', row.kiln ?? '', firing].join(' / ')
}

function firingColumn(columns: readonly SheetColumn[]): SheetProblem[] {
  const tells = (column: SheetColumn): boolean =>
    column.is === 'field' && (column.field === 'firing' || column.field === 'date')
  if (columns.length === 0 || columns.some(tells)) return []
  return [{ row: 1, column: 'firing', message: `No column gives ${FIELD_WORDS.firing}.` }]
}

function columnProblems(
  columns: readonly SheetColumn[],
  needed: readonly SheetField[],
): SheetProblem[] {
  if (columns.length === 0) return [{ row: 1, column: '', message: 'The sheet is empty.' }]
  const problems: SheetProblem[] = []
  for (const field of new Set(needed)) {
    if (columns.some((column) => column.is === 'field' && column.field === field)) continue
    problems.push({ row: 1, column: field, message: `No column gives ${FIELD_WORDS[field]}.` })
  }
  const taken = new Map<string, string>()
  for (const column of columns) {
    const { header } = column
    if (column.is === 'unknown-fault')
      problems.push({
        row: 1,
        column: header,
        message: `“${header}” names no fault of the fault list.`,
      })
    if (column.is !== 'field' && column.is !== 'factor') continue
    const meaning = column.is === 'field' ? column.field : column.factor.id
    const other = taken.get(meaning)
    if (other !== undefined)
      problems.push({
        row: 1,
        column: header,
        message: `“${other}” and “${header}” mean the same: keep one.`,
      })
    taken.set(meaning, header)
  }
  return problems
}

/** One firing has one kind and one day. */
function firingProblems(
  row: LotSheetRow,
  columns: readonly SheetColumn[],
  seen: Map<string, LotSheetRow>,
): SheetProblem[] {
  const key = firingKey(row)
  const first = seen.get(key)
  if (first === undefined) {
    seen.set(key, row)
    return []
  }
  const problems: SheetProblem[] = []
  for (const field of ['kind', 'date'] as const) {
    if (first[field] === row[field]) continue
    const column = columns.find((one) => one.is === 'field' && one.field === field)?.header ?? field
    const message = `Firing ${row.firing} has “${first[field] ?? ''}” here in line ${first.line}.`
    problems.push({ row: row.line, column, message })
  }
  return problems
}
