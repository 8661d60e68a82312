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

export class Session extends Model<InferAttributes<Session>, InferCreationAttributes<Session>> {
  declare id: string
  declare memberId: string
  declare userAgent: CreationOptional<string>
  declare createdAt: number
  declare expiresAt: number
  declare endedAt: CreationOptional<number | null>

  declare member?: NonAttribute<Member>

  static initialize(sequelize: Sequelize): typeof Session {
    return Session.init(
      {
        id: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        memberId: { type: DataTypes.TEXT, allowNull: false },
        userAgent: { type: DataTypes.TEXT, allowNull: false, defaultValue: '' },
        createdAt: { type: DataTypes.INTEGER, allowNull: false },
        expiresAt: { type: DataTypes.INTEGER, allowNull: false },
        endedAt: { type: DataTypes.INTEGER },
      },
      { sequelize, modelName: 'Session', tableName: 'sessions', underscored: true, timestamps: false },
    )
  }
}
