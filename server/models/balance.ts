import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'
import { BALANCE_STATES, type BalanceState } from '#shared/vocabulary.ts'
import { newId } from './new-id.ts'

/** A balance: what it can resolve and repeat, when its calibration ends, and how its files read. */
export class Balance extends Model<InferAttributes<Balance>, InferCreationAttributes<Balance>> {
  declare id: CreationOptional<string>
  declare siteId: string
  declare code: string
  declare description: string
  declare readabilityMg: number
  declare repeatabilitySdMg: number
  declare capacityMg: number
  declare safetyFactor: CreationOptional<number>
  declare calibrationDueOn: string
  declare state: CreationOptional<BalanceState>
  declare fileMapping: CreationOptional<object | null>
  declare version: CreationOptional<number>
  declare createdAt: CreationOptional<Date>
  declare updatedAt: CreationOptional<Date>
}

export function defineBalance(sequelize: Sequelize): void {
  Balance.init(
    {
      id: { type: DataTypes.UUID, primaryKey: true, defaultValue: newId },
      siteId: { type: DataTypes.UUID, allowNull: false },
      code: { type: DataTypes.STRING, allowNull: false },
      description: { type: DataTypes.STRING, allowNull: false },
      readabilityMg: { type: DataTypes.DECIMAL(9, 4), allowNull: false },
      repeatabilitySdMg: { type: DataTypes.DECIMAL(9, 4), allowNull: false },
      capacityMg: { type: DataTypes.DECIMAL(12, 3), allowNull: false },
      safetyFactor: { type: DataTypes.DECIMAL(5, 2), allowNull: false, defaultValue: 1 },
      calibrationDueOn: { type: DataTypes.DATEONLY, allowNull: false },
      state: { type: DataTypes.ENUM(...BALANCE_STATES), allowNull: false, defaultValue: 'in-use' },
      fileMapping: { type: DataTypes.JSON, allowNull: true, defaultValue: null },
      version: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 1 },
      createdAt: DataTypes.DATE(3),
      updatedAt: DataTypes.DATE(3),
    },
    { sequelize, tableName: 'balances', underscored: true, timestamps: true },
  )
}
