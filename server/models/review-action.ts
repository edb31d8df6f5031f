import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'
import { REVIEW_ACTION_STATES, type ReviewActionState } from '#shared/vocabulary.ts'
import { newId } from './new-id.ts'

/** What the meeting decided, who does it by when, and whether it helped. */
export class ReviewAction extends Model<InferAttributes<ReviewAction>, InferCreationAttributes<ReviewAction>> {
  declare id: CreationOptional<string>
  declare siteId: string
  declare week: string
  declare title: string
  declare owner: string
  declare dueOn: string
  declare state: CreationOptional<ReviewActionState>
  declare effect: CreationOptional<string | null>
  declare createdById: string
  declare closedAt: CreationOptional<Date | null>
  declare version: CreationOptional<number>
  declare createdAt: CreationOptional<Date>
  declare updatedAt: CreationOptional<Date>
}

export function defineReviewAction(sequelize: Sequelize): void {
  ReviewAction.init(
    {
      id: { type: DataTypes.UUID, primaryKey: true, defaultValue: newId },
      siteId: { type: DataTypes.UUID, allowNull: false },
      week: { type: DataTypes.STRING, allowNull: false },
      title: { type: DataTypes.STRING, allowNull: false },
      owner: { type: DataTypes.STRING, allowNull: false },
      dueOn: { type: DataTypes.DATEONLY, allowNull: false },
      state: { type: DataTypes.ENUM(...REVIEW_ACTION_STATES), allowNull: false, defaultValue: 'open' },
      effect: { type: DataTypes.STRING, allowNull: true, defaultValue: null },
      createdById: { type: DataTypes.UUID, allowNull: false },
      closedAt: { type: DataTypes.DATE(3), allowNull: true, defaultValue: null },
      version: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 1 },
      createdAt: DataTypes.DATE(3),
      updatedAt: DataTypes.DATE(3),
    },
    { sequelize, tableName: 'review_actions', underscored: true, timestamps: true },
  )
}
