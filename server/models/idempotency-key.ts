import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'

/** A request already answered, and its answer, so that a retry records nothing twice. */
export class IdempotencyKey extends Model<InferAttributes<IdempotencyKey>, InferCreationAttributes<IdempotencyKey>> {
  declare userId: string
  declare route: string
  declare idempotencyKey: string
  declare bodyHash: string
  declare answer: CreationOptional<object | null>
  declare createdAt: Date
}

export function defineIdempotencyKey(sequelize: Sequelize): void {
  IdempotencyKey.init(
    {
      userId: { type: DataTypes.UUID, primaryKey: true, allowNull: false },
      route: { type: DataTypes.STRING, primaryKey: true, allowNull: false },
      idempotencyKey: { type: DataTypes.STRING, primaryKey: true, allowNull: false },
      bodyHash: { type: DataTypes.STRING, allowNull: false },
      answer: { type: DataTypes.JSON, allowNull: true, defaultValue: null },
      createdAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { sequelize, tableName: 'idempotency_keys', underscored: true, timestamps: false },
  )
}
