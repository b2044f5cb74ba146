import { DataTypes, Model } from 'sequelize'
import type {
  CreationOptional,
  InferAttributes,
  InferCreationAttributes,
  Sequelize,
} from 'sequelize'
import { guardTenant } from './tenantGuard.js'

/** One studio of a network. */
export class Studio extends Model<InferAttributes<Studio>, InferCreationAttributes<Studio>> {
  declare id: CreationOptional<number>
  declare networkId: number
  declare uid: string
  declare slug: string
  declare name: string
  declare timeZone: string
  declare currency: string
  declare temperatureUnit: CreationOptional<'C' | 'F'>
  declare lengthUnit: CreationOptional<'mm' | 'in'>
  declare weekStart: CreationOptional<number>
  declare appearance: CreationOptional<'name' | 'letter' | 'hidden'>
  declare letter: CreationOptional<string | null>
  declare archivedAt: CreationOptional<Date | null>
  declare createdAt: CreationOptional<Date>
  declare updatedAt: CreationOptional<Date>
}

export function defineStudio(sequelize: Sequelize): void {
  Studio.init(
    {
      id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
      networkId: { type: DataTypes.BIGINT, allowNull: false },
      uid: { type: DataTypes.CHAR(36), allowNull: false },
      slug: { type: DataTypes.STRING(60), allowNull: false },
      name: { type: DataTypes.STRING(120), allowNull: false },
      timeZone: { type: DataTypes.STRING(60), allowNull: false },
      currency: { type: DataTypes.STRING(3), allowNull: false },
      temperatureUnit: DataTypes.CHAR(1),
      lengthUnit: DataTypes.CHAR(2),
      weekStart: DataTypes.INTEGER,
      appearance: DataTypes.STRING(10),
      letter: { type: DataTypes.STRING(2), allowNull: true },
      archivedAt: { type: DataTypes.DATE(3), allowNull: true },
      createdAt: DataTypes.DATE(3),
      updatedAt: DataTypes.DATE(3),
    },
    { sequelize, tableName: 'studios', modelName: 'Studio' },
  )
  guardTenant(Studio)
}
