import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'

/** A later version of one weight with its reason; the first stays readable. */
export class WeighingCorrection extends Model<InferAttributes<WeighingCorrection>, InferCreationAttributes<WeighingCorrection>> {
  declare sampleId: string
  declare ordinal: number
  declare version: number
  declare position: CreationOptional<number | null>
  declare grossMg: CreationOptional<number | null>
  declare shellMg: CreationOptional<number | null>
  declare netMg: CreationOptional<number | null>
  declare shownDecimals: number
  declare reason: string
  declare correctedById: string
  declare correctedAt: Date
}

export function defineWeighingCorrection(sequelize: Sequelize): void {
  WeighingCorrection.init(
    {
      sampleId: { type: DataTypes.UUID, primaryKey: true, allowNull: false },
      ordinal: { type: DataTypes.INTEGER.UNSIGNED, primaryKey: true, allowNull: false },
      version: { type: DataTypes.INTEGER.UNSIGNED, primaryKey: true, allowNull: false },
      position: { type: DataTypes.INTEGER.UNSIGNED, allowNull: true, defaultValue: null },
      grossMg: { type: DataTypes.DECIMAL(9, 3), allowNull: true, defaultValue: null },
      shellMg: { type: DataTypes.DECIMAL(9, 3), allowNull: true, defaultValue: null },
      netMg: { type: DataTypes.DECIMAL(9, 3), allowNull: true, defaultValue: null },
      shownDecimals: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      reason: { type: DataTypes.STRING, allowNull: false },
      correctedById: { type: DataTypes.UUID, allowNull: false },
      correctedAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { sequelize, tableName: 'weighing_corrections', underscored: true, timestamps: false },
  )
}
