import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'
import { CHANGEOVER_STATES, type ChangeoverState } from '#shared/vocabulary.ts'
import { newId } from './new-id.ts'

/** A change of tooling on a machine: from, to, by whom, checked by whom, and what it cost. */
export class Changeover extends Model<InferAttributes<Changeover>, InferCreationAttributes<Changeover>> {
  declare id: CreationOptional<string>
  declare siteId: string
  declare machineId: string
  declare batchId: CreationOptional<string | null>
  declare fromToolingSetId: CreationOptional<string | null>
  declare toToolingSetId: string
  declare state: CreationOptional<ChangeoverState>
  declare cautionsAcceptedAt: Date
  declare startedAt: Date
  declare finishedAt: CreationOptional<Date | null>
  declare lastGoodCapsuleAt: CreationOptional<Date | null>
  declare firstApprovedCapsuleAt: CreationOptional<Date | null>
  declare plannedMinutes: CreationOptional<number | null>
  declare trials: CreationOptional<number | null>
  declare scrappedCapsules: CreationOptional<number | null>
  declare remarks: CreationOptional<string>
  declare doneById: string
  declare checkedById: CreationOptional<string | null>
  declare checkedAt: CreationOptional<Date | null>
  declare version: CreationOptional<number>
  declare createdAt: CreationOptional<Date>
  declare updatedAt: CreationOptional<Date>
}

export function defineChangeover(sequelize: Sequelize): void {
  Changeover.init(
    {
      id: { type: DataTypes.UUID, primaryKey: true, defaultValue: newId },
      siteId: { type: DataTypes.UUID, allowNull: false },
      machineId: { type: DataTypes.UUID, allowNull: false },
      batchId: { type: DataTypes.UUID, allowNull: true, defaultValue: null },
      fromToolingSetId: { type: DataTypes.UUID, allowNull: true, defaultValue: null },
      toToolingSetId: { type: DataTypes.UUID, allowNull: false },
      state: { type: DataTypes.ENUM(...CHANGEOVER_STATES), allowNull: false, defaultValue: 'in-progress' },
      cautionsAcceptedAt: { type: DataTypes.DATE(3), allowNull: false },
      startedAt: { type: DataTypes.DATE(3), allowNull: false },
      finishedAt: { type: DataTypes.DATE(3), allowNull: true, defaultValue: null },
      lastGoodCapsuleAt: { type: DataTypes.DATE(3), allowNull: true, defaultValue: null },
      firstApprovedCapsuleAt: { type: DataTypes.DATE(3), allowNull: true, defaultValue: null },
      plannedMinutes: { type: DataTypes.INTEGER.UNSIGNED, allowNull: true, defaultValue: null },
      trials: { type: DataTypes.INTEGER.UNSIGNED, allowNull: true, defaultValue: null },
      scrappedCapsules: { type: DataTypes.INTEGER.UNSIGNED, allowNull: true, defaultValue: null },
      remarks: { type: DataTypes.STRING, allowNull: false, defaultValue: '' },
      doneById: { type: DataTypes.UUID, allowNull: false },
      checkedById: { type: DataTypes.UUID, allowNull: true, defaultValue: null },
      checkedAt: { type: DataTypes.DATE(3), allowNull: true, defaultValue: null },
      version: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 1 },
      createdAt: DataTypes.DATE(3),
      updatedAt: DataTypes.DATE(3),
    },
    { sequelize, tableName: 'changeovers', underscored: true, timestamps: true },
  )
}
