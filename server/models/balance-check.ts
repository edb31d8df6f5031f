import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'
import { BALANCE_CHECK_KINDS, type BalanceCheckKind } from '#shared/vocabulary.ts'
import { newId } from './new-id.ts'

/** One external check of a balance against a weight. For repeatability the reading is the SD of the weighings, the tolerance the largest allowed. */
export class BalanceCheck extends Model<InferAttributes<BalanceCheck>, InferCreationAttributes<BalanceCheck>> {
  declare id: CreationOptional<string>
  declare balanceId: string
  declare kind: BalanceCheckKind
  declare referenceWeight: CreationOptional<string>
  declare checkedAt: Date
  declare checkedById: string
  declare nominalMg: number
  declare readingMg: number
  declare toleranceMg: number
  declare hasPassed: boolean
  declare remarks: CreationOptional<string>
}

export function defineBalanceCheck(sequelize: Sequelize): void {
  BalanceCheck.init(
    {
      id: { type: DataTypes.UUID, primaryKey: true, defaultValue: newId },
      balanceId: { type: DataTypes.UUID, allowNull: false },
      kind: { type: DataTypes.ENUM(...BALANCE_CHECK_KINDS), allowNull: false },
      referenceWeight: { type: DataTypes.STRING, allowNull: false, defaultValue: '' },
      checkedAt: { type: DataTypes.DATE(3), allowNull: false },
      checkedById: { type: DataTypes.UUID, allowNull: false },
      nominalMg: { type: DataTypes.DECIMAL(12, 4), allowNull: false },
      readingMg: { type: DataTypes.DECIMAL(12, 4), allowNull: false },
      toleranceMg: { type: DataTypes.DECIMAL(12, 4), allowNull: false },
      hasPassed: { type: DataTypes.BOOLEAN, allowNull: false },
      remarks: { type: DataTypes.STRING, allowNull: false, defaultValue: '' },
    },
    { sequelize, tableName: 'balance_checks', underscored: true, timestamps: false },
  )
}
