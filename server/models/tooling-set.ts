import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'
import { newId } from './new-id.ts'

/** The parts for one capsule size that are fitted together. */
export class ToolingSet extends Model<InferAttributes<ToolingSet>, InferCreationAttributes<ToolingSet>> {
  declare id: CreationOptional<string>
  declare siteId: string
  declare code: string
  declare capsuleSize: string
  declare boresPerGroup: number
  declare discThicknessMm: number
  declare remarks: CreationOptional<string>
  declare isActive: CreationOptional<boolean>
  declare version: CreationOptional<number>
  declare createdAt: CreationOptional<Date>
  declare updatedAt: CreationOptional<Date>
}

export function defineToolingSet(sequelize: Sequelize): void {
  ToolingSet.init(
    {
      id: { type: DataTypes.UUID, primaryKey: true, defaultValue: newId },
      siteId: { type: DataTypes.UUID, allowNull: false },
      code: { type: DataTypes.STRING, allowNull: false },
      capsuleSize: { type: DataTypes.STRING, allowNull: false },
      boresPerGroup: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      discThicknessMm: { type: DataTypes.DECIMAL(6, 3), allowNull: false },
      remarks: { type: DataTypes.STRING, allowNull: false, defaultValue: '' },
      isActive: { type: DataTypes.BOOLEAN, allowNull: false, defaultValue: true },
      version: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 1 },
      createdAt: DataTypes.DATE(3),
      updatedAt: DataTypes.DATE(3),
    },
    { sequelize, tableName: 'tooling_sets', underscored: true, timestamps: true },
  )
}
