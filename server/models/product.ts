import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'
import type { AcceptanceStandard, LabelClaim } from '#shared/vocabulary.ts'
import { newId } from './new-id.ts'

/** What is filled: target, specification of the fill weight, label claims and the acceptance standards it must meet. */
export class Product extends Model<InferAttributes<Product>, InferCreationAttributes<Product>> {
  declare id: CreationOptional<string>
  declare siteId: string
  declare code: string
  declare name: string
  declare capsuleSize: string
  declare targetFillMg: number
  declare lowerSpecificationMg: number
  declare upperSpecificationMg: number
  declare labelClaims: LabelClaim[]
  declare acceptanceStandards: AcceptanceStandard[]
  declare isActive: CreationOptional<boolean>
  declare version: CreationOptional<number>
  declare createdAt: CreationOptional<Date>
  declare updatedAt: CreationOptional<Date>
}

export function defineProduct(sequelize: Sequelize): void {
  Product.init(
    {
      id: { type: DataTypes.UUID, primaryKey: true, defaultValue: newId },
      siteId: { type: DataTypes.UUID, allowNull: false },
      code: { type: DataTypes.STRING, allowNull: false },
      name: { type: DataTypes.STRING, allowNull: false },
      capsuleSize: { type: DataTypes.STRING, allowNull: false },
      targetFillMg: { type: DataTypes.DECIMAL(9, 3), allowNull: false },
      lowerSpecificationMg: { type: DataTypes.DECIMAL(9, 3), allowNull: false },
      upperSpecificationMg: { type: DataTypes.DECIMAL(9, 3), allowNull: false },
      labelClaims: { type: DataTypes.JSON, allowNull: false },
      acceptanceStandards: { type: DataTypes.JSON, allowNull: false },
      isActive: { type: DataTypes.BOOLEAN, allowNull: false, defaultValue: true },
      version: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 1 },
      createdAt: DataTypes.DATE(3),
      updatedAt: DataTypes.DATE(3),
    },
    { sequelize, tableName: 'products', underscored: true, timestamps: true },
  )
}
