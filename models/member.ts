import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
  type Sequelize,
} from 'sequelize'
import type { Role } from '@/lib/members/roles'
import type { PushSubscription } from '@/models/push-subscription'

export class Member extends Model<InferAttributes<Member>, InferCreationAttributes<Member>> {
  declare id: string
  declare name: string
  declare email: string
  declare role: Role
  declare passwordHash: string
  declare disabledAt: CreationOptional<number | null>
  declare createdAt: number

  declare pushSubscriptions?: NonAttribute<PushSubscription[]>

  static initialize(sequelize: Sequelize): typeof Member {
    return Member.init(
      {
        id: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        name: { type: DataTypes.TEXT, allowNull: false },
        email: { type: DataTypes.TEXT, allowNull: false },
        role: { type: DataTypes.TEXT, allowNull: false },
        passwordHash: { type: DataTypes.TEXT, allowNull: false },
        disabledAt: { type: DataTypes.INTEGER },
        createdAt: { type: DataTypes.INTEGER, allowNull: false },
      },
      { sequelize, modelName: 'Member', tableName: 'members', underscored: true, timestamps: false },
    )
  }
}
