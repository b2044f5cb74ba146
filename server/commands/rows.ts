import type {
  Attributes,
  CreationAttributes,
  ModelStatic,
  Transaction,
  WhereOptions,
} from 'sequelize'
import type { Kiln, Level, Studio } from '../models/index.js'

type Row = Studio | Kiln | Level

async function readBack<R extends Row>(
  model: ModelStatic<R>,
  { networkId, id }: { networkId: number; id: number },
  transaction: Transaction,
): Promise<R> {
  const where = { networkId, id } as WhereOptions<Attributes<R>>
  return (await model.findOne({ where, transaction, rejectOnEmpty: true })) as R
}

/** Inserts a row and reads it back, with what the database put in. */
export async function insertRow<R extends Row>(
  model: ModelStatic<R>,
  values: CreationAttributes<R>,
  transaction: Transaction,
): Promise<R> {
  const made = (await model.create(values, { transaction })) as R
  return readBack(model, made, transaction)
}

/**
 * Updates a row and reads it back. Unlike `row.update` it leaves the row that it is given as it is, so
 * that a transaction which is run again after a deadlock writes again.
 */
export async function updateRow<R extends Row>(
  row: R,
  values: Partial<Attributes<R>>,
  transaction: Transaction,
): Promise<R> {
  const model = row.constructor as ModelStatic<R>
  const where = { networkId: row.networkId, id: row.id } as WhereOptions<Attributes<R>>
  await model.update(values, { where, transaction })
  return readBack(model, row, transaction)
}
