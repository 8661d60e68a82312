import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'

/** What is added to the readings of a sensor from an instant on, until the next one. */
export class SensorOffset extends Model<InferAttributes<SensorOffset>, InferCreationAttributes<SensorOffset>> {
  declare id: string
  declare sensorId: number
  declare since: number
  declare airTempOffsetK: number
  declare relHumidityOffsetPct: number
  declare note: string
  declare enteredBy: CreationOptional<string | null>
  declare enteredAt: number

  static initialize(sequelize: Sequelize): typeof SensorOffset {
    return SensorOffset.init(
      {
        id: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        sensorId: { type: DataTypes.INTEGER, allowNull: false },
        since: { type: DataTypes.INTEGER, allowNull: false },
        airTempOffsetK: { type: DataTypes.DOUBLE, allowNull: false },
        relHumidityOffsetPct: { type: DataTypes.DOUBLE, allowNull: false },
        note: { type: DataTypes.TEXT, allowNull: false },
        enteredBy: { type: DataTypes.TEXT },
        enteredAt: { type: DataTypes.INTEGER, allowNull: false },
      },
      { sequelize, modelName: 'SensorOffset', tableName: 'sensor_offsets', underscored: true, timestamps: false },
    )
  }
}
