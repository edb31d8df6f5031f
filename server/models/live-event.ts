import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'

/** Something that an open page may want to show at once. */
export class LiveEvent extends Model<InferAttributes<LiveEvent>, InferCreationAttributes<LiveEvent>> {
  declare id: CreationOptional<number>
  declare siteId: string
  declare kind: string
  declare subjectId: string
  declare batchId: CreationOptional<string | null>
  declare createdAt: Date
}

export function defineLiveEvent(sequelize: Sequelize): void {
  LiveEvent.init(
    {
      id: { type: DataTypes.BIGINT.UNSIGNED, primaryKey: true, autoIncrement: true },
      siteId: { type: DataTypes.UUID, allowNull: false },
      kind: { type: DataTypes.STRING, allowNull: false },
      subjectId: { type: DataTypes.UUID, allowNull: false },
      batchId: { type: DataTypes.UUID, allowNull: true, defaultValue: null },
      createdAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { sequelize, tableName: 'events', underscored: true, timestamps: false },
  )
}
