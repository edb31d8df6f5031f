import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'

/** Who did what to which record, when and why, sealed by the hash of the entry before. Append-only by database privilege. */
export class AuditEntry extends Model<InferAttributes<AuditEntry>, InferCreationAttributes<AuditEntry>> {
  declare chain: string
  declare sequence: number
  declare at: Date
  declare actorId: CreationOptional<string | null>
  declare actorName: string
  declare action: string
  declare recordKind: string
  declare recordId: string
  declare oldValues: CreationOptional<object | null>
  declare newValues: CreationOptional<object | null>
  declare reason: CreationOptional<string | null>
  declare terminal: string
  declare requestId: string
  declare hash: string
}

export function defineAuditEntry(sequelize: Sequelize): void {
  AuditEntry.init(
    {
      chain: { type: DataTypes.STRING, primaryKey: true, allowNull: false },
      sequence: { type: DataTypes.INTEGER.UNSIGNED, primaryKey: true, allowNull: false },
      at: { type: DataTypes.DATE(3), allowNull: false },
      actorId: { type: DataTypes.UUID, allowNull: true, defaultValue: null },
      actorName: { type: DataTypes.STRING, allowNull: false },
      action: { type: DataTypes.STRING, allowNull: false },
      recordKind: { type: DataTypes.STRING, allowNull: false },
      recordId: { type: DataTypes.STRING, allowNull: false },
      oldValues: { type: DataTypes.JSON, allowNull: true, defaultValue: null },
      newValues: { type: DataTypes.JSON, allowNull: true, defaultValue: null },
      reason: { type: DataTypes.STRING, allowNull: true, defaultValue: null },
      terminal: { type: DataTypes.STRING, allowNull: false },
      requestId: { type: DataTypes.STRING, allowNull: false },
      hash: { type: DataTypes.STRING, allowNull: false },
    },
    { sequelize, tableName: 'audit_entries', underscored: true, timestamps: false },
  )
}
