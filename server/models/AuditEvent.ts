import { DataTypes, Model } from 'sequelize'
import type {
  CreationOptional,
  InferAttributes,
  InferCreationAttributes,
  Sequelize,
} from 'sequelize'
import { guardTenant } from './tenantGuard.js'

/** Who changed what, before and after. */
export class AuditEvent extends Model<
  InferAttributes<AuditEvent>,
  InferCreationAttributes<AuditEvent>
> {
  declare id: CreationOptional<number>
  declare networkId: number
  declare actorId: CreationOptional<number | null>
  declare at: Date
  declare action: string
  declare subject: string
  declare subjectUid: CreationOptional<string | null>
  declare studioId: CreationOptional<number | null>
  declare beforeState: CreationOptional<Record<string, unknown> | null>
  declare afterState: CreationOptional<Record<string, unknown> | null>
  declare requestId: CreationOptional<string | null>
}

export function defineAuditEvent(sequelize: Sequelize): void {
  AuditEvent.init(
    {
      id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
      networkId: { type: DataTypes.BIGINT, allowNull: false },
      actorId: { type: DataTypes.BIGINT, allowNull: true },
      at: { type: DataTypes.DATE(3), allowNull: false },
      action: { type: DataTypes.STRING(60), allowNull: false },
      subject: { type: DataTypes.STRING(40), allowNull: false },
      subjectUid: { type: DataTypes.CHAR(36), allowNull: true },
      studioId: { type: DataTypes.BIGINT, allowNull: true },
      beforeState: { type: DataTypes.JSON, allowNull: true },
      afterState: { type: DataTypes.JSON, allowNull: true },
      requestId: { type: DataTypes.STRING(40), allowNull: true },
    },
    { sequelize, tableName: 'audit_events', modelName: 'AuditEvent', timestamps: false },
  )
  guardTenant(AuditEvent)
}
