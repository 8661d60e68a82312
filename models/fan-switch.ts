import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'
import type { FanState } from '@/lib/drying/types'

/** What a person said of a place's fans: only added to. */
export class FanSwitch extends Model<InferAttributes<FanSwitch>, InferCreationAttributes<FanSwitch>> {
  declare id: CreationOptional<number>
  declare placeId: string
  declare at: number
  declare state: FanState
  declare memberId: string
  declare operationId: string

  static initialize(sequelize: Sequelize): typeof FanSwitch {
    return FanSwitch.init(
      {
        id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
        placeId: { type: DataTypes.TEXT, allowNull: false },
        at: { type: DataTypes.INTEGER, allowNull: false },
        state: { type: DataTypes.TEXT, allowNull: false },
        memberId: { type: DataTypes.TEXT, allowNull: false },
        operationId: { type: DataTypes.TEXT, allowNull: false },
      },
      { sequelize, modelName: 'FanSwitch', tableName: 'fan_switches', underscored: true, timestamps: false },
    )
  }
}
