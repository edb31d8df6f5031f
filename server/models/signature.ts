import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'
import { newId } from './new-id.ts'

/** Who signed what, when, with which meaning, and the hash of what was shown. Append-only by database privilege. */
export class Signature extends Model<InferAttributes<Signature>, InferCreationAttributes<Signature>> {
  declare id: CreationOptional<string>
  declare siteId: string
  declare userId: string
  declare printedName: string
  declare meaning: string
  declare reason: CreationOptional<string>
  declare recordKind: string
  declare recordId: string
  declare contentHash: string
  declare signedAt: Date
  declare sessionId: string
}

export function defineSignature(sequelize: Sequelize): void {
  Signature.init(
    {
      id: { type: DataTypes.UUID, primaryKey: true, defaultValue: newId },
      siteId: { type: DataTypes.UUID, allowNull: false },
      userId: { type: DataTypes.UUID, allowNull: false },
      printedName: { type: DataTypes.STRING, allowNull: false },
      meaning: { type: DataTypes.STRING, allowNull: false },
      reason: { type: DataTypes.STRING, allowNull: false, defaultValue: '' },
      recordKind: { type: DataTypes.STRING, allowNull: false },
      recordId: { type: DataTypes.UUID, allowNull: false },
      contentHash: { type: DataTypes.STRING, allowNull: false },
      signedAt: { type: DataTypes.DATE(3), allowNull: false },
      sessionId: { type: DataTypes.UUID, allowNull: false },
    },
    { sequelize, tableName: 'signatures', underscored: true, timestamps: false },
  )
}
