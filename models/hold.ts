import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
  type Sequelize,
} from 'sequelize'
import type { Member } from '@/models/member'
import type { Tree } from '@/models/tree'

export class Hold extends Model<InferAttributes<Hold>, InferCreationAttributes<Hold>> {
  declare id: string
  declare treeId: string
  declare reason: string
  declare heldBy: string
  declare heldAt: number
  declare liftedBy: CreationOptional<string | null>
  declare liftedAt: CreationOptional<number | null>
  declare liftReason: CreationOptional<string | null>

  declare tree?: NonAttribute<Tree>
  declare holder?: NonAttribute<Member>
  declare lifter?: NonAttribute<Member>

  static initialize(sequelize: Sequelize): typeof Hold {
    return Hold.init(
      {
        id: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        treeId: { type: DataTypes.TEXT, allowNull: false },
        reason: { type: DataTypes.TEXT, allowNull: false },
        heldBy: { type: DataTypes.TEXT, allowNull: false },
        heldAt: { type: DataTypes.INTEGER, allowNull: false },
        liftedBy: { type: DataTypes.TEXT },
        liftedAt: { type: DataTypes.INTEGER },
        liftReason: { type: DataTypes.TEXT },
      },
      { sequelize, modelName: 'Hold', tableName: 'holds', underscored: true, timestamps: false },
    )
  }
}
