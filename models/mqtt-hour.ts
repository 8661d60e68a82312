import { DataTypes, Model, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'

/** How much came from the broker in one hour. */
export class MqttHour extends Model<InferAttributes<MqttHour>, InferCreationAttributes<MqttHour>> {
  declare hourStart: number
  declare messageCount: number
  declare readingCount: number
  declare refusedCount: number
  /** Messages that came faster than they could be kept. */
  declare droppedCount: number

  static initialize(sequelize: Sequelize): typeof MqttHour {
    return MqttHour.init(
      {
        hourStart: { type: DataTypes.INTEGER, primaryKey: true, allowNull: false },
        messageCount: { type: DataTypes.INTEGER, allowNull: false },
        readingCount: { type: DataTypes.INTEGER, allowNull: false },
        refusedCount: { type: DataTypes.INTEGER, allowNull: false },
        droppedCount: { type: DataTypes.INTEGER, allowNull: false },
      },
      { sequelize, modelName: 'MqttHour', tableName: 'mqtt_hours', underscored: true, timestamps: false },
    )
  }
}
