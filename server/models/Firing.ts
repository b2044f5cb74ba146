import { DataTypes, Model } from 'sequelize'
import type {
  CreationOptional,
  InferAttributes,
  InferCreationAttributes,
  Sequelize,
} from 'sequelize'
import type { FiringKind } from '../shared/kinds.js'
import { guardTenant } from './tenantGuard.js'

/** One run of one kiln with the sums of its lots. */
export class Firing extends Model<InferAttributes<Firing>, InferCreationAttributes<Firing>> {
  declare id: CreationOptional<number>
  declare networkId: number
  declare studioId: number
  declare kilnId: number
  declare uid: string
  declare kind: FiringKind
  declare status: CreationOptional<'packed' | 'reported' | 'void'>
  declare programmeId: CreationOptional<number | null>
  declare cone: CreationOptional<string | null>
  declare localDate: string
  declare kilnNumber: CreationOptional<number | null>
  declare switchedOffAt: CreationOptional<Date | null>
  declare openedAt: CreationOptional<Date | null>
  declare openingTemperatureC: CreationOptional<number | null>
  declare about: CreationOptional<boolean>
  declare pieces: number
  declare turnedAway: CreationOptional<number>
  declare seconds: CreationOptional<number>
  declare refires: CreationOptional<number>
  declare wasters: CreationOptional<number>
  declare undecided: CreationOptional<number>
  declare notLookedAt: CreationOptional<number>
  declare wholeLoadFailed: CreationOptional<string | null>
  declare note: CreationOptional<string | null>
  declare revision: CreationOptional<number>
  declare packedAt: CreationOptional<Date | null>
  declare packedBy: CreationOptional<number | null>
  declare reportedAt: CreationOptional<Date | null>
  declare reportedBy: CreationOptional<number | null>
  declare voidReason: CreationOptional<string | null>
  declare createdAt: CreationOptional<Date>
  declare updatedAt: CreationOptional<Date>
}

export function defineFiring(sequelize: Sequelize): void {
  Firing.init(
    {
      id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
      networkId: { type: DataTypes.BIGINT, allowNull: false },
      studioId: { type: DataTypes.BIGINT, allowNull: false },
      kilnId: { type: DataTypes.BIGINT, allowNull: false },
      uid: { type: DataTypes.CHAR(36), allowNull: false },
      kind: { type: DataTypes.STRING(10), allowNull: false },
      status: DataTypes.STRING(10),
      programmeId: { type: DataTypes.BIGINT, allowNull: true },
      cone: { type: DataTypes.STRING(4), allowNull: true },
      localDate: { type: DataTypes.DATEONLY, allowNull: false },
      kilnNumber: { type: DataTypes.INTEGER, allowNull: true },
      switchedOffAt: { type: DataTypes.DATE(3), allowNull: true },
      openedAt: { type: DataTypes.DATE(3), allowNull: true },
      openingTemperatureC: { type: DataTypes.INTEGER, allowNull: true },
      about: DataTypes.BOOLEAN,
      pieces: { type: DataTypes.INTEGER, allowNull: false },
      turnedAway: DataTypes.INTEGER,
      seconds: DataTypes.INTEGER,
      refires: DataTypes.INTEGER,
      wasters: DataTypes.INTEGER,
      undecided: DataTypes.INTEGER,
      notLookedAt: DataTypes.INTEGER,
      wholeLoadFailed: { type: DataTypes.STRING(20), allowNull: true },
      note: { type: DataTypes.STRING(1000), allowNull: true },
      revision: DataTypes.INTEGER,
      packedAt: { type: DataTypes.DATE(3), allowNull: true },
      packedBy: { type: DataTypes.BIGINT, allowNull: true },
      reportedAt: { type: DataTypes.DATE(3), allowNull: true },
      reportedBy: { type: DataTypes.BIGINT, allowNull: true },
      voidReason: { type: DataTypes.STRING(300), allowNull: true },
      createdAt: DataTypes.DATE(3),
      updatedAt: DataTypes.DATE(3),
    },
    { sequelize, tableName: 'firings', modelName: 'Firing' },
  )
  guardTenant(Firing)
}
