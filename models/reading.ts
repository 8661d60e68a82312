import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'

/** A reading that the clock counts. What it does not count is a `SetAsideReading`. */
export class Reading extends Model<InferAttributes<Reading>, InferCreationAttributes<Reading>> {
  declare sensorId: number
  declare measuredAt: number
  /** As it counts: corrected by the sensor's offset, where there is one. */
  declare airTempC: number
  declare relHumidityPct: number
  /** As the device said it, where an offset corrects it. */
  declare rawAirTempC: CreationOptional<number | null>
  declare rawRelHumidityPct: CreationOptional<number | null>
  /** Of a barometer beside the sensor. */
  declare pressurePa: CreationOptional<number | null>
  /** That of the foundry's altitude on arrival; null before it was kept. */
  declare altitudePressurePa: CreationOptional<number | null>
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
        rawAirTempC: { type: DataTypes.DOUBLE },
        rawRelHumidityPct: { type: DataTypes.DOUBLE },
        pressurePa: { type: DataTypes.DOUBLE },
        altitudePressurePa: { type: DataTypes.DOUBLE },
        roomFactor: { type: DataTypes.DOUBLE, allowNull: false },
        source: { type: DataTypes.TEXT, allowNull: false },
        enteredBy: { type: DataTypes.TEXT },
        receivedAt: { type: DataTypes.INTEGER, allowNull: false },
      },
      { sequelize, modelName: 'Reading', tableName: 'readings', underscored: true, timestamps: false },
    )
  }
}
