import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
  type Sequelize,
} from 'sequelize'
import type { Place } from '@/models/place'
import type { SensorToken } from '@/models/sensor-token'
import { flag } from '@/models/columns'

export class Sensor extends Model<InferAttributes<Sensor>, InferCreationAttributes<Sensor>> {
  declare id: CreationOptional<number>
  declare name: string
  declare kind: 'logger' | 'wall hygrometer'
  declare retiredAt: CreationOptional<number | null>
  /** Readings from here on are still to be brought to the offsets; null once they are. */
  declare correctFrom: CreationOptional<number | null>
  declare batteryPct: CreationOptional<number | null>
  declare batteryAt: CreationOptional<number | null>
  /** How far its clock is ahead of the server's; null where it goes right, or nobody knows. */
  declare clockOffsetSeconds: CreationOptional<number | null>
  declare isDemo: CreationOptional<boolean>
  declare createdAt: number

  declare tokens?: NonAttribute<SensorToken[]>
  declare places?: NonAttribute<Place[]>

  static initialize(sequelize: Sequelize): typeof Sensor {
    return Sensor.init(
      {
        id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
        name: { type: DataTypes.TEXT, allowNull: false },
        kind: { type: DataTypes.TEXT, allowNull: false },
        retiredAt: { type: DataTypes.INTEGER },
        correctFrom: { type: DataTypes.INTEGER },
        batteryPct: { type: DataTypes.DOUBLE },
        batteryAt: { type: DataTypes.INTEGER },
        clockOffsetSeconds: { type: DataTypes.INTEGER },
        isDemo: { ...flag('isDemo'), defaultValue: false },
        createdAt: { type: DataTypes.INTEGER, allowNull: false },
      },
      { sequelize, modelName: 'Sensor', tableName: 'sensors', underscored: true, timestamps: false },
    )
  }
}
