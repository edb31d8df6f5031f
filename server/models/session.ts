import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'
import { newId } from './new-id.ts'

/** A sign-in and the family of refresh tokens that grew from it; only hashes of the tokens are kept. */
export class Session extends Model<InferAttributes<Session>, InferCreationAttributes<Session>> {
  declare id: CreationOptional<string>
  declare userId: string
  declare refreshHash: string
  declare previousRefreshHash: CreationOptional<string | null>
  declare rotatedAt: Date
  declare startedAt: Date
  declare lastUsedAt: Date
  declare expiresAt: Date
  declare endedAt: CreationOptional<Date | null>
  declare endReason: CreationOptional<string | null>
  declare address: string
  declare device: string
  declare signedAt: CreationOptional<Date | null>
}

export function defineSession(sequelize: Sequelize): void {
  Session.init(
    {
      id: { type: DataTypes.UUID, primaryKey: true, defaultValue: newId },
      userId: { type: DataTypes.UUID, allowNull: false },
      refreshHash: { type: DataTypes.STRING, allowNull: false },
      previousRefreshHash: { type: DataTypes.STRING, allowNull: true, defaultValue: null },
      rotatedAt: { type: DataTypes.DATE(3), allowNull: false },
      startedAt: { type: DataTypes.DATE(3), allowNull: false },
      lastUsedAt: { type: DataTypes.DATE(3), allowNull: false },
      expiresAt: { type: DataTypes.DATE(3), allowNull: false },
      endedAt: { type: DataTypes.DATE(3), allowNull: true, defaultValue: null },
      endReason: { type: DataTypes.STRING, allowNull: true, defaultValue: null },
      address: { type: DataTypes.STRING, allowNull: false },
      device: { type: DataTypes.STRING, allowNull: false },
      signedAt: { type: DataTypes.DATE(3), allowNull: true, defaultValue: null },
    },
    { sequelize, tableName: 'sessions', underscored: true, timestamps: false },
  )
}
