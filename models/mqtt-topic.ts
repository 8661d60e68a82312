import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
  type Sequelize,
} from 'sequelize'
import type { TempUnit } from '@/lib/format/units'
import type { TimeForm } from '@/lib/mqtt/time-form'
import { flag } from '@/models/columns'
import type { Sensor } from '@/models/sensor'

/** Which topic feeds which sensor, and where in its messages the figures stand. */
export class MqttTopic extends Model<InferAttributes<MqttTopic>, InferCreationAttributes<MqttTopic>> {
  declare id: string
  declare filter: string
  declare sensorId: number
  /** Null: its messages do not tell this. */
  declare tempPath: string | null
  declare rhPath: string | null
  declare pressurePath: string | null
  declare timePath: string | null
  declare batteryPath: string | null
  declare tempUnit: TempUnit
  declare timeForm: TimeForm
  declare isDemo: CreationOptional<boolean>
  declare createdAt: number

  declare sensor?: NonAttribute<Sensor>

  static initialize(sequelize: Sequelize): typeof MqttTopic {
    return MqttTopic.init(
      {
        id: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        filter: { type: DataTypes.TEXT, allowNull: false },
        sensorId: { type: DataTypes.INTEGER, allowNull: false },
        tempPath: { type: DataTypes.TEXT },
        rhPath: { type: DataTypes.TEXT },
        pressurePath: { type: DataTypes.TEXT },
        timePath: { type: DataTypes.TEXT },
        batteryPath: { type: DataTypes.TEXT },
        tempUnit: { type: DataTypes.TEXT, allowNull: false },
        timeForm: { type: DataTypes.TEXT, allowNull: false },
        isDemo: { ...flag('isDemo'), defaultValue: false },
        createdAt: { type: DataTypes.INTEGER, allowNull: false },
      },
      { sequelize, modelName: 'MqttTopic', tableName: 'mqtt_topics', underscored: true, timestamps: false },
    )
  }
}
