import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'
import { flag } from '@/models/columns'

/** One row per sensor and whole UTC hour, worked out from its readings. */
export class DoseHour extends Model<InferAttributes<DoseHour>, InferCreationAttributes<DoseHour>> {
  declare sensorId: number
  declare hourStart: number
  declare doseLikely: number
  declare doseLow: number
  declare doseHigh: number
  declare coveredMinutes: number
  declare gapMinutes: number
  declare hasTyped: boolean
  declare typedCount: number
  declare readingCount: number
  declare meanAirTempC: CreationOptional<number | null>
  declare minAirTempC: CreationOptional<number | null>
  declare maxAirTempC: CreationOptional<number | null>
  declare meanRelHumidityPct: CreationOptional<number | null>
  declare maxRelHumidityPct: CreationOptional<number | null>

  static initialize(sequelize: Sequelize): typeof DoseHour {
    return DoseHour.init(
      {
        sensorId: { type: DataTypes.INTEGER, primaryKey: true, allowNull: false },
        hourStart: { type: DataTypes.INTEGER, primaryKey: true, allowNull: false },
        doseLikely: { type: DataTypes.DOUBLE, allowNull: false },
        doseLow: { type: DataTypes.DOUBLE, allowNull: false },
        doseHigh: { type: DataTypes.DOUBLE, allowNull: false },
        coveredMinutes: { type: DataTypes.DOUBLE, allowNull: false },
        gapMinutes: { type: DataTypes.DOUBLE, allowNull: false },
        hasTyped: flag('hasTyped'),
        typedCount: { type: DataTypes.INTEGER, allowNull: false },
        readingCount: { type: DataTypes.INTEGER, allowNull: false },
        meanAirTempC: { type: DataTypes.DOUBLE },
        minAirTempC: { type: DataTypes.DOUBLE },
        maxAirTempC: { type: DataTypes.DOUBLE },
        meanRelHumidityPct: { type: DataTypes.DOUBLE },
        maxRelHumidityPct: { type: DataTypes.DOUBLE },
      },
      { sequelize, modelName: 'DoseHour', tableName: 'dose_hours', underscored: true, timestamps: false },
    )
  }
}
