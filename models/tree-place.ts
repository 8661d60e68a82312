import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
  type Sequelize,
} from 'sequelize'
import type { Place } from '@/models/place'
import type { Tree } from '@/models/tree'

/** Where a tree hung and from when; the newest row that stands is where it hangs now. */
export class TreePlace extends Model<InferAttributes<TreePlace>, InferCreationAttributes<TreePlace>> {
  declare id: string
  declare treeId: string
  declare placeId: string
  declare since: number
  declare memberId: CreationOptional<string | null>
  declare withdrawnAt: CreationOptional<number | null>

  declare tree?: NonAttribute<Tree>
  declare place?: NonAttribute<Place>

  static initialize(sequelize: Sequelize): typeof TreePlace {
    return TreePlace.init(
      {
        id: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        treeId: { type: DataTypes.TEXT, allowNull: false },
        placeId: { type: DataTypes.TEXT, allowNull: false },
        since: { type: DataTypes.INTEGER, allowNull: false },
        memberId: { type: DataTypes.TEXT },
        withdrawnAt: { type: DataTypes.INTEGER },
      },
      { sequelize, modelName: 'TreePlace', tableName: 'tree_places', underscored: true, timestamps: false },
    )
  }
}
