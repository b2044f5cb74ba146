import { DataTypes, Model } from 'sequelize'
import type {
  CreationOptional,
  InferAttributes,
  InferCreationAttributes,
  Sequelize,
} from 'sequelize'
import { guardTenant } from './tenantGuard.js'

/** A value of a factor: the network's (studio null) or one studio's own. */
export class Level extends Model<InferAttributes<Level>, InferCreationAttributes<Level>> {
  declare id: CreationOptional<number>
  declare networkId: number
  declare uid: string
  declare factor: string
  declare studioId: CreationOptional<number | null>
  declare code: CreationOptional<string | null>
  declare name: string
  declare position: CreationOptional<number>
  declare isReference: CreationOptional<boolean>
  declare attributes: Record<string, unknown>
  declare archivedAt: CreationOptional<Date | null>
  declare mergedIntoId: CreationOptional<number | null>
  declare createdAt: CreationOptional<Date>
  declare updatedAt: CreationOptional<Date>
}

export function defineLevel(sequelize: Sequelize): void {
  Level.init(
    {
      id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
      networkId: { type: DataTypes.BIGINT, allowNull: false },
      uid: { type: DataTypes.CHAR(36), allowNull: false },
      factor: { type: DataTypes.STRING(40), allowNull: false },
      studioId: { type: DataTypes.BIGINT, allowNull: true },
      code: { type: DataTypes.STRING(40), allowNull: true },
      name: { type: DataTypes.STRING(120), allowNull: false },
      position: DataTypes.INTEGER,
      isReference: DataTypes.BOOLEAN,
      attributes: { type: DataTypes.JSON, allowNull: false },
      archivedAt: { type: DataTypes.DATE(3), allowNull: true },
      mergedIntoId: { type: DataTypes.BIGINT, allowNull: true },
      createdAt: DataTypes.DATE(3),
      updatedAt: DataTypes.DATE(3),
    },
    { sequelize, tableName: 'levels', modelName: 'Level' },
  )
  guardTenant(Level)
}
