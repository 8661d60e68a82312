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

export class PushSubscription extends Model<InferAttributes<PushSubscription>, InferCreationAttributes<PushSubscription>> {
  declare id: string
  declare memberId: string
  declare endpoint: string
  declare p256dh: string
  declare auth: string
  declare vapidPublicKey: string
  declare label: CreationOptional<string>
  declare scope: 'every tree' | 'watched trees'
  declare createdAt: number
  declare lastOkAt: CreationOptional<number | null>
  declare failingSince: CreationOptional<number | null>
  declare lastError: CreationOptional<string | null>

  declare member?: NonAttribute<Member>

  static initialize(sequelize: Sequelize): typeof PushSubscription {
    return PushSubscription.init(
      {
        id: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        memberId: { type: DataTypes.TEXT, allowNull: false },
        endpoint: { type: DataTypes.TEXT, allowNull: false },
        p256dh: { type: DataTypes.TEXT, allowNull: false },
        auth: { type: DataTypes.TEXT, allowNull: false },
        vapidPublicKey: { type: DataTypes.TEXT, allowNull: false },
        label: { type: DataTypes.TEXT, allowNull: false, defaultValue: '' },
        scope: { type: DataTypes.TEXT, allowNull: false },
        createdAt: { type: DataTypes.INTEGER, allowNull: false },
        lastOkAt: { type: DataTypes.INTEGER },
        failingSince: { type: DataTypes.INTEGER },
        lastError: { type: DataTypes.TEXT },
      },
      { sequelize, modelName: 'PushSubscription', tableName: 'push_subscriptions', underscored: true, timestamps: false },
    )
  }
}
