import { DataTypes, Model, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'

/** Growing waits at sign-in, kept here so that a restart forgives nobody. */
export class SignInWait extends Model<InferAttributes<SignInWait>, InferCreationAttributes<SignInWait>> {
  declare subject: string
  declare failures: number
  declare lastFailedAt: number
  declare waitUntil: number

  static initialize(sequelize: Sequelize): typeof SignInWait {
    return SignInWait.init(
      {
        subject: { type: DataTypes.TEXT, primaryKey: true, allowNull: false },
        failures: { type: DataTypes.INTEGER, allowNull: false },
        lastFailedAt: { type: DataTypes.INTEGER, allowNull: false },
        waitUntil: { type: DataTypes.INTEGER, allowNull: false },
      },
      { sequelize, modelName: 'SignInWait', tableName: 'sign_in_waits', underscored: true, timestamps: false },
    )
  }
}
