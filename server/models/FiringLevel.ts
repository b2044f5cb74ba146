import { DataTypes, Model } from 'sequelize'
import type {
  CreationOptional,
  InferAttributes,
  InferCreationAttributes,
  Sequelize,
} from 'sequelize'
import { guardTenant } from './tenantGuard.js'

/** A level of a firing for factors that have no column of their own. */
export class FiringLevel extends Model<
  InferAttributes<FiringLevel>,
  InferCreationAttributes<FiringLevel>
> {
  declare id: CreationOptional<number>
  declare networkId: number
  declare firingId: number
  declare factor: string
  declare levelId: number
}

export function defineFiringLevel(sequelize: Sequelize): void {
  FiringLevel.init(
    {
      id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
      networkId: { type: DataTypes.BIGINT, allowNull: false },
      firingId: { type: DataTypes.BIGINT, allowNull: false },
      factor: { type: DataTypes.STRING(40), allowNull: false },
      levelId: { type: DataTypes.BIGINT, allowNull: false },
    },
    { sequelize, tableName: 'firing_levels', modelName: 'FiringLevel', timestamps: false },
  )
  guardTenant(FiringLevel)
}
