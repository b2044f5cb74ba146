import { DataTypes } from 'sequelize'
import type { Sequelize } from 'sequelize'

/** Sessions as connect-session-sequelize keeps them, with the person's id so that all of one person's can be ended. */
export function defineSessionModel(sequelize: Sequelize): void {
  if (sequelize.isDefined('Session')) return
  sequelize.define(
    'Session',
    {
      sid: { type: DataTypes.STRING(36), primaryKey: true },
      userId: DataTypes.BIGINT,
      expires: DataTypes.DATE(3),
      data: DataTypes.TEXT,
    },
    { tableName: 'sessions' },
  )
}
