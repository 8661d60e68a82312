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
import type { AirMeter } from '@/lib/room/place-air'
import { flag } from '@/models/columns'

export class Place extends Model<InferAttributes<Place>, InferCreationAttributes<Place>> {
  declare id: string
  declare name: string
  declare airSpeedFansOnMps: number
  declare airSpeedFansOffMps: number
  /** Share of the time 'on' in which the fans blow on the trees. */
  declare fanDuty: CreationOptional<number>
  /** How much faster it dries than its air speed says, by finished coats; 1 until somebody accepts what they say. */
  declare airFactor: CreationOptional<number>
  /** Local day on which the speeds were measured; null: an estimate. */
  declare airMeasuredOn: CreationOptional<string | null>
  declare airMeasuredWith: CreationOptional<AirMeter | null>
  declare airMeasuredBy: CreationOptional<string | null>
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
        fanDuty: { type: DataTypes.DOUBLE, allowNull: false, defaultValue: 1 },
        airFactor: { type: DataTypes.DOUBLE, allowNull: false, defaultValue: 1 },
        airMeasuredOn: { type: DataTypes.TEXT },
        airMeasuredWith: { type: DataTypes.TEXT },
        airMeasuredBy: { type: DataTypes.TEXT },
        sensorId: { type: DataTypes.INTEGER, allowNull: false },
        retiredAt: { type: DataTypes.INTEGER },
        isDemo: { ...flag('isDemo'), defaultValue: false },
        createdAt: { type: DataTypes.INTEGER, allowNull: false },
      },
      { sequelize, modelName: 'Place', tableName: 'places', underscored: true, timestamps: false },
    )
  }
}
