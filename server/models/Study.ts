import { DataTypes, Model } from 'sequelize'
import type {
  CreationOptional,
  InferAttributes,
  InferCreationAttributes,
  Sequelize,
} from 'sequelize'
import { guardTenant } from './tenantGuard.js'

/** One run of the study over one scope. */
export class Study extends Model<InferAttributes<Study>, InferCreationAttributes<Study>> {
  declare id: CreationOptional<number>
  declare networkId: number
  declare uid: string
  declare studioId: CreationOptional<number | null>
  declare windowFrom: string
  declare windowTo: string
  declare firings: number
  declare lots: number
  declare pieces: number
  declare comparisons: number
  declare findings: number
  declare parameters: Record<string, unknown>
  declare watermark: number
  declare seed: number
  declare codeVersion: string
  declare startedAt: Date
  declare finishedAt: Date
}

export function defineStudy(sequelize: Sequelize): void {
  Study.init(
    {
      id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
      networkId: { type: DataTypes.BIGINT, allowNull: false },
      uid: { type: DataTypes.CHAR(36), allowNull: false },
      studioId: { type: DataTypes.BIGINT, allowNull: true },
      windowFrom: { type: DataTypes.DATEONLY, allowNull: false },
      windowTo: { type: DataTypes.DATEONLY, allowNull: false },
      firings: { type: DataTypes.INTEGER, allowNull: false },
      lots: { type: DataTypes.INTEGER, allowNull: false },
      pieces: { type: DataTypes.INTEGER, allowNull: false },
      comparisons: { type: DataTypes.INTEGER, allowNull: false },
      findings: { type: DataTypes.INTEGER, allowNull: false },
      parameters: { type: DataTypes.JSON, allowNull: false },
      watermark: { type: DataTypes.BIGINT, allowNull: false },
      seed: { type: DataTypes.BIGINT, allowNull: false },
      codeVersion: { type: DataTypes.STRING(40), allowNull: false },
      startedAt: { type: DataTypes.DATE(3), allowNull: false },
      finishedAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { sequelize, tableName: 'studies', modelName: 'Study', timestamps: false },
  )
  guardTenant(Study)
}
