import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'
import { DEVIATION_STATES, type DeviationState } from '#shared/vocabulary.ts'
import { newId } from './new-id.ts'

/** A departure from procedure, its investigation and what became of the material. */
export class Deviation extends Model<InferAttributes<Deviation>, InferCreationAttributes<Deviation>> {
  declare id: CreationOptional<string>
  declare siteId: string
  declare batchId: string
  declare number: string
  declare title: string
  declare description: string
  declare cause: CreationOptional<string | null>
  declare effectOnQuality: CreationOptional<string | null>
  declare correction: CreationOptional<string | null>
  declare materialOutcome: CreationOptional<string | null>
  declare state: CreationOptional<DeviationState>
  declare openedById: string
  declare openedAt: Date
  declare closedById: CreationOptional<string | null>
  declare closedAt: CreationOptional<Date | null>
  declare version: CreationOptional<number>
}

export function defineDeviation(sequelize: Sequelize): void {
  Deviation.init(
    {
      id: { type: DataTypes.UUID, primaryKey: true, defaultValue: newId },
      siteId: { type: DataTypes.UUID, allowNull: false },
      batchId: { type: DataTypes.UUID, allowNull: false },
      number: { type: DataTypes.STRING, allowNull: false },
      title: { type: DataTypes.STRING, allowNull: false },
      description: { type: DataTypes.STRING, allowNull: false },
      cause: { type: DataTypes.STRING, allowNull: true, defaultValue: null },
      effectOnQuality: { type: DataTypes.STRING, allowNull: true, defaultValue: null },
      correction: { type: DataTypes.STRING, allowNull: true, defaultValue: null },
      materialOutcome: { type: DataTypes.STRING, allowNull: true, defaultValue: null },
      state: { type: DataTypes.ENUM(...DEVIATION_STATES), allowNull: false, defaultValue: 'open' },
      openedById: { type: DataTypes.UUID, allowNull: false },
      openedAt: { type: DataTypes.DATE(3), allowNull: false },
      closedById: { type: DataTypes.UUID, allowNull: true, defaultValue: null },
      closedAt: { type: DataTypes.DATE(3), allowNull: true, defaultValue: null },
      version: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 1 },
    },
    { sequelize, tableName: 'deviations', underscored: true, timestamps: false },
  )
}
