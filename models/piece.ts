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
import type { TreePiece } from '@/models/tree-piece'

export class Piece extends Model<InferAttributes<Piece>, InferCreationAttributes<Piece>> {
  declare id: string
  declare sectionId: string
  declare editionNumber: number
  declare recastOf: CreationOptional<string | null>
  declare createdAt: number

  declare section?: NonAttribute<Section>
  declare treePiece?: NonAttribute<TreePiece>

  static initialize(sequelize: Sequelize): typeof Piece {
    return Piece.init(
      {
        id: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        sectionId: { type: DataTypes.TEXT, allowNull: false },
        editionNumber: { type: DataTypes.INTEGER, allowNull: false },
        recastOf: { type: DataTypes.TEXT },
        createdAt: { type: DataTypes.INTEGER, allowNull: false },
      },
      { sequelize, modelName: 'Piece', tableName: 'pieces', underscored: true, timestamps: false },
    )
  }
}
