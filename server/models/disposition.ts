import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'
import { DISPOSITION_DECISIONS, type DispositionDecision } from '#shared/vocabulary.ts'
import { newId } from './new-id.ts'

/** One decision of the quality unit on a batch, with the record it was taken on. Append-only by database privilege. */
export class Disposition extends Model<InferAttributes<Disposition>, InferCreationAttributes<Disposition>> {
  declare id: CreationOptional<string>
  declare batchId: string
  declare sequence: number
  declare decision: DispositionDecision
  declare reason: string
  declare contentHash: string
  declare record: object
  declare signatureId: string
  declare decidedById: string
  declare decidedAt: Date
}

export function defineDisposition(sequelize: Sequelize): void {
  Disposition.init(
    {
      id: { type: DataTypes.UUID, primaryKey: true, defaultValue: newId },
      batchId: { type: DataTypes.UUID, allowNull: false },
      sequence: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      decision: { type: DataTypes.ENUM(...DISPOSITION_DECISIONS), allowNull: false },
      reason: { type: DataTypes.STRING, allowNull: false },
      contentHash: { type: DataTypes.STRING, allowNull: false },
      record: { type: DataTypes.JSON, allowNull: false },
      signatureId: { type: DataTypes.UUID, allowNull: false },
      decidedById: { type: DataTypes.UUID, allowNull: false },
      decidedAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { sequelize, tableName: 'dispositions', underscored: true, timestamps: false },
  )
}
