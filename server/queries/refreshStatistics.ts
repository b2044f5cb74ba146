import { QueryTypes } from 'sequelize'
import type { Sequelize } from 'sequelize'

/**
 * Counts the keys of the firing tables anew, as MariaDB's planner needs them after a bulk write: it
 * counts by itself while the rows are not yet committed, and then reads all losses of a network for
 * each lot (minutes instead of a second). Outside a transaction: the statement commits.
 */
export async function refreshStatistics(sequelize: Sequelize): Promise<void> {
  await sequelize.query(
    'ANALYZE NO_WRITE_TO_BINLOG TABLE firings, lots, lot_levels, firing_levels, losses, report_revisions, levels',
    { type: QueryTypes.SELECT },
  )
}
