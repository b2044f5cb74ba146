import { DataTypes, Model } from 'sequelize'
import type {
  CreationOptional,
  InferAttributes,
  InferCreationAttributes,
  Sequelize,
} from 'sequelize'
import type { Role } from '../contract/roles.js'
import { guardTenant } from './tenantGuard.js'

/** A role of a person in one studio, or (studio null) in the whole network. */
export class Membership extends Model<
  InferAttributes<Membership>,
  InferCreationAttributes<Membership>
> {
  declare id: CreationOptional<number>
  declare networkId: number
  declare userId: number
  declare role: Role
  declare studioId: CreationOptional<number | null>
  declare createdAt: CreationOptional<Date>
  declare updatedAt: CreationOptional<Date>
}

export function defineMembership(sequelize: Sequelize): void {
  Membership.init(
    {
      id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
      networkId: { type: DataTypes.BIGINT, allowNull: false },
      userId: { type: DataTypes.BIGINT, allowNull: false },
      role: { type: DataTypes.STRING(20), allowNull: false },
      studioId: { type: DataTypes.BIGINT, allowNull: true },
      createdAt: DataTypes.DATE(3),
      updatedAt: DataTypes.DATE(3),
    },
    { sequelize, tableName: 'memberships', modelName: 'Membership' },
  )
  guardTenant(Membership)
}
