import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'
import { OUTBOX_MAIL_STATES, type OutboxMailState } from '#shared/vocabulary.ts'
import { newId } from './new-id.ts'

/** A mail on its way out: claimed by a committed guarded update, sent after it, never doubled. */
export class OutboxMail extends Model<InferAttributes<OutboxMail>, InferCreationAttributes<OutboxMail>> {
  declare id: CreationOptional<string>
  declare siteId: string
  declare recipients: string[]
  declare subject: string
  declare text: string
  declare state: CreationOptional<OutboxMailState>
  declare attempts: CreationOptional<number>
  declare nextAttemptAt: Date
  declare claimedBy: CreationOptional<string | null>
  declare claimedAt: CreationOptional<Date | null>
  declare messageId: string
  declare lastProblem: CreationOptional<string | null>
  declare sentAt: CreationOptional<Date | null>
  declare signalId: CreationOptional<string | null>
  declare createdAt: Date
}

export function defineOutboxMail(sequelize: Sequelize): void {
  OutboxMail.init(
    {
      id: { type: DataTypes.UUID, primaryKey: true, defaultValue: newId },
      siteId: { type: DataTypes.UUID, allowNull: false },
      recipients: { type: DataTypes.JSON, allowNull: false },
      subject: { type: DataTypes.STRING, allowNull: false },
      text: { type: DataTypes.TEXT, allowNull: false },
      state: { type: DataTypes.ENUM(...OUTBOX_MAIL_STATES), allowNull: false, defaultValue: 'waiting' },
      attempts: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 0 },
      nextAttemptAt: { type: DataTypes.DATE(3), allowNull: false },
      claimedBy: { type: DataTypes.STRING, allowNull: true, defaultValue: null },
      claimedAt: { type: DataTypes.DATE(3), allowNull: true, defaultValue: null },
      messageId: { type: DataTypes.STRING, allowNull: false },
      lastProblem: { type: DataTypes.STRING, allowNull: true, defaultValue: null },
      sentAt: { type: DataTypes.DATE(3), allowNull: true, defaultValue: null },
      signalId: { type: DataTypes.UUID, allowNull: true, defaultValue: null },
      createdAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { sequelize, tableName: 'outbox_mails', underscored: true, timestamps: false },
  )
}
