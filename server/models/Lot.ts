import { DataTypes, Model } from 'sequelize'
import type {
  CreationOptional,
  InferAttributes,
  InferCreationAttributes,
  Sequelize,
} from 'sequelize'
import { guardTenant } from './tenantGuard.js'

/** A counted group of like pieces in a firing; `isRest` marks the pieces that are in no lot. */
export class Lot extends Model<InferAttributes<Lot>, InferCreationAttributes<Lot>> {
  declare id: CreationOptional<number>
  declare networkId: number
  declare firingId: number
  declare studioId: number
  declare uid: string
  declare position: number
  declare isRest: CreationOptional<boolean>
  declare pieces: number
  declare turnedAway: CreationOptional<number>
  declare seconds: CreationOptional<number>
  declare refires: CreationOptional<number>
  declare wasters: CreationOptional<number>
  declare undecided: CreationOptional<number>
  declare notLookedAt: CreationOptional<number>
  declare formId: CreationOptional<number | null>
  declare clayBodyId: CreationOptional<number | null>
  declare clayConditionId: CreationOptional<number | null>
  declare glazeId: CreationOptional<number | null>
  declare formingId: CreationOptional<number | null>
  declare dryingPracticeId: CreationOptional<number | null>
  declare joiningPracticeId: CreationOptional<number | null>
  declare classId: CreationOptional<number | null>
  declare glazeOverlap: CreationOptional<boolean | null>
  declare refireCount: CreationOptional<number>
  declare maker: CreationOptional<string | null>
  declare note: CreationOptional<string | null>
  declare createdAt: CreationOptional<Date>
  declare updatedAt: CreationOptional<Date>
}

export function defineLot(sequelize: Sequelize): void {
  Lot.init(
    {
      id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
      networkId: { type: DataTypes.BIGINT, allowNull: false },
      firingId: { type: DataTypes.BIGINT, allowNull: false },
      studioId: { type: DataTypes.BIGINT, allowNull: false },
      uid: { type: DataTypes.CHAR(36), allowNull: false },
      position: { type: DataTypes.INTEGER, allowNull: false },
      isRest: DataTypes.BOOLEAN,
      pieces: { type: DataTypes.INTEGER, allowNull: false },
      turnedAway: DataTypes.INTEGER,
      seconds: DataTypes.INTEGER,
      refires: DataTypes.INTEGER,
      wasters: DataTypes.INTEGER,
      undecided: DataTypes.INTEGER,
      notLookedAt: DataTypes.INTEGER,
      formId: { type: DataTypes.BIGINT, allowNull: true },
      clayBodyId: { type: DataTypes.BIGINT, allowNull: true },
      clayConditionId: { type: DataTypes.BIGINT, allowNull: true },
      glazeId: { type: DataTypes.BIGINT, allowNull: true },
      formingId: { type: DataTypes.BIGINT, allowNull: true },
      dryingPracticeId: { type: DataTypes.BIGINT, allowNull: true },
      joiningPracticeId: { type: DataTypes.BIGINT, allowNull: true },
      classId: { type: DataTypes.BIGINT, allowNull: true },
      glazeOverlap: { type: DataTypes.BOOLEAN, allowNull: true },
      refireCount: DataTypes.INTEGER,
      maker: { type: DataTypes.STRING(80), allowNull: true },
      note: { type: DataTypes.STRING(500), allowNull: true },
      createdAt: DataTypes.DATE(3),
      updatedAt: DataTypes.DATE(3),
    },
    { sequelize, tableName: 'lots', modelName: 'Lot' },
  )
  guardTenant(Lot)
}
