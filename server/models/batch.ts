import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'
import { BATCH_STATES, type BatchState } from '#shared/vocabulary.ts'
import { newId } from './new-id.ts'

/** One run of one product on one machine, from start-up to disposition. */
export class Batch extends Model<InferAttributes<Batch>, InferCreationAttributes<Batch>> {
  declare id: CreationOptional<string>
  declare siteId: string
  declare number: string
  declare machineId: string
  declare productId: string
  declare controlPlanId: string
  declare toolingSetId: string
  declare shellLotId: string
  declare blendLot: string
  declare state: CreationOptional<BatchState>
  declare plannedCapsules: number
  declare indexesPerMinute: number
  declare startedAt: CreationOptional<Date | null>
  declare endedAt: CreationOptional<Date | null>
  declare startUpApprovedAt: CreationOptional<Date | null>
  declare startUpApprovedById: CreationOptional<string | null>
  declare assayPercent: CreationOptional<number | null>
  declare goodCapsules: CreationOptional<number | null>
  declare rejectedCapsules: CreationOptional<number | null>
  declare setUpScrapCapsules: CreationOptional<number | null>
  declare sampleCount: CreationOptional<number>
  declare version: CreationOptional<number>
  declare createdAt: CreationOptional<Date>
  declare updatedAt: CreationOptional<Date>
}

export function defineBatch(sequelize: Sequelize): void {
  Batch.init(
    {
      id: { type: DataTypes.UUID, primaryKey: true, defaultValue: newId },
      siteId: { type: DataTypes.UUID, allowNull: false },
      number: { type: DataTypes.STRING, allowNull: false },
      machineId: { type: DataTypes.UUID, allowNull: false },
      productId: { type: DataTypes.UUID, allowNull: false },
      controlPlanId: { type: DataTypes.UUID, allowNull: false },
      toolingSetId: { type: DataTypes.UUID, allowNull: false },
      shellLotId: { type: DataTypes.UUID, allowNull: false },
      blendLot: { type: DataTypes.STRING, allowNull: false },
      state: { type: DataTypes.ENUM(...BATCH_STATES), allowNull: false, defaultValue: 'planned' },
      plannedCapsules: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      indexesPerMinute: { type: DataTypes.DECIMAL(6, 2), allowNull: false },
      startedAt: { type: DataTypes.DATE(3), allowNull: true, defaultValue: null },
      endedAt: { type: DataTypes.DATE(3), allowNull: true, defaultValue: null },
      startUpApprovedAt: { type: DataTypes.DATE(3), allowNull: true, defaultValue: null },
      startUpApprovedById: { type: DataTypes.UUID, allowNull: true, defaultValue: null },
      assayPercent: { type: DataTypes.DECIMAL(7, 3), allowNull: true, defaultValue: null },
      goodCapsules: { type: DataTypes.INTEGER.UNSIGNED, allowNull: true, defaultValue: null },
      rejectedCapsules: { type: DataTypes.INTEGER.UNSIGNED, allowNull: true, defaultValue: null },
      setUpScrapCapsules: { type: DataTypes.INTEGER.UNSIGNED, allowNull: true, defaultValue: null },
      sampleCount: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 0 },
      version: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 1 },
      createdAt: DataTypes.DATE(3),
      updatedAt: DataTypes.DATE(3),
    },
    { sequelize, tableName: 'batches', underscored: true, timestamps: true },
  )
}
