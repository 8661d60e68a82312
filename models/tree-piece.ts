import { DataTypes, Model, type InferAttributes, type InferCreationAttributes, type NonAttribute, type Sequelize } from 'sequelize'
import type { Piece } from '@/models/piece'
import type { Tree } from '@/models/tree'

export class TreePiece extends Model<InferAttributes<TreePiece>, InferCreationAttributes<TreePiece>> {
  declare treeId: string
  declare pieceId: string

  declare piece?: NonAttribute<Piece>
  declare tree?: NonAttribute<Tree>

  static initialize(sequelize: Sequelize): typeof TreePiece {
    return TreePiece.init(
      {
        treeId: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        pieceId: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
      },
      { sequelize, modelName: 'TreePiece', tableName: 'tree_pieces', underscored: true, timestamps: false },
    )
  }
}
