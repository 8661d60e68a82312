import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'
import type { SetAsideReason } from '@/lib/room/reading-marks'

/** What a sensor sent and the clock does not count, as the device said it. */
export class SetAsideReading extends Model<InferAttributes<SetAsideReading>, InferCreationAttributes<SetAsideReading>> {
  declare sensorId: number
  declare measuredAt: number
  declare reason: SetAsideReason
  declare airTempC: number
  declare relHumidityPct: number
  declare pressurePa: CreationOptional<number | null>
  declare altitudePressurePa: CreationOptional<number | null>
  declare source: 'sensor' | 'typed'
  declare enteredBy: CreationOptional<string | null>
  declare receivedAt: number

  static initialize(sequelize: Sequelize): typeof SetAsideReading {
    return SetAsideReading.init(
      {
        sensorId: { type: DataTypes.INTEGER, primaryKey: true, allowNull: false },
        measuredAt: { type: DataTypes.INTEGER, primaryKey: true, allowNull: false },
        reason: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        airTempC: { type: DataTypes.DOUBLE, allowNull: false },
        relHumidityPct: { type: DataTypes.DOUBLE, allowNull: false },
        pressurePa: { type: DataTypes.DOUBLE },
        altitudePressurePa: { type: DataTypes.DOUBLE },
        source: { type: DataTypes.TEXT, allowNull: false },
        enteredBy: { type: DataTypes.TEXT },
        receivedAt: { type: DataTypes.INTEGER, allowNull: false },
      },
      { sequelize, modelName: 'SetAsideReading', tableName: 'set_aside_readings', underscored: true, timestamps: false },
    )
  }
}
