import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'

/** A figure read during a changeover, with the limits that the manual gives. */
export class ChangeoverReading extends Model<InferAttributes<ChangeoverReading>, InferCreationAttributes<ChangeoverReading>> {
  declare changeoverId: string
  declare ordinal: number
  declare name: string
  declare place: CreationOptional<string>
  declare value: number
  declare unit: string
  declare lowerLimit: CreationOptional<number | null>
  declare upperLimit: CreationOptional<number | null>
  declare manualReference: CreationOptional<string>
  declare readAt: Date
  declare readById: string
}

export function defineChangeoverReading(sequelize: Sequelize): void {
  ChangeoverReading.init(
    {
      changeoverId: { type: DataTypes.UUID, primaryKey: true, allowNull: false },
      ordinal: { type: DataTypes.INTEGER.UNSIGNED, primaryKey: true, allowNull: false },
      name: { type: DataTypes.STRING, allowNull: false },
      place: { type: DataTypes.STRING, allowNull: false, defaultValue: '' },
      value: { type: DataTypes.DECIMAL(12, 4), allowNull: false },
      unit: { type: DataTypes.STRING, allowNull: false },
      lowerLimit: { type: DataTypes.DECIMAL(12, 4), allowNull: true, defaultValue: null },
      upperLimit: { type: DataTypes.DECIMAL(12, 4), allowNull: true, defaultValue: null },
      manualReference: { type: DataTypes.STRING, allowNull: false, defaultValue: '' },
      readAt: { type: DataTypes.DATE(3), allowNull: false },
      readById: { type: DataTypes.UUID, allowNull: false },
    },
    { sequelize, tableName: 'changeover_readings', underscored: true, timestamps: false },
  )
}
