import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
  type Sequelize,
} from 'sequelize'
import type { CoatKind, Guard, Stucco } from '@/lib/coats/vocabulary'
import { flag } from '@/models/columns'
import type { Bath } from '@/models/bath'
import type { RecipeVersion } from '@/models/recipe-version'

/** Never changes: a changed recipe is a new version. */
export class RecipeCoat extends Model<InferAttributes<RecipeCoat>, InferCreationAttributes<RecipeCoat>> {
  declare recipeVersionId: string
  declare number: number
  declare kind: CoatKind
  declare bathId: string
  declare stucco: Stucco
  declare needReferenceHours: number
  declare moistureTarget: number
  declare guard: Guard
  declare drainSeconds: number
  declare longestWaitHours: number
  declare isPrewet: boolean
  declare readAloud: string
  declare needSpread: CreationOptional<number>
  declare calibratedByCoats: CreationOptional<number | null>

  declare recipeVersion?: NonAttribute<RecipeVersion>
  declare bath?: NonAttribute<Bath>

  static initialize(sequelize: Sequelize): typeof RecipeCoat {
    return RecipeCoat.init(
      {
        recipeVersionId: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        number: { type: DataTypes.INTEGER, primaryKey: true, allowNull: false },
        kind: { type: DataTypes.TEXT, allowNull: false },
        bathId: { type: DataTypes.TEXT, allowNull: false },
        stucco: { type: DataTypes.TEXT, allowNull: false },
        needReferenceHours: { type: DataTypes.DOUBLE, allowNull: false },
        moistureTarget: { type: DataTypes.DOUBLE, allowNull: false },
        guard: { type: DataTypes.TEXT, allowNull: false },
        drainSeconds: { type: DataTypes.INTEGER, allowNull: false },
        longestWaitHours: { type: DataTypes.DOUBLE, allowNull: false },
        isPrewet: flag('isPrewet'),
        readAloud: { type: DataTypes.TEXT, allowNull: false },
        needSpread: { type: DataTypes.DOUBLE, allowNull: false, defaultValue: 0.25 },
        calibratedByCoats: { type: DataTypes.INTEGER },
      },
      { sequelize, modelName: 'RecipeCoat', tableName: 'recipe_coats', underscored: true, timestamps: false },
    )
  }
}
