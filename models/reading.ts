import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'

export class Reading extends Model<InferAttributes<Reading>, InferCreationAttributes<Reading>> {
  declare sensorId: number
  declare measuredAt: number
  declare airTempC: number
  declare relHumidityPct: number
  /** Reference hours of drying per hour in 1.0 m/s air. */
  declare roomFactor: number
  declare source: 'sensor' | 'typed'
  declare enteredBy: CreationOptional<string | null>
  declare receivedAt: number

  static initialize(sequelize: Sequelize): typeof Reading {
    return Reading.init(
      {
        sensorId: { type: DataTypes.INTEGER, primaryKey: true, allowNull: false },
        measuredAt: { type: DataTypes.INTEGER, primaryKey: true, allowNull: false },
        airTempC: { type: DataTypes.DOUBLE, allowNull: false },
        relHumidityPct: { type: DataTypes.DOUBLE, allowNull: false },
        roomFactor: { type: DataTypes.DOUBLE, allowNull: false },
        source: { type: DataTypes.TEXT, allowNull: false },
        enteredBy: { type: DataTypes.TEXT },
        receivedAt: { type: DataTypes.INTEGER, allowNull: false },
      },
      { sequelize, modelName: 'Reading', tableName: 'readings', underscored: true, timestamps: false },
    )
  }
}
