import { DataTypes, Model } from 'sequelize'
import type {
  CreationOptional,
  InferAttributes,
  InferCreationAttributes,
  Sequelize,
} from 'sequelize'
import { guardTenant } from './tenantGuard.js'

/** A level of a lot for factors that have no column of their own, and further glazes. */
export class LotLevel extends Model<InferAttributes<LotLevel>, InferCreationAttributes<LotLevel>> {
  declare id: CreationOptional<number>
  declare networkId: number
  declare lotId: number
  declare factor: string
  declare levelId: number
}

export function defineLotLevel(sequelize: Sequelize): void {
  LotLevel.init(
    {
      id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
      networkId: { type: DataTypes.BIGINT, allowNull: false },
      lotId: { type: DataTypes.BIGINT, allowNull: false },
      factor: { type: DataTypes.STRING(40), allowNull: false },
      levelId: { type: DataTypes.BIGINT, allowNull: false },
    },
    { sequelize, tableName: 'lot_levels', modelName: 'LotLevel', timestamps: false },
  )
  guardTenant(LotLevel)
}
