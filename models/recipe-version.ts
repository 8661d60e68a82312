import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
  type Sequelize,
} from 'sequelize'
import type { Recipe } from '@/models/recipe'
import type { RecipeCoat } from '@/models/recipe-coat'

export class RecipeVersion extends Model<InferAttributes<RecipeVersion>, InferCreationAttributes<RecipeVersion>> {
  declare id: string
  declare recipeId: string
  declare version: number
  /** Null until somebody has checked the needs against finished coats. */
  declare calibratedAt: CreationOptional<number | null>
  /** Why this version, in its maker's words. */
  declare note: CreationOptional<string>
  declare createdBy: CreationOptional<string | null>
  declare createdAt: number

  declare recipe?: NonAttribute<Recipe>
  declare coats?: NonAttribute<RecipeCoat[]>

  static initialize(sequelize: Sequelize): typeof RecipeVersion {
    return RecipeVersion.init(
      {
        id: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        recipeId: { type: DataTypes.TEXT, allowNull: false },
        version: { type: DataTypes.INTEGER, allowNull: false },
        calibratedAt: { type: DataTypes.INTEGER },
        note: { type: DataTypes.TEXT, allowNull: false, defaultValue: '' },
        createdBy: { type: DataTypes.TEXT },
        createdAt: { type: DataTypes.INTEGER, allowNull: false },
      },
      { sequelize, modelName: 'RecipeVersion', tableName: 'recipe_versions', underscored: true, timestamps: false },
    )
  }
}
