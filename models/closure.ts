import { DataTypes, Model, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'

/** Days on which nobody dips, both ends included: a holiday, a fair, the week between the years. */
export class Closure extends Model<InferAttributes<Closure>, InferCreationAttributes<Closure>> {
  declare id: string
  /** 'YYYY-MM-DD' in the foundry's zone. */
  declare firstDay: string
  declare lastDay: string
  declare name: string
  declare createdAt: number

  static initialize(sequelize: Sequelize): typeof Closure {
    return Closure.init(
      {
        id: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        firstDay: { type: DataTypes.TEXT, allowNull: false },
        lastDay: { type: DataTypes.TEXT, allowNull: false },
        name: { type: DataTypes.TEXT, allowNull: false },
        createdAt: { type: DataTypes.INTEGER, allowNull: false },
      },
      { sequelize, modelName: 'Closure', tableName: 'closures', underscored: true, timestamps: false },
    )
  }
}
