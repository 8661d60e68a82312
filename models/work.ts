import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
  type Sequelize,
} from 'sequelize'
import type { Section } from '@/models/section'
import { flag } from '@/models/columns'

export class Work extends Model<InferAttributes<Work>, InferCreationAttributes<Work>> {
  declare id: string
  declare title: string
  /** How many there will be; null where nobody has said so. */
  declare editionSize: CreationOptional<number | null>
  declare isDemo: CreationOptional<boolean>
  declare createdAt: number

  declare sections?: NonAttribute<Section[]>

  static initialize(sequelize: Sequelize): typeof Work {
    return Work.init(
      {
        id: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        title: { type: DataTypes.TEXT, allowNull: false },
        editionSize: { type: DataTypes.INTEGER },
        isDemo: { ...flag('isDemo'), defaultValue: false },
        createdAt: { type: DataTypes.INTEGER, allowNull: false },
      },
      { sequelize, modelName: 'Work', tableName: 'works', underscored: true, timestamps: false },
    )
  }
}
