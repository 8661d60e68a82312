import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'
import { flag, json } from '@/models/columns'

/** The broker that Kilnward listens to, one row at the most: what is set, and how the connection stands. */
export class MqttBroker extends Model<InferAttributes<MqttBroker>, InferCreationAttributes<MqttBroker>> {
  declare id: number
  declare isOn: boolean
  declare isTls: boolean
  declare host: string
  declare port: number
  declare userName: CreationOptional<string>
  declare sealedPassword: CreationOptional<string | null>
  declare clientId: string
  /** Epoch milliseconds; null while there is no connection. */
  declare connectedSince: CreationOptional<number | null>
  declare awaySince: CreationOptional<number | null>
  declare trouble: CreationOptional<string>
  declare heldFilters: CreationOptional<string[]>

  static initialize(sequelize: Sequelize): typeof MqttBroker {
    return MqttBroker.init(
      {
        id: { type: DataTypes.INTEGER, primaryKey: true, allowNull: false },
        isOn: flag('isOn'),
        isTls: flag('isTls'),
        host: { type: DataTypes.TEXT, allowNull: false },
        port: { type: DataTypes.INTEGER, allowNull: false },
        userName: { type: DataTypes.TEXT, allowNull: false, defaultValue: '' },
        sealedPassword: { type: DataTypes.TEXT },
        clientId: { type: DataTypes.TEXT, allowNull: false },
        connectedSince: { type: DataTypes.INTEGER },
        awaySince: { type: DataTypes.INTEGER },
        trouble: { type: DataTypes.TEXT, allowNull: false, defaultValue: '' },
        heldFilters: { ...json('heldFilters'), defaultValue: [] },
      },
      { sequelize, modelName: 'MqttBroker', tableName: 'mqtt_broker', underscored: true, timestamps: false },
    )
  }
}
