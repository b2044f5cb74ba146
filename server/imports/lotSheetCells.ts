import { parse } from 'csv-parse/sync'

/** Something that stops a row, or for row 1 the whole sheet, from being taken. */
export interface SheetProblem {
  /** Line of the sheet; the header is 1. */
  row: number
  /** Header of the column, or the name of the one that is missing. */
  column: string
  message: string
}

export interface SheetCells {
  header: string[]
  records: { line: number; cells: string[] }[]
  problems: SheetProblem[]
}

interface ParsedRecord {
  record: string[]
  info: { lines: number }
}

/** Splits the text into cells, trimmed; lines are counted as an editor shows them. */
export function readCells(text: string): SheetCells {
  let parsed: ParsedRecord[]
  try {
    parsed = parse(text, {
      bom: true,
      trim: true,
      skip_empty_lines: true,
      relax_column_count: true,
      delimiter: delimiterOf(text),
      info: true,
    }) as unknown as ParsedRecord[]
  } catch (error) {
    const row = (error as { lines?: number }).lines ?? 1
    const message = `The sheet cannot be read as CSV: ${(error as Error).message}`
    return { header: [], records: [], problems: [{ row, column: '', message }] }
  }
  const [first, ...rest] = parsed
  const header = first?.record ?? []
  const problems: SheetProblem[] = []
  const records: SheetCells['records'] = []
  for (const { record, info } of rest) {
    if (record.every((cell) => cell === '')) continue
    if (record.length === header.length) records.push({ line: info.lines, cells: record })
    else {
      const message = `This line has ${record.length} cells, the header ${header.length}.`
      problems.push({ row: info.lines, column: '', message })
    }
  }
  return { header, records, problems }
}

/** Whichever of comma, semicolon and tab the first line has most of. */
function delimiterOf(text: string): string {
  const first = text.split(/\r?\n/, 1)[0] ?? ''
  const count = (mark: string): number => first.split(mark).length
  return [',', ';', '\t'].reduce((best, mark) => (count(mark) > count(best) ? mark : best))
}
