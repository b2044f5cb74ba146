import { DataTypes, Model } from 'sequelize'
import type {
  CreationOptional,
  InferAttributes,
  InferCreationAttributes,
  Sequelize,
} from 'sequelize'

/** A link that lets a person set a password once. Only the hash of its token is kept. */
export class OneTimeLink extends Model<
  InferAttributes<OneTimeLink>,
  InferCreationAttributes<OneTimeLink>
> {
  declare id: CreationOptional<number>
  declare tokenHash: string
  declare kind: string
  declare userId: number
  declare networkId: CreationOptional<number | null>
  declare createdBy: CreationOptional<number | null>
  declare expiresAt: Date
  declare usedAt: CreationOptional<Date | null>
  declare createdAt: CreationOptional<Date>
}

export function defineOneTimeLink(sequelize: Sequelize): void {
  OneTimeLink.init(
    {
      id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
      tokenHash: { type: DataTypes.STRING(64), allowNull: false },
      kind: { type: DataTypes.STRING(20), allowNull: false },
      userId: { type: DataTypes.BIGINT, allowNull: false },
      networkId: { type: DataTypes.BIGINT, allowNull: true },
      createdBy: { type: DataTypes.BIGINT, allowNull: true },
      expiresAt: { type: DataTypes.DATE(3), allowNull: false },
      usedAt: { type: DataTypes.DATE(3), allowNull: true },
      createdAt: DataTypes.DATE(3),
    },
    { sequelize, tableName: 'one_time_links', modelName: 'OneTimeLink', updatedAt: false },
  )
}
