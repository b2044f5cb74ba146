import { DataTypes, Model } from 'sequelize'
import type {
  CreationOptional,
  InferAttributes,
  InferCreationAttributes,
  Sequelize,
} from 'sequelize'
import { guardTenant } from './tenantGuard.js'

/** What was sent about a firing, whole: history, optimistic lock and audit of the counts in one. */
export class ReportRevision extends Model<
  InferAttributes<ReportRevision>,
  InferCreationAttributes<ReportRevision>
> {
  declare id: CreationOptional<number>
  declare networkId: number
  declare firingId: number
  declare uid: string
  declare number: number
  declare kind: 'pack' | 'report' | 'amend' | 'late' | 'void'
  declare baseNumber: number
  declare reason: CreationOptional<string | null>
  declare authorId: CreationOptional<number | null>
  declare deviceTime: CreationOptional<Date | null>
  declare serverTime: Date
  declare payload: unknown
  declare payloadHash: string
}

export function defineReportRevision(sequelize: Sequelize): void {
  ReportRevision.init(
    {
      id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
      networkId: { type: DataTypes.BIGINT, allowNull: false },
      firingId: { type: DataTypes.BIGINT, allowNull: false },
      uid: { type: DataTypes.CHAR(36), allowNull: false },
      number: { type: DataTypes.INTEGER, allowNull: false },
      kind: { type: DataTypes.STRING(10), allowNull: false },
      baseNumber: { type: DataTypes.INTEGER, allowNull: false },
      reason: { type: DataTypes.STRING(300), allowNull: true },
      authorId: { type: DataTypes.BIGINT, allowNull: true },
      deviceTime: { type: DataTypes.DATE(3), allowNull: true },
      serverTime: { type: DataTypes.DATE(3), allowNull: false },
      payload: { type: DataTypes.JSON, allowNull: false },
      payloadHash: { type: DataTypes.STRING(64), allowNull: false },
    },
    { sequelize, tableName: 'report_revisions', modelName: 'ReportRevision', timestamps: false },
  )
  guardTenant(ReportRevision)
}
