import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
  type Sequelize,
} from 'sequelize'
import type { EvidenceKind, Spot, Verdict, WeighingMoment } from '@/lib/coats/vocabulary'
import type { Coat } from '@/models/coat'
import type { Member } from '@/models/member'
import type { Tree } from '@/models/tree'

/** What somebody weighed, felt or saw on a coat, with the clock's own word at that moment beside it. Withdrawn, never deleted. */
export class Evidence extends Model<InferAttributes<Evidence>, InferCreationAttributes<Evidence>> {
  declare id: string
  declare treeId: string
  declare coatId: string | null
  declare kind: EvidenceKind
  declare spot: CreationOptional<Spot | null>
  declare verdict: CreationOptional<Verdict | null>
  declare moment: CreationOptional<WeighingMoment | null>
  declare massKg: CreationOptional<number | null>
  declare surfaceTempC: CreationOptional<number | null>
  declare airTempC: CreationOptional<number | null>
  declare relHumidityPct: CreationOptional<number | null>
  declare takenAt: number
  declare memberId: string
  declare loggedAt: number
  declare moistureRatio: CreationOptional<number | null>
  declare forecastP10At: CreationOptional<number | null>
  declare forecastP50At: CreationOptional<number | null>
  declare forecastP90At: CreationOptional<number | null>
  declare doseReferenceHours: CreationOptional<number | null>
  declare withdrawnAt: CreationOptional<number | null>
  declare withdrawnBy: CreationOptional<string | null>
  declare withdrawnReason: CreationOptional<string | null>

  declare tree?: NonAttribute<Tree>
  declare coat?: NonAttribute<Coat>
  declare member?: NonAttribute<Member>

  static initialize(sequelize: Sequelize): typeof Evidence {
    return Evidence.init(
      {
        id: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        treeId: { type: DataTypes.TEXT, allowNull: false },
        coatId: { type: DataTypes.TEXT },
        kind: { type: DataTypes.TEXT, allowNull: false },
        spot: { type: DataTypes.TEXT },
        verdict: { type: DataTypes.TEXT },
        moment: { type: DataTypes.TEXT },
        massKg: { type: DataTypes.DOUBLE },
        surfaceTempC: { type: DataTypes.DOUBLE },
        airTempC: { type: DataTypes.DOUBLE },
        relHumidityPct: { type: DataTypes.DOUBLE },
        takenAt: { type: DataTypes.INTEGER, allowNull: false },
        memberId: { type: DataTypes.TEXT, allowNull: false },
        loggedAt: { type: DataTypes.INTEGER, allowNull: false },
        moistureRatio: { type: DataTypes.DOUBLE },
        forecastP10At: { type: DataTypes.INTEGER },
        forecastP50At: { type: DataTypes.INTEGER },
        forecastP90At: { type: DataTypes.INTEGER },
        doseReferenceHours: { type: DataTypes.DOUBLE },
        withdrawnAt: { type: DataTypes.INTEGER },
        withdrawnBy: { type: DataTypes.TEXT },
        withdrawnReason: { type: DataTypes.TEXT },
      },
      { sequelize, modelName: 'Evidence', tableName: 'evidence', underscored: true, timestamps: false },
    )
  }
}
