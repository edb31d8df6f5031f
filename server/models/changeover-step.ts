import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'

/** One step of a changeover and who did it when. */
export class ChangeoverStep extends Model<InferAttributes<ChangeoverStep>, InferCreationAttributes<ChangeoverStep>> {
  declare changeoverId: string
  declare ordinal: number
  declare title: string
  declare isRequired: CreationOptional<boolean>
  declare doneAt: CreationOptional<Date | null>
  declare doneById: CreationOptional<string | null>
  declare remark: CreationOptional<string>
}

export function defineChangeoverStep(sequelize: Sequelize): void {
  ChangeoverStep.init(
    {
      changeoverId: { type: DataTypes.UUID, primaryKey: true, allowNull: false },
      ordinal: { type: DataTypes.INTEGER.UNSIGNED, primaryKey: true, allowNull: false },
      title: { type: DataTypes.STRING, allowNull: false },
      isRequired: { type: DataTypes.BOOLEAN, allowNull: false, defaultValue: true },
      doneAt: { type: DataTypes.DATE(3), allowNull: true, defaultValue: null },
      doneById: { type: DataTypes.UUID, allowNull: true, defaultValue: null },
      remark: { type: DataTypes.STRING, allowNull: false, defaultValue: '' },
    },
    { sequelize, tableName: 'changeover_steps', underscored: true, timestamps: false },
  )
}
