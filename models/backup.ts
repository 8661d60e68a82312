import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'
import type { BackupKind } from '@/lib/backups/backup-plan'

/** One copy of the records, or the try at one. */
export class Backup extends Model<InferAttributes<Backup>, InferCreationAttributes<Backup>> {
  declare id: string
  declare fileName: string
  declare kind: BackupKind
  declare startedAt: number
  declare finishedAt: CreationOptional<number | null>
  declare outcome: CreationOptional<'done' | 'failed' | null>
  declare sizeBytes: CreationOptional<number | null>
  declare sha256: CreationOptional<string | null>
  /** When a copy of it was last opened, checked and counted. */
  declare provenAt: CreationOptional<number | null>
  declare removedAt: CreationOptional<number | null>
  declare error: CreationOptional<string | null>

  static initialize(sequelize: Sequelize): typeof Backup {
    return Backup.init(
      {
        id: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        fileName: { type: DataTypes.TEXT, allowNull: false },
        kind: { type: DataTypes.TEXT, allowNull: false },
        startedAt: { type: DataTypes.INTEGER, allowNull: false },
        finishedAt: { type: DataTypes.INTEGER },
        outcome: { type: DataTypes.TEXT },
        sizeBytes: { type: DataTypes.INTEGER },
        sha256: { type: DataTypes.TEXT },
        provenAt: { type: DataTypes.INTEGER },
        removedAt: { type: DataTypes.INTEGER },
        error: { type: DataTypes.TEXT },
      },
      { sequelize, modelName: 'Backup', tableName: 'backups', underscored: true, timestamps: false },
    )
  }
}
