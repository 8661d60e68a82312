import { DataTypes, Model, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'
import type { MessageOutcome } from '@/lib/mqtt/sort-messages'

/** The last message on one topic, and what became of it. */
export class MqttMessage extends Model<InferAttributes<MqttMessage>, InferCreationAttributes<MqttMessage>> {
  declare topic: string
  declare receivedAt: number
  /** Its beginning. */
  declare text: string
  declare sha256: string
  declare outcome: MessageOutcome
  declare reason: string

  static initialize(sequelize: Sequelize): typeof MqttMessage {
    return MqttMessage.init(
      {
        topic: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        receivedAt: { type: DataTypes.INTEGER, allowNull: false },
        text: { type: DataTypes.TEXT, allowNull: false },
        sha256: { type: DataTypes.TEXT, allowNull: false },
        outcome: { type: DataTypes.TEXT, allowNull: false },
        reason: { type: DataTypes.TEXT, allowNull: false, defaultValue: '' },
      },
      { sequelize, modelName: 'MqttMessage', tableName: 'mqtt_messages', underscored: true, timestamps: false },
    )
  }
}
