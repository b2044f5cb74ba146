import { DataTypes, Model } from 'sequelize'
import type {
  CreationOptional,
  InferAttributes,
  InferCreationAttributes,
  Sequelize,
} from 'sequelize'

/** A person; one account in any number of networks. */
export class User extends Model<InferAttributes<User>, InferCreationAttributes<User>> {
  declare id: CreationOptional<number>
  declare uid: string
  declare email: string
  declare name: string
  declare passwordHash: CreationOptional<string | null>
  declare preferences: Record<string, unknown>
  declare sessionEpoch: CreationOptional<number>
  declare demoLabel: CreationOptional<string | null>
  declare lastSeenAt: CreationOptional<Date | null>
  declare createdAt: CreationOptional<Date>
  declare updatedAt: CreationOptional<Date>
}

export function defineUser(sequelize: Sequelize): void {
  User.init(
    {
      id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
      uid: { type: DataTypes.CHAR(36), allowNull: false },
      email: { type: DataTypes.STRING(254), allowNull: false },
      name: { type: DataTypes.STRING(120), allowNull: false },
      passwordHash: { type: DataTypes.STRING(255), allowNull: true },
      preferences: { type: DataTypes.JSON, allowNull: false },
      sessionEpoch: DataTypes.INTEGER,
      demoLabel: { type: DataTypes.STRING(120), allowNull: true },
      lastSeenAt: { type: DataTypes.DATE(3), allowNull: true },
      createdAt: DataTypes.DATE(3),
      updatedAt: DataTypes.DATE(3),
    },
    { sequelize, tableName: 'users', modelName: 'User' },
  )
}
