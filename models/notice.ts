import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
  type Sequelize,
} from 'sequelize'
import type { Delivery } from '@/models/delivery'
import type { Tree } from '@/models/tree'

export class Notice extends Model<InferAttributes<Notice>, InferCreationAttributes<Notice>> {
  declare id: string
  declare kind: string
  declare subjectType: string
  declare subjectId: string
  declare episode: number
  declare treeId: CreationOptional<string | null>
  declare title: string
  declare body: string
  declare urgency: 'normal' | 'high'
  declare ttlSeconds: number
  declare openedAt: number
  declare closedAt: CreationOptional<number | null>
  declare closeReason: CreationOptional<string | null>

  declare tree?: NonAttribute<Tree>
  declare deliveries?: NonAttribute<Delivery[]>

  static initialize(sequelize: Sequelize): typeof Notice {
    return Notice.init(
      {
        id: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        kind: { type: DataTypes.TEXT, allowNull: false },
        subjectType: { type: DataTypes.TEXT, allowNull: false },
        subjectId: { type: DataTypes.TEXT, allowNull: false },
        episode: { type: DataTypes.INTEGER, allowNull: false },
        treeId: { type: DataTypes.TEXT },
        title: { type: DataTypes.TEXT, allowNull: false },
        body: { type: DataTypes.TEXT, allowNull: false },
        urgency: { type: DataTypes.TEXT, allowNull: false },
        ttlSeconds: { type: DataTypes.INTEGER, allowNull: false },
        openedAt: { type: DataTypes.INTEGER, allowNull: false },
        closedAt: { type: DataTypes.INTEGER },
        closeReason: { type: DataTypes.TEXT },
      },
      { sequelize, modelName: 'Notice', tableName: 'notices', underscored: true, timestamps: false },
    )
  }
}
