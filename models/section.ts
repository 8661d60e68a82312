import { DataTypes, Model, type InferAttributes, type InferCreationAttributes, type NonAttribute, type Sequelize } from 'sequelize'
import type { Piece } from '@/models/piece'
import type { Work } from '@/models/work'

export class Section extends Model<InferAttributes<Section>, InferCreationAttributes<Section>> {
  declare id: string
  declare workId: string
  /** Empty where the work is cast in one. */
  declare name: string

  declare work?: NonAttribute<Work>
  declare pieces?: NonAttribute<Piece[]>

  static initialize(sequelize: Sequelize): typeof Section {
    return Section.init(
      {
        id: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        workId: { type: DataTypes.TEXT, allowNull: false },
        name: { type: DataTypes.TEXT, allowNull: false },
      },
      { sequelize, modelName: 'Section', tableName: 'sections', underscored: true, timestamps: false },
    )
  }
}
