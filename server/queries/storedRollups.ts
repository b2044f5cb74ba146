import { QueryTypes } from 'sequelize'
import type { Sequelize, Transaction } from 'sequelize'
import { SUM_COLUMNS } from '../shared/lossRollup.js'
import type { RollupRow } from '../shared/lossRollup.js'

/** The roll-ups of a kiln as they are stored. */
export async function storedRollups(
  sequelize: Sequelize,
  { networkId, kilnId }: { networkId: number; kilnId: number },
  transaction: Transaction,
): Promise<RollupRow[]> {
  const rows = await sequelize.query<Omit<RollupRow, 'sums'> & Record<string, number>>(
    `SELECT studio_id AS studioId, kiln_id AS kilnId, kind, DATE_FORMAT(month, '%Y-%m-%d') AS month,
       factor, level_id AS levelId, fault, ${SUM_COLUMNS.join(', ')}
     FROM loss_rollups WHERE network_id = :networkId AND kiln_id = :kilnId`,
    { type: QueryTypes.SELECT, replacements: { networkId, kilnId }, transaction },
  )
  return rows.map((row) => {
    const { studioId, kilnId: kiln, kind, month, factor, levelId, fault } = row
    return {
      studioId,
      kilnId: kiln,
      kind,
      month,
      factor,
      levelId,
      fault,
      sums: SUM_COLUMNS.map((column) => Number(row[column])),
    }
  })
}
