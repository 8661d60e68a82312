import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'
import type { LengthUnit, MassUnit, TempUnit } from '@/lib/format/units'
import { flag } from '@/models/columns'

export class Foundry extends Model<InferAttributes<Foundry>, InferCreationAttributes<Foundry>> {
  declare id: number
  declare name: string
  declare timeZone: string
  declare altitudeM: number
  declare isDemo: CreationOptional<boolean>
  declare tempUnit: CreationOptional<TempUnit>
  declare massUnit: CreationOptional<MassUnit>
  declare lengthUnit: CreationOptional<LengthUnit>
  declare bandLowTempC: CreationOptional<number>
  declare bandHighTempC: CreationOptional<number>
  declare bandLowRhPct: CreationOptional<number>
  declare bandHighRhPct: CreationOptional<number>
  /** When the first run was ended by its owner; null until then. */
  declare setUpAt: CreationOptional<number | null>
  /** The step of the first run that its owner has not ended yet; one of lib/foundry's. */
  declare firstRunStep: CreationOptional<string>
  declare createdAt: number

  static initialize(sequelize: Sequelize): typeof Foundry {
    return Foundry.init(
      {
        id: { type: DataTypes.INTEGER, primaryKey: true, allowNull: false },
        name: { type: DataTypes.TEXT, allowNull: false },
        timeZone: { type: DataTypes.TEXT, allowNull: false },
        altitudeM: { type: DataTypes.DOUBLE, allowNull: false },
        isDemo: { ...flag('isDemo'), defaultValue: false },
        tempUnit: { type: DataTypes.TEXT, allowNull: false, defaultValue: 'degC' },
        massUnit: { type: DataTypes.TEXT, allowNull: false, defaultValue: 'kg' },
        lengthUnit: { type: DataTypes.TEXT, allowNull: false, defaultValue: 'mm' },
        bandLowTempC: { type: DataTypes.DOUBLE, allowNull: false, defaultValue: 20 },
        bandHighTempC: { type: DataTypes.DOUBLE, allowNull: false, defaultValue: 23 },
        bandLowRhPct: { type: DataTypes.DOUBLE, allowNull: false, defaultValue: 45 },
        bandHighRhPct: { type: DataTypes.DOUBLE, allowNull: false, defaultValue: 58 },
        setUpAt: { type: DataTypes.INTEGER },
        firstRunStep: { type: DataTypes.TEXT, allowNull: false, defaultValue: 'foundry' },
        createdAt: { type: DataTypes.INTEGER, allowNull: false },
      },
      { sequelize, modelName: 'Foundry', tableName: 'foundry', underscored: true, timestamps: false },
    )
  }
}
