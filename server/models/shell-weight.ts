import { DataTypes, Model, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'

/** One empty shell as weighed, under the tare it belongs to. */
export class ShellWeight extends Model<InferAttributes<ShellWeight>, InferCreationAttributes<ShellWeight>> {
  declare shellLotId: string
  declare tareVersion: number
  declare ordinal: number
  declare weightMg: number
}

export function defineShellWeight(sequelize: Sequelize): void {
  ShellWeight.init(
    {
      shellLotId: { type: DataTypes.UUID, primaryKey: true, allowNull: false },
      tareVersion: { type: DataTypes.INTEGER.UNSIGNED, primaryKey: true, allowNull: false },
      ordinal: { type: DataTypes.INTEGER.UNSIGNED, primaryKey: true, allowNull: false },
      weightMg: { type: DataTypes.DECIMAL(9, 3), allowNull: false },
    },
    { sequelize, tableName: 'shell_weights', underscored: true, timestamps: false },
  )
}
