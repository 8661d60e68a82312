import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'
import type { CalibrationScope } from '@/lib/calibration/types'
import type { RecessClass } from '@/lib/coats/vocabulary'

/** A figure that somebody took over from finished coats, or went back on. Never changes. */
export class Calibration extends Model<InferAttributes<Calibration>, InferCreationAttributes<Calibration>> {
  declare id: string
  declare scope: CalibrationScope
  declare recipeId: CreationOptional<string | null>
  declare recipeVersionId: CreationOptional<string | null>
  declare coatNumber: CreationOptional<number | null>
  declare placeId: CreationOptional<string | null>
  declare recessClass: CreationOptional<Exclude<RecessClass, 'none'> | null>
  declare figureBefore: number
  declare figureAfter: number
  declare spreadBefore: CreationOptional<number | null>
  declare spreadAfter: CreationOptional<number | null>
  declare coatsBefore: CreationOptional<number | null>
  declare coatsAfter: CreationOptional<number | null>
  declare memberId: string
  declare at: number
  declare goesBackOn: CreationOptional<string | null>

  static initialize(sequelize: Sequelize): typeof Calibration {
    return Calibration.init(
      {
        id: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        scope: { type: DataTypes.TEXT, allowNull: false },
        recipeId: { type: DataTypes.TEXT },
        recipeVersionId: { type: DataTypes.TEXT },
        coatNumber: { type: DataTypes.INTEGER },
        placeId: { type: DataTypes.TEXT },
        recessClass: { type: DataTypes.TEXT },
        figureBefore: { type: DataTypes.DOUBLE, allowNull: false },
        figureAfter: { type: DataTypes.DOUBLE, allowNull: false },
        spreadBefore: { type: DataTypes.DOUBLE },
        spreadAfter: { type: DataTypes.DOUBLE },
        coatsBefore: { type: DataTypes.INTEGER },
        coatsAfter: { type: DataTypes.INTEGER },
        memberId: { type: DataTypes.TEXT, allowNull: false },
        at: { type: DataTypes.INTEGER, allowNull: false },
        goesBackOn: { type: DataTypes.TEXT },
      },
      { sequelize, modelName: 'Calibration', tableName: 'calibrations', underscored: true, timestamps: false },
    )
  }
}
