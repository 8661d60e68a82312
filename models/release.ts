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

export class Release extends Model<InferAttributes<Release>, InferCreationAttributes<Release>> {
  declare id: string
  declare treeId: string
  declare releasedBy: string
  declare releasedAt: number
  declare confirmedBy: CreationOptional<'touch' | 'weight' | 'temperature' | null>
  declare withdrawnAt: CreationOptional<number | null>
  declare withdrawnBy: CreationOptional<string | null>
  declare withdrawnReason: CreationOptional<string | null>

  declare tree?: NonAttribute<Tree>
  declare releaser?: NonAttribute<Member>

  static initialize(sequelize: Sequelize): typeof Release {
    return Release.init(
      {
        id: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        treeId: { type: DataTypes.TEXT, allowNull: false },
        releasedBy: { type: DataTypes.TEXT, allowNull: false },
        releasedAt: { type: DataTypes.INTEGER, allowNull: false },
        confirmedBy: { type: DataTypes.TEXT },
        withdrawnAt: { type: DataTypes.INTEGER },
        withdrawnBy: { type: DataTypes.TEXT },
        withdrawnReason: { type: DataTypes.TEXT },
      },
      { sequelize, modelName: 'Release', tableName: 'releases', underscored: true, timestamps: false },
    )
  }
}
