import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
  type Sequelize,
} from 'sequelize'
import type { RecessClass, Spacing } from '@/lib/coats/vocabulary'
import type { CupKind, WaxSurface } from '@/lib/trees/tree-input'
import { flag } from '@/models/columns'
import type { Coat } from '@/models/coat'
import type { Hold } from '@/models/hold'
import type { LookOver } from '@/models/look-over'
import type { RecipeVersion } from '@/models/recipe-version'
import type { Release } from '@/models/release'
import type { TreeEvent } from '@/models/tree-event'
import type { TreePiece } from '@/models/tree-piece'
import type { TreePlace } from '@/models/tree-place'
import type { TreeWatch } from '@/models/tree-watch'

export class Tree extends Model<InferAttributes<Tree>, InferCreationAttributes<Tree>> {
  declare id: string
  declare tag: string
  declare recipeVersionId: string
  declare waxMassKg: number
  declare cupKind: CupKind
  declare cupVolumeL: number
  declare recessClass: RecessClass
  declare spacing: Spacing
  declare hungMassKg: CreationOptional<number | null>
  /** 'YYYY-MM-DD'. */
  declare pourDate: CreationOptional<string | null>
  declare waxSurface: CreationOptional<WaxSurface | null>
  declare isWaxAtRoomTemp: CreationOptional<boolean>
  declare isCupFirm: CreationOptional<boolean>
  declare areVentsAndCorePinsIn: CreationOptional<boolean>
  declare intakePassedAt: CreationOptional<number | null>
  declare intakePassedBy: CreationOptional<string | null>
  declare releasedAt: CreationOptional<number | null>
  declare scrappedAt: CreationOptional<number | null>
  declare isDemo: CreationOptional<boolean>
  declare createdBy: CreationOptional<string | null>
  declare createdAt: number
  declare updatedAt: number

  declare recipeVersion?: NonAttribute<RecipeVersion>
  declare treePieces?: NonAttribute<TreePiece[]>
  declare treePlaces?: NonAttribute<TreePlace[]>
  declare coats?: NonAttribute<Coat[]>
  declare holds?: NonAttribute<Hold[]>
  declare lookOvers?: NonAttribute<LookOver[]>
  declare releases?: NonAttribute<Release[]>
  declare watches?: NonAttribute<TreeWatch[]>
  declare events?: NonAttribute<TreeEvent[]>

  static initialize(sequelize: Sequelize): typeof Tree {
    return Tree.init(
      {
        id: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        tag: { type: DataTypes.TEXT, allowNull: false },
        recipeVersionId: { type: DataTypes.TEXT, allowNull: false },
        waxMassKg: { type: DataTypes.DOUBLE, allowNull: false },
        cupKind: { type: DataTypes.TEXT, allowNull: false },
        cupVolumeL: { type: DataTypes.DOUBLE, allowNull: false },
        recessClass: { type: DataTypes.TEXT, allowNull: false },
        spacing: { type: DataTypes.TEXT, allowNull: false },
        hungMassKg: { type: DataTypes.DOUBLE },
        pourDate: { type: DataTypes.TEXT },
        waxSurface: { type: DataTypes.TEXT },
        isWaxAtRoomTemp: { ...flag('isWaxAtRoomTemp'), defaultValue: false },
        isCupFirm: { ...flag('isCupFirm'), defaultValue: false },
        areVentsAndCorePinsIn: { ...flag('areVentsAndCorePinsIn'), defaultValue: false },
        intakePassedAt: { type: DataTypes.INTEGER },
        intakePassedBy: { type: DataTypes.TEXT },
        releasedAt: { type: DataTypes.INTEGER },
        scrappedAt: { type: DataTypes.INTEGER },
        isDemo: { ...flag('isDemo'), defaultValue: false },
        createdBy: { type: DataTypes.TEXT },
        createdAt: { type: DataTypes.INTEGER, allowNull: false },
        updatedAt: { type: DataTypes.INTEGER, allowNull: false },
      },
      { sequelize, modelName: 'Tree', tableName: 'trees', underscored: true, timestamps: false },
    )
  }
}
