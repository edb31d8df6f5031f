import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'

/** Failures in a row of one account or one address, and until when it has to wait. */
export class SignInThrottle extends Model<InferAttributes<SignInThrottle>, InferCreationAttributes<SignInThrottle>> {
  declare subject: string
  declare failures: number
  declare lastFailureAt: Date
  declare blockedUntil: CreationOptional<Date | null>
}

export function defineSignInThrottle(sequelize: Sequelize): void {
  SignInThrottle.init(
    {
      subject: { type: DataTypes.STRING, primaryKey: true, allowNull: false },
      failures: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      lastFailureAt: { type: DataTypes.DATE(3), allowNull: false },
      blockedUntil: { type: DataTypes.DATE(3), allowNull: true, defaultValue: null },
    },
    { sequelize, tableName: 'sign_in_throttles', underscored: true, timestamps: false },
  )
}
