import { DataTypes, Model } from 'sequelize'
import type {
  CreationOptional,
  InferAttributes,
  InferCreationAttributes,
  Sequelize,
} from 'sequelize'
import type { LossOutcome } from '../shared/counts.js'
import { guardTenant } from './tenantGuard.js'

/** Pieces of a lot that failed alike. */
export class Loss extends Model<InferAttributes<Loss>, InferCreationAttributes<Loss>> {
  declare id: CreationOptional<number>
  declare networkId: number
  declare firingId: number
  declare lotId: number
  declare uid: string
  declare fault: string
  declare alsoFaults: string[]
  declare outcome: LossOutcome
  declare pieces: number
  declare neighbour: CreationOptional<boolean>
  declare features: Record<string, string | string[]>
  declare lateOn: CreationOptional<string | null>
  declare createdAt: CreationOptional<Date>
  declare updatedAt: CreationOptional<Date>
}

export function defineLoss(sequelize: Sequelize): void {
  Loss.init(
    {
      id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
      networkId: { type: DataTypes.BIGINT, allowNull: false },
      firingId: { type: DataTypes.BIGINT, allowNull: false },
      lotId: { type: DataTypes.BIGINT, allowNull: false },
      uid: { type: DataTypes.CHAR(36), allowNull: false },
      fault: { type: DataTypes.STRING(40), allowNull: false },
      alsoFaults: { type: DataTypes.JSON, allowNull: false },
      outcome: { type: DataTypes.STRING(12), allowNull: false },
      pieces: { type: DataTypes.INTEGER, allowNull: false },
      neighbour: DataTypes.BOOLEAN,
      features: { type: DataTypes.JSON, allowNull: false },
      lateOn: { type: DataTypes.DATEONLY, allowNull: true },
      createdAt: DataTypes.DATE(3),
      updatedAt: DataTypes.DATE(3),
    },
    { sequelize, tableName: 'losses', modelName: 'Loss' },
  )
  guardTenant(Loss)
}
