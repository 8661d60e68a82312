import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
  type Sequelize,
} from 'sequelize'
import type { FanHours } from '@/models/fan-hours'
import type { Sensor } from '@/models/sensor'
import { flag } from '@/models/columns'

export class Place extends Model<InferAttributes<Place>, InferCreationAttributes<Place>> {
  declare id: string
  declare name: string
  declare airSpeedFansOnMps: number
  declare airSpeedFansOffMps: number
  declare sensorId: number
  declare retiredAt: CreationOptional<number | null>
  declare isDemo: CreationOptional<boolean>
  declare createdAt: number

  declare sensor?: NonAttribute<Sensor>
  declare fanHours?: NonAttribute<FanHours[]>

  static initialize(sequelize: Sequelize): typeof Place {
    return Place.init(
      {
        id: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        name: { type: DataTypes.TEXT, allowNull: false },
        airSpeedFansOnMps: { type: DataTypes.DOUBLE, allowNull: false },
        airSpeedFansOffMps: { type: DataTypes.DOUBLE, allowNull: false },
        sensorId: { type: DataTypes.INTEGER, allowNull: false },
        retiredAt: { type: DataTypes.INTEGER },
        isDemo: { ...flag('isDemo'), defaultValue: false },
        createdAt: { type: DataTypes.INTEGER, allowNull: false },
      },
      { sequelize, modelName: 'Place', tableName: 'places', underscored: true, timestamps: false },
    )
  }
}
