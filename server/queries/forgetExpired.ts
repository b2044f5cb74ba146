import { QueryTypes } from 'sequelize'
import type { Sequelize } from 'sequelize'

/** Removes sessions that have expired; answers how many. */
export function forgetSessions(sequelize: Sequelize, now: Date): Promise<number> {
  return sequelize.query('DELETE FROM sessions WHERE expires < :now', {
    type: QueryTypes.BULKDELETE,
    replacements: { now },
  })
}

/** Removes one-time links that expired before that moment, used ones too; answers how many. */
export function forgetLinks(sequelize: Sequelize, before: Date): Promise<number> {
  return sequelize.query('DELETE FROM one_time_links WHERE expires_at < :before', {
    type: QueryTypes.BULKDELETE,
    replacements: { before },
  })
}
