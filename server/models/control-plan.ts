import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'
import {
  CHART_KINDS,
  type ChartKind,
  CONTROL_PLAN_STATES,
  type ControlPlanState,
  WEIGHING_BASES,
  type WeighingBasis,
} from '#shared/vocabulary.ts'
import { newId } from './new-id.ts'

/** How a product is sampled and judged: versioned, proposed by one person and approved by another. */
export class ControlPlan extends Model<InferAttributes<ControlPlan>, InferCreationAttributes<ControlPlan>> {
  declare id: CreationOptional<string>
  declare productId: string
  declare planVersion: number
  declare state: ControlPlanState
  declare basis: WeighingBasis
  declare sampleSize: number
  declare startUpSampleSize: number
  declare intervalMinutes: number
  declare chart: ChartKind
  declare runTests: number[]
  declare meanAlertPercent: number
  declare meanActionPercent: number
  declare individualAlertPercent: number
  declare individualActionPercent: number
  declare rsdAlertPercent: number
  declare rsdActionPercent: number
  declare reactionSteps: string[]
  declare statisticalGround: string
  declare proposedById: string
  declare approvedById: CreationOptional<string | null>
  declare approvedAt: CreationOptional<Date | null>
  declare version: CreationOptional<number>
  declare createdAt: CreationOptional<Date>
  declare updatedAt: CreationOptional<Date>
}

export function defineControlPlan(sequelize: Sequelize): void {
  ControlPlan.init(
    {
      id: { type: DataTypes.UUID, primaryKey: true, defaultValue: newId },
      productId: { type: DataTypes.UUID, allowNull: false },
      planVersion: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      state: { type: DataTypes.ENUM(...CONTROL_PLAN_STATES), allowNull: false },
      basis: { type: DataTypes.ENUM(...WEIGHING_BASES), allowNull: false },
      sampleSize: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      startUpSampleSize: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      intervalMinutes: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      chart: { type: DataTypes.ENUM(...CHART_KINDS), allowNull: false },
      runTests: { type: DataTypes.JSON, allowNull: false },
      meanAlertPercent: { type: DataTypes.DECIMAL(6, 3), allowNull: false },
      meanActionPercent: { type: DataTypes.DECIMAL(6, 3), allowNull: false },
      individualAlertPercent: { type: DataTypes.DECIMAL(6, 3), allowNull: false },
      individualActionPercent: { type: DataTypes.DECIMAL(6, 3), allowNull: false },
      rsdAlertPercent: { type: DataTypes.DECIMAL(6, 3), allowNull: false },
      rsdActionPercent: { type: DataTypes.DECIMAL(6, 3), allowNull: false },
      reactionSteps: { type: DataTypes.JSON, allowNull: false },
      statisticalGround: { type: DataTypes.STRING, allowNull: false },
      proposedById: { type: DataTypes.UUID, allowNull: false },
      approvedById: { type: DataTypes.UUID, allowNull: true, defaultValue: null },
      approvedAt: { type: DataTypes.DATE(3), allowNull: true, defaultValue: null },
      version: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 1 },
      createdAt: DataTypes.DATE(3),
      updatedAt: DataTypes.DATE(3),
    },
    { sequelize, tableName: 'control_plans', underscored: true, timestamps: true },
  )
}
