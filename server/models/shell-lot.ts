import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'
import { newId } from './new-id.ts'

/** A lot of empty capsules and its tare: mean and SD of weighed shells, never a constant. */
export class ShellLot extends Model<InferAttributes<ShellLot>, InferCreationAttributes<ShellLot>> {
  declare id: CreationOptional<string>
  declare siteId: string
  declare code: string
  declare capsuleSize: string
  declare material: string
  declare tareVersion: CreationOptional<number>
  declare tareN: CreationOptional<number>
  declare tareMeanMg: CreationOptional<number | null>
  declare tareSdMg: CreationOptional<number | null>
  declare tareWeighedAt: CreationOptional<Date | null>
  declare isActive: CreationOptional<boolean>
  declare version: CreationOptional<number>
  declare createdAt: CreationOptional<Date>
  declare updatedAt: CreationOptional<Date>
}

export function defineShellLot(sequelize: Sequelize): void {
  ShellLot.init(
    {
      id: { type: DataTypes.UUID, primaryKey: true, defaultValue: newId },
      siteId: { type: DataTypes.UUID, allowNull: false },
      code: { type: DataTypes.STRING, allowNull: false },
      capsuleSize: { type: DataTypes.STRING, allowNull: false },
      material: { type: DataTypes.STRING, allowNull: false },
      tareVersion: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 0 },
      tareN: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 0 },
      tareMeanMg: { type: DataTypes.DECIMAL(9, 4), allowNull: true, defaultValue: null },
      tareSdMg: { type: DataTypes.DECIMAL(9, 4), allowNull: true, defaultValue: null },
      tareWeighedAt: { type: DataTypes.DATE(3), allowNull: true, defaultValue: null },
      isActive: { type: DataTypes.BOOLEAN, allowNull: false, defaultValue: true },
      version: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 1 },
      createdAt: DataTypes.DATE(3),
      updatedAt: DataTypes.DATE(3),
    },
    { sequelize, tableName: 'shell_lots', underscored: true, timestamps: true },
  )
}
