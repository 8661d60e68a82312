import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
  type Sequelize,
} from 'sequelize'
import type { LengthUnit, MassUnit, TempUnit } from '@/lib/format/units'
import type { Role } from '@/lib/members/roles'
import type { PushSubscription } from '@/models/push-subscription'
import { flag } from '@/models/columns'

export class Member extends Model<InferAttributes<Member>, InferCreationAttributes<Member>> {
  declare id: string
  declare name: string
  declare email: string
  declare role: Role
  declare passwordHash: string
  declare disabledAt: CreationOptional<number | null>
  declare tempUnit: CreationOptional<TempUnit | null>
  declare massUnit: CreationOptional<MassUnit | null>
  declare lengthUnit: CreationOptional<LengthUnit | null>
  /** Set while the password is one that somebody else has made: until when it opens the page where they make their own. */
  declare firstPasswordUntil: CreationOptional<number | null>
  declare lastSignedInAt: CreationOptional<number | null>
  declare isDemo: CreationOptional<boolean>
  declare createdAt: number

  declare pushSubscriptions?: NonAttribute<PushSubscription[]>

  static initialize(sequelize: Sequelize): typeof Member {
    return Member.init(
      {
        id: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        name: { type: DataTypes.TEXT, allowNull: false },
        email: { type: DataTypes.TEXT, allowNull: false },
        role: { type: DataTypes.TEXT, allowNull: false },
        passwordHash: { type: DataTypes.TEXT, allowNull: false },
        disabledAt: { type: DataTypes.INTEGER },
        tempUnit: { type: DataTypes.TEXT },
        massUnit: { type: DataTypes.TEXT },
        lengthUnit: { type: DataTypes.TEXT },
        firstPasswordUntil: { type: DataTypes.INTEGER },
        lastSignedInAt: { type: DataTypes.INTEGER },
        isDemo: { ...flag('isDemo'), defaultValue: false },
        createdAt: { type: DataTypes.INTEGER, allowNull: false },
      },
      { sequelize, modelName: 'Member', tableName: 'members', underscored: true, timestamps: false },
    )
  }
}
