import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'
import { SIGNAL_SEVERITIES, SIGNAL_STATES, type SignalSeverity, type SignalSource, type SignalState } from '#shared/vocabulary.ts'
import { newId } from './new-id.ts'

/** What a sample showed that needs somebody: all tests and limits hit by it, in one record. */
export class Signal extends Model<InferAttributes<Signal>, InferCreationAttributes<Signal>> {
  declare id: CreationOptional<string>
  declare batchId: string
  declare sampleId: string
  declare severity: SignalSeverity
  declare sources: SignalSource[]
  declare sentence: string
  declare state: CreationOptional<SignalState>
  declare raisedAt: Date
  declare acknowledgedById: CreationOptional<string | null>
  declare acknowledgedAt: CreationOptional<Date | null>
  declare cause: CreationOptional<string | null>
  declare reaction: CreationOptional<string | null>
  declare closedById: CreationOptional<string | null>
  declare closedAt: CreationOptional<Date | null>
  declare version: CreationOptional<number>
}

export function defineSignal(sequelize: Sequelize): void {
  Signal.init(
    {
      id: { type: DataTypes.UUID, primaryKey: true, defaultValue: newId },
      batchId: { type: DataTypes.UUID, allowNull: false },
      sampleId: { type: DataTypes.UUID, allowNull: false },
      severity: { type: DataTypes.ENUM(...SIGNAL_SEVERITIES), allowNull: false },
      sources: { type: DataTypes.JSON, allowNull: false },
      sentence: { type: DataTypes.STRING, allowNull: false },
      state: { type: DataTypes.ENUM(...SIGNAL_STATES), allowNull: false, defaultValue: 'active' },
      raisedAt: { type: DataTypes.DATE(3), allowNull: false },
      acknowledgedById: { type: DataTypes.UUID, allowNull: true, defaultValue: null },
      acknowledgedAt: { type: DataTypes.DATE(3), allowNull: true, defaultValue: null },
      cause: { type: DataTypes.STRING, allowNull: true, defaultValue: null },
      reaction: { type: DataTypes.STRING, allowNull: true, defaultValue: null },
      closedById: { type: DataTypes.UUID, allowNull: true, defaultValue: null },
      closedAt: { type: DataTypes.DATE(3), allowNull: true, defaultValue: null },
      version: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 1 },
    },
    { sequelize, tableName: 'signals', underscored: true, timestamps: false },
  )
}
