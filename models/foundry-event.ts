import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
  type Sequelize,
} from 'sequelize'
import { flag, json } from '@/models/columns'
import type { Member } from '@/models/member'

/** History of everything that is not a tree: only added to. Without a member it is Kilnward itself. */
export class FoundryEvent extends Model<InferAttributes<FoundryEvent>, InferCreationAttributes<FoundryEvent>> {
  declare id: CreationOptional<number>
  declare kind: string
  declare subjectType: string
  declare subjectId: CreationOptional<string>
  /** Its name at that moment. */
  declare subjectName: CreationOptional<string>
  declare memberId: CreationOptional<string | null>
  /** Browser and system of the member, in words; empty for Kilnward itself. */
  declare device: CreationOptional<string>
  declare at: number
  declare detail: Record<string, unknown>
  declare isDemo: CreationOptional<boolean>

  declare member?: NonAttribute<Member>

  static initialize(sequelize: Sequelize): typeof FoundryEvent {
    return FoundryEvent.init(
      {
        id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
        kind: { type: DataTypes.TEXT, allowNull: false },
        subjectType: { type: DataTypes.TEXT, allowNull: false },
        subjectId: { type: DataTypes.TEXT, allowNull: false, defaultValue: '' },
        subjectName: { type: DataTypes.TEXT, allowNull: false, defaultValue: '' },
        memberId: { type: DataTypes.TEXT },
        device: { type: DataTypes.TEXT, allowNull: false, defaultValue: '' },
        at: { type: DataTypes.INTEGER, allowNull: false },
        detail: json('detail'),
        isDemo: { ...flag('isDemo'), defaultValue: false },
      },
      { sequelize, modelName: 'FoundryEvent', tableName: 'foundry_events', underscored: true, timestamps: false },
    )
  }
}
