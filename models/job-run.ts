import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'
import { json } from '@/models/columns'

/** One pass of a job over one minute. */
export class JobRun extends Model<InferAttributes<JobRun>, InferCreationAttributes<JobRun>> {
  declare id: CreationOptional<number>
  declare job: string
  declare tickAt: number
  declare startedAt: number
  declare finishedAt: CreationOptional<number | null>
  declare outcome: CreationOptional<'done' | 'failed' | null>
  declare detail: CreationOptional<Record<string, unknown>>

  static initialize(sequelize: Sequelize): typeof JobRun {
    return JobRun.init(
      {
        id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
        job: { type: DataTypes.TEXT, allowNull: false },
        tickAt: { type: DataTypes.INTEGER, allowNull: false },
        startedAt: { type: DataTypes.INTEGER, allowNull: false },
        finishedAt: { type: DataTypes.INTEGER },
        outcome: { type: DataTypes.TEXT },
        detail: { ...json('detail'), defaultValue: {} },
      },
      { sequelize, modelName: 'JobRun', tableName: 'job_runs', underscored: true, timestamps: false },
    )
  }
}
