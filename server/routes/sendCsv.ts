import { Readable } from 'node:stream'
import { pipeline } from 'node:stream/promises'
import type { Response } from 'express'
import { stringify } from 'csv-stringify'

type Row = readonly (string | number | null)[]

/**
 * Streams rows as a CSV file to save: UTF-8 with its mark, so that spreadsheets know it, and what
 * would be a formula made plain text. An error midway breaks the connection off: a table that ends
 * early must not look whole.
 */
export async function sendCsv(
  res: Response,
  name: string,
  headings: readonly string[],
  rows: Iterable<Row> | AsyncIterable<Row>,
): Promise<void> {
  res.type('text/csv').attachment(name)
  const table = stringify({
    bom: true,
    escape_formulas: true,
    header: true,
    columns: [...headings],
  })
  await pipeline(Readable.from(rows), table, res).catch((error: unknown) => {
    // The reader has gone, and nobody is left to tell.
    if ((error as { code?: string }).code !== 'ERR_STREAM_PREMATURE_CLOSE') throw error
  })
}
