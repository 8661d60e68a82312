import { DataTypes, Model, type InferAttributes, type InferCreationAttributes, type NonAttribute, type Sequelize } from 'sequelize'
import { json } from '@/models/columns'
import type { Coat } from '@/models/coat'

/** The answer kept for every write of the tablet: the same id and body get it again. */
export class Operation extends Model<InferAttributes<Operation>, InferCreationAttributes<Operation>> {
  declare operationId: string
  declare kind: string
  declare memberId: string
  declare bodyHash: string
  declare status: number
  declare response: Record<string, unknown>
  declare createdAt: number

  declare coats?: NonAttribute<Coat[]>

  static initialize(sequelize: Sequelize): typeof Operation {
    return Operation.init(
      {
        operationId: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        kind: { type: DataTypes.TEXT, allowNull: false },
        memberId: { type: DataTypes.TEXT, allowNull: false },
        bodyHash: { type: DataTypes.TEXT, allowNull: false },
        status: { type: DataTypes.INTEGER, allowNull: false },
        response: json('response'),
        createdAt: { type: DataTypes.INTEGER, allowNull: false },
      },
      { sequelize, modelName: 'Operation', tableName: 'operations', underscored: true, timestamps: false },
    )
  }
}
