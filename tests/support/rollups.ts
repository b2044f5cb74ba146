import { QueryTypes } from 'sequelize'
import { SUM_COLUMNS } from '../../server/shared/lossRollup.js'
import { testDatabase } from './database.js'

/** Every row of a network's roll-ups that is not nought, by key, in a fixed order. */
export async function rollupsOf(networkId: number): Promise<Record<string, number[]>> {
  const sequelize = await testDatabase()
  const rows = await sequelize.query<Record<string, string | number>>(
    `SELECT kiln_id, kind, DATE_FORMAT(month, '%Y-%m') AS month, factor, level_id, fault, ${SUM_COLUMNS.join(', ')}
    FROM loss_rollups WHERE network_id = :networkId
    ORDER BY kiln_id, kind, month, factor, level_id, fault`,
    { replacements: { networkId }, type: QueryTypes.SELECT },
  )
  const entries = rows.map((row) => {
    const key = [row.kiln_id, row.kind, row.month, row.factor, row.level_id, row.fault].join(' ')
    return [key, SUM_COLUMNS.map((column) => Number(row[column]))] as const
  })
  return Object.fromEntries(entries.filter(([, sums]) => sums.some((sum) => sum !== 0)))
}
