import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
  type Sequelize,
} from 'sequelize'
import { flag } from '@/models/columns'
import type { Coat } from '@/models/coat'
import type { Member } from '@/models/member'
import type { Tree } from '@/models/tree'

/** Counts only for the coat that was outermost. */
export class LookOver extends Model<InferAttributes<LookOver>, InferCreationAttributes<LookOver>> {
  declare id: string
  declare treeId: string
  declare coatId: string
  declare note: CreationOptional<string>
  declare wasDriedOut: boolean
  declare memberId: string
  declare lookedOverAt: number

  declare tree?: NonAttribute<Tree>
  declare coat?: NonAttribute<Coat>
  declare member?: NonAttribute<Member>

  static initialize(sequelize: Sequelize): typeof LookOver {
    return LookOver.init(
      {
        id: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        treeId: { type: DataTypes.TEXT, allowNull: false },
        coatId: { type: DataTypes.TEXT, allowNull: false },
        note: { type: DataTypes.TEXT, allowNull: false, defaultValue: '' },
        wasDriedOut: flag('wasDriedOut'),
        memberId: { type: DataTypes.TEXT, allowNull: false },
        lookedOverAt: { type: DataTypes.INTEGER, allowNull: false },
      },
      { sequelize, modelName: 'LookOver', tableName: 'look_overs', underscored: true, timestamps: false },
    )
  }
}
