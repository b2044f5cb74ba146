import { QueryTypes } from 'sequelize'
import { testDatabase } from './database.js'

/** Rows of a hand-written SELECT, for what no model or route shows. */
export async function rowsOf<Row extends object = Record<string, unknown>>(
  sql: string,
  replacements: Record<string, unknown> = {},
): Promise<Row[]> {
  const sequelize = await testDatabase()
  return sequelize.query<Row>(sql, { type: QueryTypes.SELECT, replacements })
}
