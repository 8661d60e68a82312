import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
  type Sequelize,
} from 'sequelize'
import type { Notice } from '@/models/notice'

/** One notice to one device; kept after the device is gone. */
export class Delivery extends Model<InferAttributes<Delivery>, InferCreationAttributes<Delivery>> {
  declare id: string
  declare noticeId: string
  declare subscriptionId: string
  declare memberId: string
  declare status: 'waiting' | 'sending' | 'sent' | 'gone' | 'failed' | 'expired'
  declare attempts: CreationOptional<number>
  declare nextAttemptAt: number
  declare leaseUntil: CreationOptional<number | null>
  declare expiresAt: number
  declare sentAt: CreationOptional<number | null>
  declare lastError: CreationOptional<string | null>

  declare notice?: NonAttribute<Notice>

  static initialize(sequelize: Sequelize): typeof Delivery {
    return Delivery.init(
      {
        id: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        noticeId: { type: DataTypes.TEXT, allowNull: false },
        subscriptionId: { type: DataTypes.TEXT, allowNull: false },
        memberId: { type: DataTypes.TEXT, allowNull: false },
        status: { type: DataTypes.TEXT, allowNull: false },
        attempts: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
        nextAttemptAt: { type: DataTypes.INTEGER, allowNull: false },
        leaseUntil: { type: DataTypes.INTEGER },
        expiresAt: { type: DataTypes.INTEGER, allowNull: false },
        sentAt: { type: DataTypes.INTEGER },
        lastError: { type: DataTypes.TEXT },
      },
      { sequelize, modelName: 'Delivery', tableName: 'deliveries', underscored: true, timestamps: false },
    )
  }
}
