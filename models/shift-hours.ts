import { DataTypes, Model, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'

/** A weekday without a row is closed. Minutes after local midnight. */
export class ShiftHours extends Model<InferAttributes<ShiftHours>, InferCreationAttributes<ShiftHours>> {
  /** 1 is Monday. */
  declare weekday: number
  declare opensMinute: number
  declare closesMinute: number

  static initialize(sequelize: Sequelize): typeof ShiftHours {
    return ShiftHours.init(
      {
        weekday: { type: DataTypes.INTEGER, primaryKey: true, allowNull: false },
        opensMinute: { type: DataTypes.INTEGER, allowNull: false },
        closesMinute: { type: DataTypes.INTEGER, allowNull: false },
      },
      { sequelize, modelName: 'ShiftHours', tableName: 'shift_hours', underscored: true, timestamps: false },
    )
  }
}
