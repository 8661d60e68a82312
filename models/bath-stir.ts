import { DataTypes, Model, type InferAttributes, type InferCreationAttributes, type NonAttribute, type Sequelize } from 'sequelize'
import type { Bath } from '@/models/bath'
import type { Member } from '@/models/member'

export class BathStir extends Model<InferAttributes<BathStir>, InferCreationAttributes<BathStir>> {
  declare id: string
  declare bathId: string
  declare stirredAt: number
  declare memberId: string

  declare bath?: NonAttribute<Bath>
  declare member?: NonAttribute<Member>

  static initialize(sequelize: Sequelize): typeof BathStir {
    return BathStir.init(
      {
        id: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        bathId: { type: DataTypes.TEXT, allowNull: false },
        stirredAt: { type: DataTypes.INTEGER, allowNull: false },
        memberId: { type: DataTypes.TEXT, allowNull: false },
      },
      { sequelize, modelName: 'BathStir', tableName: 'bath_stirs', underscored: true, timestamps: false },
    )
  }
}
