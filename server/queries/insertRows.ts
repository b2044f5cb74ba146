import { DataTypes, QueryTypes } from 'sequelize'
import type { CreationAttributes, Model, ModelStatic, Sequelize, Transaction } from 'sequelize'

/** Rows a statement: 16 MB is the least that a statement may hold, and a payload has a few kB. */
const BATCH = 1000

/**
 * Inserts rows of one model as they are: no defaults, no hooks, no model objects, which takes a third
 * of the time of `bulkCreate`. All rows must have the attributes of the first, and a model of a tenant
 * its `networkId`.
 * @returns ids in the order of the rows: one INSERT of many rows takes consecutive ids
 * @throws what the database refuses
 */
export async function insertRows<M extends Model>(
  sequelize: Sequelize,
  model: ModelStatic<M>,
  rows: readonly CreationAttributes<M>[],
  transaction: Transaction,
): Promise<number[]> {
  const [first] = rows
  if (!first) return []
  const columns = Object.keys(first).map((name) => columnOf(model, name))
  const names = columns.map(({ field }) => `\`${field}\``).join(', ')
  const ids: number[] = []
  for (let from = 0; from < rows.length; from += BATCH) {
    const batch = rows.slice(from, from + BATCH)
    const values = batch.map((row) => {
      const cells = columns.map(({ name, json }) =>
        literal(sequelize, (row as Record<string, unknown>)[name], json),
      )
      return `(${cells.join(', ')})`
    })
    const sql = `INSERT INTO \`${model.tableName}\` (${names}) VALUES ${values.join(', ')}`
    const [start] = await sequelize.query(sql, { type: QueryTypes.INSERT, transaction })
    batch.forEach((_, index) => ids.push(start + index))
  }
  return ids
}

interface Column {
  name: string
  field: string
  json: boolean
}

function columnOf(model: ModelStatic<Model>, name: string): Column {
  const attribute = model.getAttributes()[name]
  if (!attribute) throw new Error(`${model.name} has no attribute ${name}.`)
  return { name, field: attribute.field ?? name, json: attribute.type instanceof DataTypes.JSON }
}

function literal(sequelize: Sequelize, value: unknown, json: boolean): string {
  if (value === null || value === undefined) return 'NULL'
  if (json) return sequelize.escape(JSON.stringify(value))
  if (typeof value === 'number') return String(value)
  if (typeof value === 'boolean') return value ? '1' : '0'
  if (value instanceof Date) return `'${value.toISOString().slice(0, 23).replace('T', ' ')}'`
  return sequelize.escape(value as string)
}
