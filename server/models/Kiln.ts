import { DataTypes, Model } from 'sequelize'
import type {
  CreationOptional,
  InferAttributes,
  InferCreationAttributes,
  Sequelize,
} from 'sequelize'
import { guardTenant } from './tenantGuard.js'

/** A kiln of a studio. */
export class Kiln extends Model<InferAttributes<Kiln>, InferCreationAttributes<Kiln>> {
  declare id: CreationOptional<number>
  declare networkId: number
  declare studioId: number
  declare uid: string
  declare name: string
  declare litres: CreationOptional<number | null>
  declare heat: CreationOptional<string>
  declare shelves: CreationOptional<number | null>
  declare counterOffset: CreationOptional<number>
  declare note: CreationOptional<string | null>
  declare archivedAt: CreationOptional<Date | null>
  declare createdAt: CreationOptional<Date>
  declare updatedAt: CreationOptional<Date>
}

export function defineKiln(sequelize: Sequelize): void {
  Kiln.init(
    {
      id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
      networkId: { type: DataTypes.BIGINT, allowNull: false },
      studioId: { type: DataTypes.BIGINT, allowNull: false },
      uid: { type: DataTypes.CHAR(36), allowNull: false },
      name: { type: DataTypes.STRING(80), allowNull: false },
      litres: { type: DataTypes.INTEGER, allowNull: true },
      heat: DataTypes.STRING(20),
      shelves: { type: DataTypes.INTEGER, allowNull: true },
      counterOffset: DataTypes.INTEGER,
      note: { type: DataTypes.STRING(500), allowNull: true },
      archivedAt: { type: DataTypes.DATE(3), allowNull: true },
      createdAt: DataTypes.DATE(3),
      updatedAt: DataTypes.DATE(3),
    },
    { sequelize, tableName: 'kilns', modelName: 'Kiln' },
  )
  guardTenant(Kiln)
}
