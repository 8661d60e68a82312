import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'
import type { UploadState } from '@/lib/uploads/upload-state'
import { json } from '@/models/columns'

/** A file of readings that somebody has brought, and how far the worker has come with it. */
export class Upload extends Model<InferAttributes<Upload>, InferCreationAttributes<Upload>> {
  declare id: string
  declare sensorId: number
  declare fileName: string
  declare sha256: string
  declare sizeBytes: number
  declare state: UploadState
  /** How it is read, and which way its rows run; null while it is a draft. */
  declare settings: CreationOptional<Record<string, unknown> | null>
  declare bytesDone: CreationOptional<number>
  declare linesDone: CreationOptional<number>
  declare lastAt: CreationOptional<number | null>
  declare added: CreationOptional<number>
  declare repeated: CreationOptional<number>
  declare marked: CreationOptional<number>
  declare rejected: CreationOptional<number>
  declare errorsBytes: CreationOptional<number>
  declare createdBy: CreationOptional<string | null>
  declare createdAt: number
  declare startedAt: CreationOptional<number | null>
  declare finishedAt: CreationOptional<number | null>
  declare error: CreationOptional<string | null>
  declare leaseId: CreationOptional<string | null>
  declare leaseUntil: CreationOptional<number | null>

  static initialize(sequelize: Sequelize): typeof Upload {
    return Upload.init(
      {
        id: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        sensorId: { type: DataTypes.INTEGER, allowNull: false },
        fileName: { type: DataTypes.TEXT, allowNull: false },
        sha256: { type: DataTypes.TEXT, allowNull: false },
        sizeBytes: { type: DataTypes.INTEGER, allowNull: false },
        state: { type: DataTypes.TEXT, allowNull: false },
        settings: { ...json('settings'), allowNull: true },
        bytesDone: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
        linesDone: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
        lastAt: { type: DataTypes.INTEGER },
        added: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
        repeated: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
        marked: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
        rejected: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
        errorsBytes: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
        createdBy: { type: DataTypes.TEXT },
        createdAt: { type: DataTypes.INTEGER, allowNull: false },
        startedAt: { type: DataTypes.INTEGER },
        finishedAt: { type: DataTypes.INTEGER },
        error: { type: DataTypes.TEXT },
        leaseId: { type: DataTypes.TEXT },
        leaseUntil: { type: DataTypes.INTEGER },
      },
      { sequelize, modelName: 'Upload', tableName: 'uploads', underscored: true, timestamps: false },
    )
  }
}
