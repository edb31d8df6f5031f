import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'
import { newId } from './new-id.ts'

/** The figures of one week as the meeting saw them, frozen. */
export class Review extends Model<InferAttributes<Review>, InferCreationAttributes<Review>> {
  declare id: CreationOptional<string>
  declare siteId: string
  declare week: string
  declare figures: object
  declare frozenAt: Date
  declare frozenById: string
}

export function defineReview(sequelize: Sequelize): void {
  Review.init(
    {
      id: { type: DataTypes.UUID, primaryKey: true, defaultValue: newId },
      siteId: { type: DataTypes.UUID, allowNull: false },
      week: { type: DataTypes.STRING, allowNull: false },
      figures: { type: DataTypes.JSON, allowNull: false },
      frozenAt: { type: DataTypes.DATE(3), allowNull: false },
      frozenById: { type: DataTypes.UUID, allowNull: false },
    },
    { sequelize, tableName: 'reviews', underscored: true, timestamps: false },
  )
}
