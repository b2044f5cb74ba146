import { QueryTypes } from 'sequelize'
import type { Sequelize, Transaction } from 'sequelize'
import { SUM_COLUMNS } from '../shared/lossRollup.js'
import type { RollupRow } from '../shared/lossRollup.js'

/** Rows a statement: some 120 kB of text. */
const BATCH = 1000

const COLUMNS = ['network_id', 'studio_id', 'kiln_id', 'kind', 'month', 'factor', 'level_id', 'fault', ...SUM_COLUMNS]
const MOVE = SUM_COLUMNS.map((column) => `${column} = ${column} + VALUES(${column})`).join(', ')

/**
 * Adds rows to the roll-ups of a network; sums may be negative. Rows are written in the order of
 * their keys, so that two firings of a kiln wait for each other rather than deadlock, and the rows of
 * a rebuild land one behind the other. A row that comes to nought stays: it adds nothing.
 */
export async function addToRollups(
  sequelize: Sequelize,
  networkId: number,
  rows: readonly RollupRow[],
  transaction: Transaction,
): Promise<void> {
  const moved = rows.filter(({ sums }) => sums.some((sum) => sum !== 0)).sort(byKey)
  for (let from = 0; from < moved.length; from += BATCH) {
    const values = moved.slice(from, from + BATCH).map((row) => tuple(sequelize, networkId, row))
    await sequelize.query(
      `INSERT INTO loss_rollups (${COLUMNS.join(', ')}) VALUES ${values.join(',')} ON DUPLICATE KEY UPDATE ${MOVE}`,
      { type: QueryTypes.INSERT, transaction },
    )
  }
}

/** A text a row is four times as fast as placeholders: every sum is a number, every name is escaped. */
function tuple(sequelize: Sequelize, networkId: number, row: RollupRow): string {
  const text = (value: string): string => sequelize.escape(value)
  const { studioId, kilnId, kind, month, factor, levelId, fault, sums } = row
  const key = [networkId, studioId, kilnId, text(kind), text(month), text(factor), levelId, text(fault)]
  return `(${key.join(',')},${sums.map(Number).join(',')})`
}

function byKey(a: RollupRow, b: RollupRow): number {
  return (
    a.kilnId - b.kilnId ||
    compare(a.kind, b.kind) ||
    compare(a.factor, b.factor) ||
    compare(a.fault, b.fault) ||
    compare(a.month, b.month) ||
    a.levelId - b.levelId
  )
}

function compare(a: string, b: string): number {
  return a < b ? -1 : a > b ? 1 : 0
}

/** Empties the roll-ups of a network. */
export async function clearRollups(sequelize: Sequelize, networkId: number, transaction: Transaction): Promise<void> {
  await sequelize.query('DELETE FROM loss_rollups WHERE network_id = ?', {
    replacements: [networkId],
    type: QueryTypes.DELETE,
    transaction,
  })
}

/**
 * Keeps the roll-ups of a network for one transaction: many revisions may move them at once
 * (`shared`), while a rebuild has them alone.
 */
export async function holdRollups(
  sequelize: Sequelize,
  networkId: number,
  how: 'shared' | 'alone',
  transaction: Transaction,
): Promise<void> {
  const lock = how === 'alone' ? 'FOR UPDATE' : 'LOCK IN SHARE MODE'
  await sequelize.query(`SELECT id FROM networks WHERE id = ? ${lock}`, {
    replacements: [networkId],
    type: QueryTypes.SELECT,
    transaction,
  })
}
