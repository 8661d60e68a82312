import { DataTypes, Model, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'

/** When the fans of a place run; outside these hours they are off. Minutes after local midnight. */
export class FanHours extends Model<InferAttributes<FanHours>, InferCreationAttributes<FanHours>> {
  declare placeId: string
  /** 1 is Monday. */
  declare weekday: number
  declare onMinute: number
  declare offMinute: number

  static initialize(sequelize: Sequelize): typeof FanHours {
    return FanHours.init(
      {
        placeId: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        weekday: { type: DataTypes.INTEGER, primaryKey: true, allowNull: false },
        onMinute: { type: DataTypes.INTEGER, primaryKey: true, allowNull: false },
        offMinute: { type: DataTypes.INTEGER, allowNull: false },
      },
      { sequelize, modelName: 'FanHours', tableName: 'fan_hours', underscored: true, timestamps: false },
    )
  }
}
