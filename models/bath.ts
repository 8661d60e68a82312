import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
  type Sequelize,
} from 'sequelize'
import type { BathStir } from '@/models/bath-stir'
import { flag } from '@/models/columns'

export class Bath extends Model<InferAttributes<Bath>, InferCreationAttributes<Bath>> {
  declare id: string
  declare name: string
  declare kind: 'face' | 'backup'
  declare retiredAt: CreationOptional<number | null>
  declare isDemo: CreationOptional<boolean>
  declare createdAt: number

  declare stirs?: NonAttribute<BathStir[]>

  static initialize(sequelize: Sequelize): typeof Bath {
    return Bath.init(
      {
        id: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        name: { type: DataTypes.TEXT, allowNull: false },
        kind: { type: DataTypes.TEXT, allowNull: false },
        retiredAt: { type: DataTypes.INTEGER },
        isDemo: { ...flag('isDemo'), defaultValue: false },
        createdAt: { type: DataTypes.INTEGER, allowNull: false },
      },
      { sequelize, modelName: 'Bath', tableName: 'baths', underscored: true, timestamps: false },
    )
  }
}
