import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
  type Sequelize,
} from 'sequelize'
import { json } from '@/models/columns'
import type { Member } from '@/models/member'
import type { Tree } from '@/models/tree'

/** History of a tree: only added to. Without a member it is Kilnward itself. */
export class TreeEvent extends Model<InferAttributes<TreeEvent>, InferCreationAttributes<TreeEvent>> {
  declare id: CreationOptional<number>
  declare treeId: string
  declare kind: string
  declare memberId: CreationOptional<string | null>
  /** Browser and system of the member, in words; empty for Kilnward itself. */
  declare device: CreationOptional<string>
  declare at: number
  declare detail: Record<string, unknown>

  declare tree?: NonAttribute<Tree>
  declare member?: NonAttribute<Member>

  static initialize(sequelize: Sequelize): typeof TreeEvent {
    return TreeEvent.init(
      {
        id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
        treeId: { type: DataTypes.TEXT, allowNull: false },
        kind: { type: DataTypes.TEXT, allowNull: false },
        memberId: { type: DataTypes.TEXT },
        device: { type: DataTypes.TEXT, allowNull: false, defaultValue: '' },
        at: { type: DataTypes.INTEGER, allowNull: false },
        detail: json('detail'),
      },
      { sequelize, modelName: 'TreeEvent', tableName: 'tree_events', underscored: true, timestamps: false },
    )
  }
}
