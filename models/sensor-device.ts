import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'

/** A device that hangs under a sensor's name, or has hung there, and from when on. */
export class SensorDevice extends Model<InferAttributes<SensorDevice>, InferCreationAttributes<SensorDevice>> {
  declare id: string
  declare sensorId: number
  declare since: number
  declare serial: string
  declare note: string
  declare notedBy: CreationOptional<string | null>
  declare notedAt: number

  static initialize(sequelize: Sequelize): typeof SensorDevice {
    return SensorDevice.init(
      {
        id: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        sensorId: { type: DataTypes.INTEGER, allowNull: false },
        since: { type: DataTypes.INTEGER, allowNull: false },
        serial: { type: DataTypes.TEXT, allowNull: false },
        note: { type: DataTypes.TEXT, allowNull: false },
        notedBy: { type: DataTypes.TEXT },
        notedAt: { type: DataTypes.INTEGER, allowNull: false },
      },
      { sequelize, modelName: 'SensorDevice', tableName: 'sensor_devices', underscored: true, timestamps: false },
    )
  }
}
