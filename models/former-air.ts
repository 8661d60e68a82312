import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'
import type { FanHours } from '@/lib/drying/types'
import { json } from '@/models/columns'

/** How the air at a place was until it was changed. */
export class FormerAir extends Model<InferAttributes<FormerAir>, InferCreationAttributes<FormerAir>> {
  declare id: string
  declare placeId: string
  declare until: number
  declare airSpeedFansOnMps: number
  declare airSpeedFansOffMps: number
  declare fanDuty: CreationOptional<number>
  declare airFactor: CreationOptional<number>
  declare sensorId: number
  declare fanHours: FanHours[]

  static initialize(sequelize: Sequelize): typeof FormerAir {
    return FormerAir.init(
      {
        id: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        placeId: { type: DataTypes.TEXT, allowNull: false },
        until: { type: DataTypes.INTEGER, allowNull: false },
        airSpeedFansOnMps: { type: DataTypes.DOUBLE, allowNull: false },
        airSpeedFansOffMps: { type: DataTypes.DOUBLE, allowNull: false },
        fanDuty: { type: DataTypes.DOUBLE, allowNull: false, defaultValue: 1 },
        airFactor: { type: DataTypes.DOUBLE, allowNull: false, defaultValue: 1 },
        sensorId: { type: DataTypes.INTEGER, allowNull: false },
        fanHours: json('fanHours'),
      },
      { sequelize, modelName: 'FormerAir', tableName: 'former_airs', underscored: true, timestamps: false },
    )
  }
}
