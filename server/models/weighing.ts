import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'
import { WEIGHING_ENTRIES, type WeighingEntry } from '#shared/vocabulary.ts'

/** One capsule as the balance showed it. Append-only by database privilege; a correction is a row of its own. */
export class Weighing extends Model<InferAttributes<Weighing>, InferCreationAttributes<Weighing>> {
  declare sampleId: string
  declare ordinal: number
  declare position: CreationOptional<number | null>
  declare segment: CreationOptional<number | null>
  declare discGroup: CreationOptional<number | null>
  declare grossMg: CreationOptional<number | null>
  declare shellMg: CreationOptional<number | null>
  declare netMg: CreationOptional<number | null>
  declare shownDecimals: number
  declare isQuestioned: CreationOptional<boolean>
  declare entry: WeighingEntry
  declare weighedById: string
  declare weighedAt: Date
  declare deviceTime: CreationOptional<Date | null>
}

export function defineWeighing(sequelize: Sequelize): void {
  Weighing.init(
    {
      sampleId: { type: DataTypes.UUID, primaryKey: true, allowNull: false },
      ordinal: { type: DataTypes.INTEGER.UNSIGNED, primaryKey: true, allowNull: false },
      position: { type: DataTypes.INTEGER.UNSIGNED, allowNull: true, defaultValue: null },
      segment: { type: DataTypes.INTEGER.UNSIGNED, allowNull: true, defaultValue: null },
      discGroup: { type: DataTypes.INTEGER.UNSIGNED, allowNull: true, defaultValue: null },
      grossMg: { type: DataTypes.DECIMAL(9, 3), allowNull: true, defaultValue: null },
      shellMg: { type: DataTypes.DECIMAL(9, 3), allowNull: true, defaultValue: null },
      netMg: { type: DataTypes.DECIMAL(9, 3), allowNull: true, defaultValue: null },
      shownDecimals: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      isQuestioned: { type: DataTypes.BOOLEAN, allowNull: false, defaultValue: false },
      entry: { type: DataTypes.ENUM(...WEIGHING_ENTRIES), allowNull: false },
      weighedById: { type: DataTypes.UUID, allowNull: false },
      weighedAt: { type: DataTypes.DATE(3), allowNull: false },
      deviceTime: { type: DataTypes.DATE(3), allowNull: true, defaultValue: null },
    },
    { sequelize, tableName: 'weighings', underscored: true, timestamps: false },
  )
}
