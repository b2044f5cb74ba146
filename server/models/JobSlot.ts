import { DataTypes, Model } from 'sequelize'
import type {
  CreationOptional,
  InferAttributes,
  InferCreationAttributes,
  Sequelize,
} from 'sequelize'

/** One run of a job; its key makes it happen once over any number of servers. */
export class JobSlot extends Model<InferAttributes<JobSlot>, InferCreationAttributes<JobSlot>> {
  declare id: CreationOptional<number>
  declare job: string
  declare slot: string
  declare networkId: number
  declare status: 'waiting' | 'running' | 'done' | 'failed'
  declare owner: CreationOptional<string | null>
  declare leaseUntil: CreationOptional<Date | null>
  declare attempt: CreationOptional<number>
  declare notBefore: CreationOptional<Date | null>
  declare progress: CreationOptional<number>
  declare outcome: CreationOptional<string | null>
  declare error: CreationOptional<string | null>
  declare requestedBy: CreationOptional<number | null>
  declare startedAt: CreationOptional<Date | null>
  declare finishedAt: CreationOptional<Date | null>
  declare createdAt: CreationOptional<Date>
  declare updatedAt: CreationOptional<Date>
}

export function defineJobSlot(sequelize: Sequelize): void {
  JobSlot.init(
    {
      id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true },
      job: { type: DataTypes.STRING(40), allowNull: false },
      slot: { type: DataTypes.STRING(60), allowNull: false },
      networkId: { type: DataTypes.BIGINT, allowNull: false },
      status: { type: DataTypes.STRING(12), allowNull: false },
      owner: { type: DataTypes.STRING(60), allowNull: true },
      leaseUntil: { type: DataTypes.DATE(3), allowNull: true },
      attempt: DataTypes.INTEGER,
      notBefore: { type: DataTypes.DATE(3), allowNull: true },
      progress: DataTypes.INTEGER,
      outcome: { type: DataTypes.STRING(300), allowNull: true },
      error: { type: DataTypes.STRING(2000), allowNull: true },
      requestedBy: { type: DataTypes.BIGINT, allowNull: true },
      startedAt: { type: DataTypes.DATE(3), allowNull: true },
      finishedAt: { type: DataTypes.DATE(3), allowNull: true },
      createdAt: DataTypes.DATE(3),
      updatedAt: DataTypes.DATE(3),
    },
    { sequelize, tableName: 'job_slots', modelName: 'JobSlot' },
  )
}
