import { QueryTypes } from 'sequelize'
import type { Sequelize, Transaction } from 'sequelize'
import { FIRST_OF, FIRST_OF_COUNTS, SUM_COLUMNS } from '../shared/lossRollup.js'
import type { RollupRow } from '../shared/lossRollup.js'

/** Rows a statement: some 80 kB of text. */
const BATCH = 1000

const KEY = ['network_id', 'studio_id', 'kiln_id', 'kind', 'month', 'factor', 'level_id', 'fault']

/** Families of rows with the sums that they have (from, to): what is nought in all of a family is not written. */
const FAMILIES = [
  { of: (fault: string) => fault === '', sums: [0, SUM_COLUMNS.length] },
  { of: (fault: string) => fault.startsWith('@'), sums: [0, FIRST_OF.loss] },
  {
    of: (fault: string) => fault !== '' && !fault.startsWith('@'),
    sums: [FIRST_OF.loss, FIRST_OF_COUNTS],
  },
] as const

/** How a statement for rows of these sums begins and ends. */
function statement([from, to]: readonly [number, number]): { head: string; tail: string } {
  const columns = SUM_COLUMNS.slice(from, to)
  const move = columns.map((column) => `${column} = ${column} + VALUES(${column})`).join(', ')
  return {
    head: `INSERT INTO loss_rollups (${[...KEY, ...columns].join(', ')}) VALUES `,
    tail: ` ON DUPLICATE KEY UPDATE ${move}`,
  }
}

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
  const write = tupleWriter(sequelize, networkId)
  // One statement is on its way while the next one is written.
  let sent: Promise<unknown> = Promise.resolve()
  for (const { of, sums } of FAMILIES) {
    const { head, tail } = statement(sums)
    let values: string[] = []
    const send = async (): Promise<void> => {
      const sql = head + values.join() + tail
      values = []
      await sent
      sent = sequelize.query(sql, { type: QueryTypes.INSERT, transaction })
    }
    for (const part of partsInOrder(rows.filter(({ fault }) => of(fault)))) {
      for (const row of part.sort(byRestOfKey)) {
        values.push(write(row, sums))
        if (values.length === BATCH) await send()
      }
    }
    if (values.length > 0) await send()
  }
  await sent
}

/** Rows that move something, by the first columns of their key: small parts, so that sorting never takes long. */
function partsInOrder(rows: readonly RollupRow[]): RollupRow[][] {
  const parts = new Map<string, RollupRow[]>()
  for (const row of rows) {
    if (row.sums.every((sum) => sum === 0)) continue
    const key = `${String(row.kilnId).padStart(16, '0')} ${row.kind} ${row.factor}`
    const part = parts.get(key)
    if (part) part.push(row)
    else parts.set(key, [row])
  }
  return [...parts].sort(([a], [b]) => compare(a, b)).map(([, part]) => part)
}

/** Text a row costs a quarter of placeholders: every sum is a number, every name is escaped, once. */
function tupleWriter(
  sequelize: Sequelize,
  networkId: number,
): (row: RollupRow, sums: readonly [number, number]) => string {
  const escaped = new Map<string, string>()
  const text = (value: string): string => {
    const known = escaped.get(value) ?? sequelize.escape(value)
    escaped.set(value, known)
    return known
  }
  return ({ studioId, kilnId, kind, month, factor, levelId, fault, sums }, [from, to]) =>
    `(${networkId},${studioId},${kilnId},${text(kind)},${text(month)},${text(factor)},${levelId},${text(fault)},${sums.slice(from, to).join()})`
}

function byRestOfKey(a: RollupRow, b: RollupRow): number {
  return compare(a.fault, b.fault) || compare(a.month, b.month) || a.levelId - b.levelId
}

function compare(a: string, b: string): number {
  return a < b ? -1 : a > b ? 1 : 0
}

/** Empties the roll-ups of a network. */
export async function clearRollups(
  sequelize: Sequelize,
  networkId: number,
  transaction: Transaction,
): Promise<void> {
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
