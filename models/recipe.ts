import { DataTypes, Model, type InferAttributes, type InferCreationAttributes, type NonAttribute, type Sequelize } from 'sequelize'
import type { RecipeVersion } from '@/models/recipe-version'

export class Recipe extends Model<InferAttributes<Recipe>, InferCreationAttributes<Recipe>> {
  declare id: string
  declare name: string
  declare createdAt: number

  declare versions?: NonAttribute<RecipeVersion[]>

  static initialize(sequelize: Sequelize): typeof Recipe {
    return Recipe.init(
      {
        id: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        name: { type: DataTypes.TEXT, allowNull: false },
        createdAt: { type: DataTypes.INTEGER, allowNull: false },
      },
      { sequelize, modelName: 'Recipe', tableName: 'recipes', underscored: true, timestamps: false },
    )
  }
}
