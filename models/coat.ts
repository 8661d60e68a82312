import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
  type Sequelize,
} from 'sequelize'
import type { CoatKind, CoatingWay, Guard, Stucco } from '@/lib/coats/vocabulary'
import { flag, json } from '@/models/columns'
import type { Bath } from '@/models/bath'
import type { Evidence } from '@/models/evidence'
import type { Member } from '@/models/member'
import type { Operation } from '@/models/operation'
import type { Place } from '@/models/place'
import type { Tree } from '@/models/tree'

/** Withdrawn when taken back, never deleted. Figures of air, need, target and forecast are as they were at the dip. */
export class Coat extends Model<InferAttributes<Coat>, InferCreationAttributes<Coat>> {
  declare id: string
  declare treeId: string
  declare number: number
  declare operationId: string
  declare kind: CoatKind
  declare bathId: string
  declare stucco: Stucco
  declare way: CoatingWay
  declare drainSeconds: number
  declare dippedAt: number
  declare roughMinutes: CreationOptional<number>
  declare placeId: string
  declare loggedBy: string
  declare loggedAt: number
  declare deviations: CreationOptional<string[]>
  declare reason: CreationOptional<string | null>
  declare airTempC: CreationOptional<number | null>
  declare relHumidityPct: CreationOptional<number | null>
  declare needReferenceHours: number
  declare moistureRatioBelow: number
  declare moistureTarget: CreationOptional<number>
  declare guard: CreationOptional<Guard>
  declare longestWaitHours: CreationOptional<number>
  declare needSpread: CreationOptional<number>
  declare isCalibrated: CreationOptional<boolean>
  /** How much slower its tree's slowest spot was taken to dry than its outside. */
  declare recessFactor: CreationOptional<number>
  declare recipeReferenceHours: CreationOptional<number | null>
  declare forecastP10At: CreationOptional<number | null>
  declare forecastP50At: CreationOptional<number | null>
  declare forecastP90At: CreationOptional<number | null>
  declare coveredAt: CreationOptional<number | null>
  declare meanRelHumidityPct: CreationOptional<number | null>
  declare worstRelHumidityPct: CreationOptional<number | null>
  declare moistureRatioAtRedip: CreationOptional<number | null>
  declare outcomeTheta: CreationOptional<number | null>
  declare outcomeSd: CreationOptional<number | null>
  declare outcomeDryAt: CreationOptional<number | null>
  declare outcomeGapShare: CreationOptional<number | null>
  declare airChangedAt: CreationOptional<number | null>
  declare withdrawnAt: CreationOptional<number | null>
  declare withdrawnBy: CreationOptional<string | null>
  declare withdrawnReason: CreationOptional<string | null>

  declare tree?: NonAttribute<Tree>
  declare bath?: NonAttribute<Bath>
  declare place?: NonAttribute<Place>
  declare author?: NonAttribute<Member>
  declare operation?: NonAttribute<Operation>
  declare evidence?: NonAttribute<Evidence[]>

  static initialize(sequelize: Sequelize): typeof Coat {
    return Coat.init(
      {
        id: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        treeId: { type: DataTypes.TEXT, allowNull: false },
        number: { type: DataTypes.INTEGER, allowNull: false },
        operationId: { type: DataTypes.TEXT, allowNull: false },
        kind: { type: DataTypes.TEXT, allowNull: false },
        bathId: { type: DataTypes.TEXT, allowNull: false },
        stucco: { type: DataTypes.TEXT, allowNull: false },
        way: { type: DataTypes.TEXT, allowNull: false },
        drainSeconds: { type: DataTypes.INTEGER, allowNull: false },
        dippedAt: { type: DataTypes.INTEGER, allowNull: false },
        roughMinutes: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
        placeId: { type: DataTypes.TEXT, allowNull: false },
        loggedBy: { type: DataTypes.TEXT, allowNull: false },
        loggedAt: { type: DataTypes.INTEGER, allowNull: false },
        deviations: { ...json('deviations'), defaultValue: [] },
        reason: { type: DataTypes.TEXT },
        airTempC: { type: DataTypes.DOUBLE },
        relHumidityPct: { type: DataTypes.DOUBLE },
        needReferenceHours: { type: DataTypes.DOUBLE, allowNull: false },
        moistureRatioBelow: { type: DataTypes.DOUBLE, allowNull: false },
        moistureTarget: { type: DataTypes.DOUBLE, allowNull: false, defaultValue: 0.1 },
        guard: { type: DataTypes.TEXT, allowNull: false, defaultValue: 'safe' },
        longestWaitHours: { type: DataTypes.DOUBLE, allowNull: false, defaultValue: 72 },
        needSpread: { type: DataTypes.DOUBLE, allowNull: false, defaultValue: 0.25 },
        isCalibrated: { ...flag('isCalibrated'), defaultValue: false },
        recessFactor: { type: DataTypes.DOUBLE, allowNull: false, defaultValue: 1 },
        recipeReferenceHours: { type: DataTypes.DOUBLE },
        forecastP10At: { type: DataTypes.INTEGER },
        forecastP50At: { type: DataTypes.INTEGER },
        forecastP90At: { type: DataTypes.INTEGER },
        coveredAt: { type: DataTypes.INTEGER },
        meanRelHumidityPct: { type: DataTypes.DOUBLE },
        worstRelHumidityPct: { type: DataTypes.DOUBLE },
        moistureRatioAtRedip: { type: DataTypes.DOUBLE },
        outcomeTheta: { type: DataTypes.DOUBLE },
        outcomeSd: { type: DataTypes.DOUBLE },
        outcomeDryAt: { type: DataTypes.INTEGER },
        outcomeGapShare: { type: DataTypes.DOUBLE },
        airChangedAt: { type: DataTypes.INTEGER },
        withdrawnAt: { type: DataTypes.INTEGER },
        withdrawnBy: { type: DataTypes.TEXT },
        withdrawnReason: { type: DataTypes.TEXT },
      },
      { sequelize, modelName: 'Coat', tableName: 'coats', underscored: true, timestamps: false },
    )
  }
}
