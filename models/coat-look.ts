import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
  type Sequelize,
} from 'sequelize'
import type { Coat } from '@/models/coat'
import type { Member } from '@/models/member'

/** A person's word on the newest coat, with the clock's own forecast at that moment beside it. */
export class CoatLook extends Model<InferAttributes<CoatLook>, InferCreationAttributes<CoatLook>> {
  declare id: string
  declare coatId: string
  declare verdict: 'looks dry' | 'not yet'
  declare lookedAt: number
  declare memberId: string
  declare moistureRatio: number
  declare forecastP10At: CreationOptional<number | null>
  declare forecastP50At: CreationOptional<number | null>
  declare forecastP90At: CreationOptional<number | null>

  declare coat?: NonAttribute<Coat>
  declare member?: NonAttribute<Member>

  static initialize(sequelize: Sequelize): typeof CoatLook {
    return CoatLook.init(
      {
        id: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        coatId: { type: DataTypes.TEXT, allowNull: false },
        verdict: { type: DataTypes.TEXT, allowNull: false },
        lookedAt: { type: DataTypes.INTEGER, allowNull: false },
        memberId: { type: DataTypes.TEXT, allowNull: false },
        moistureRatio: { type: DataTypes.DOUBLE, allowNull: false },
        forecastP10At: { type: DataTypes.INTEGER },
        forecastP50At: { type: DataTypes.INTEGER },
        forecastP90At: { type: DataTypes.INTEGER },
      },
      { sequelize, modelName: 'CoatLook', tableName: 'coat_looks', underscored: true, timestamps: false },
    )
  }
}
