import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
  type Sequelize,
} from 'sequelize'
import type { Sensor } from '@/models/sensor'

export class SensorToken extends Model<InferAttributes<SensorToken>, InferCreationAttributes<SensorToken>> {
  declare id: string
  declare sensorId: number
  declare secretSha256: string
  declare createdBy: CreationOptional<string | null>
  declare createdAt: number
  declare lastUsedAt: CreationOptional<number | null>
  declare revokedAt: CreationOptional<number | null>

  declare sensor?: NonAttribute<Sensor>

  static initialize(sequelize: Sequelize): typeof SensorToken {
    return SensorToken.init(
      {
        id: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        sensorId: { type: DataTypes.INTEGER, allowNull: false },
        secretSha256: { type: DataTypes.TEXT, allowNull: false },
        createdBy: { type: DataTypes.TEXT },
        createdAt: { type: DataTypes.INTEGER, allowNull: false },
        lastUsedAt: { type: DataTypes.INTEGER },
        revokedAt: { type: DataTypes.INTEGER },
      },
      { sequelize, modelName: 'SensorToken', tableName: 'sensor_tokens', underscored: true, timestamps: false },
    )
  }
}
