import { DataTypes, Model } from 'sequelize'
import type {
  CreationOptional,
  InferAttributes,
  InferCreationAttributes,
  Sequelize,
} from 'sequelize'

/** A tenant: a group of studios that compare their losses. */
export class Network extends Model<InferAttributes<Network>, InferCreationAttributes<Network>> {
  declare id: CreationOptional<number>
  declare uid: string
  declare slug: string
  declare name: string
  declare timeZone: string
  declare currency: string
  declare temperatureUnit: CreationOptional<'C' | 'F'>
  declare lengthUnit: CreationOptional<'mm' | 'in'>
  declare weekStart: CreationOptional<number>
  declare demo: CreationOptional<boolean>
  declare createdAt: CreationOptional<Date>
  declare updatedAt: CreationOptional<Date>
}

export function defineNetwork(sequelize: Sequelize): void {
  Network.init(
    {
      id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
      uid: { type: DataTypes.CHAR(36), allowNull: false },
      slug: { type: DataTypes.STRING(60), allowNull: false },
      name: { type: DataTypes.STRING(120), allowNull: false },
      timeZone: { type: DataTypes.STRING(60), allowNull: false },
      currency: { type: DataTypes.STRING(3), allowNull: false },
      temperatureUnit: DataTypes.CHAR(1),
      lengthUnit: DataTypes.CHAR(2),
      weekStart: DataTypes.INTEGER,
      demo: DataTypes.BOOLEAN,
      createdAt: DataTypes.DATE(3),
      updatedAt: DataTypes.DATE(3),
    },
    { sequelize, tableName: 'networks', modelName: 'Network' },
  )
}
