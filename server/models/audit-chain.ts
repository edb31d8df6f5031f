import { DataTypes, Model, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'

/** The head of one audit chain: how long it is and the hash of its last entry. */
export class AuditChain extends Model<InferAttributes<AuditChain>, InferCreationAttributes<AuditChain>> {
  declare chain: string
  declare sequence: number
  declare hash: string
}

export function defineAuditChain(sequelize: Sequelize): void {
  AuditChain.init(
    {
      chain: { type: DataTypes.STRING, primaryKey: true, allowNull: false },
      sequence: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      hash: { type: DataTypes.STRING, allowNull: false },
    },
    { sequelize, tableName: 'audit_chains', underscored: true, timestamps: false },
  )
}
