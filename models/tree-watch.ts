import { DataTypes, Model, type InferAttributes, type InferCreationAttributes, type NonAttribute, type Sequelize } from 'sequelize'
import type { Member } from '@/models/member'
import type { Tree } from '@/models/tree'

/** 'Tell me when dry': this member hears of this tree. */
export class TreeWatch extends Model<InferAttributes<TreeWatch>, InferCreationAttributes<TreeWatch>> {
  declare treeId: string
  declare memberId: string
  declare createdAt: number

  declare tree?: NonAttribute<Tree>
  declare member?: NonAttribute<Member>

  static initialize(sequelize: Sequelize): typeof TreeWatch {
    return TreeWatch.init(
      {
        treeId: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        memberId: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        createdAt: { type: DataTypes.INTEGER, allowNull: false },
      },
      { sequelize, modelName: 'TreeWatch', tableName: 'tree_watches', underscored: true, timestamps: false },
    )
  }
}
