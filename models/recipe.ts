import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
  type Sequelize,
} from 'sequelize'
import type { RecipeVersion } from '@/models/recipe-version'
import { flag } from '@/models/columns'

export class Recipe extends Model<InferAttributes<Recipe>, InferCreationAttributes<Recipe>> {
  declare id: string
  declare name: string
  declare retiredAt: CreationOptional<number | null>
  declare isDemo: CreationOptional<boolean>
  declare createdAt: number

  declare versions?: NonAttribute<RecipeVersion[]>

  static initialize(sequelize: Sequelize): typeof Recipe {
    return Recipe.init(
      {
        id: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        name: { type: DataTypes.TEXT, allowNull: false },
        retiredAt: { type: DataTypes.INTEGER },
        isDemo: { ...flag('isDemo'), defaultValue: false },
        createdAt: { type: DataTypes.INTEGER, allowNull: false },
      },
      { sequelize, modelName: 'Recipe', tableName: 'recipes', underscored: true, timestamps: false },
    )
  }
}
