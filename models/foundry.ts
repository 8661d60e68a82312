import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'
import { flag } from '@/models/columns'

export class Foundry extends Model<InferAttributes<Foundry>, InferCreationAttributes<Foundry>> {
  declare id: number
  declare name: string
  declare timeZone: string
  declare altitudeM: number
  declare isDemo: CreationOptional<boolean>
  declare createdAt: number

  static initialize(sequelize: Sequelize): typeof Foundry {
    return Foundry.init(
      {
        id: { type: DataTypes.INTEGER, primaryKey: true, allowNull: false },
        name: { type: DataTypes.TEXT, allowNull: false },
        timeZone: { type: DataTypes.TEXT, allowNull: false },
        altitudeM: { type: DataTypes.DOUBLE, allowNull: false },
        isDemo: { ...flag('isDemo'), defaultValue: false },
        createdAt: { type: DataTypes.INTEGER, allowNull: false },
      },
      { sequelize, modelName: 'Foundry', tableName: 'foundry', underscored: true, timestamps: false },
    )
  }
}
