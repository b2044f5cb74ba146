import { DataTypes, Model } from 'sequelize'
import type {
  CreationOptional,
  InferAttributes,
  InferCreationAttributes,
  Sequelize,
} from 'sequelize'
import type { FindingLevelRow } from '../contract/findings.js'
import { guardTenant } from './tenantGuard.js'

/** One comparison that a study reports. */
export class Finding extends Model<InferAttributes<Finding>, InferCreationAttributes<Finding>> {
  declare id: CreationOptional<number>
  declare networkId: number
  declare uid: string
  declare studyId: number
  declare studioId: CreationOptional<number | null>
  declare identity: string
  declare fault: string
  declare factor: string
  declare levelId: number
  declare pairFactor: CreationOptional<string | null>
  declare pairLevelId: CreationOptional<number | null>
  declare comparison: 'within-firing' | 'between-firings'
  declare ratio: CreationOptional<number | null>
  declare lowerLimit: CreationOptional<number | null>
  declare upperLimit: CreationOptional<number | null>
  declare pValue: number
  declare qValue: number
  declare exposedUnits: number
  declare exposedEvents: number
  declare unexposedUnits: number
  declare unexposedEvents: number
  declare mixedStrata: number
  declare informativeStrata: number
  declare recordedShare: number
  declare verdict: CreationOptional<string | null>
  declare levels: FindingLevelRow[]
  declare firstSeenOn: string
}

export function defineFinding(sequelize: Sequelize): void {
  Finding.init(
    {
      id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
      networkId: { type: DataTypes.BIGINT, allowNull: false },
      uid: { type: DataTypes.CHAR(36), allowNull: false },
      studyId: { type: DataTypes.BIGINT, allowNull: false },
      studioId: { type: DataTypes.BIGINT, allowNull: true },
      identity: { type: DataTypes.STRING(200), allowNull: false },
      fault: { type: DataTypes.STRING(40), allowNull: false },
      factor: { type: DataTypes.STRING(40), allowNull: false },
      levelId: { type: DataTypes.BIGINT, allowNull: false },
      pairFactor: { type: DataTypes.STRING(40), allowNull: true },
      pairLevelId: { type: DataTypes.BIGINT, allowNull: true },
      comparison: { type: DataTypes.STRING(20), allowNull: false },
      ratio: { type: DataTypes.DOUBLE, allowNull: true },
      lowerLimit: { type: DataTypes.DOUBLE, allowNull: true },
      upperLimit: { type: DataTypes.DOUBLE, allowNull: true },
      pValue: { type: DataTypes.DOUBLE, allowNull: false },
      qValue: { type: DataTypes.DOUBLE, allowNull: false },
      exposedUnits: { type: DataTypes.DOUBLE, allowNull: false },
      exposedEvents: { type: DataTypes.DOUBLE, allowNull: false },
      unexposedUnits: { type: DataTypes.DOUBLE, allowNull: false },
      unexposedEvents: { type: DataTypes.DOUBLE, allowNull: false },
      mixedStrata: { type: DataTypes.INTEGER, allowNull: false },
      informativeStrata: { type: DataTypes.INTEGER, allowNull: false },
      recordedShare: { type: DataTypes.DOUBLE, allowNull: false },
      verdict: { type: DataTypes.STRING(20), allowNull: true },
      levels: { type: DataTypes.JSON, allowNull: false },
      firstSeenOn: { type: DataTypes.DATEONLY, allowNull: false },
    },
    { sequelize, tableName: 'findings', modelName: 'Finding', timestamps: false },
  )
  guardTenant(Finding)
}
