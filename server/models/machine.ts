import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'
import { newId } from './new-id.ts'

/** A capsule filler and its geometry: bores per group, disc groups, segments, stations, speed, and how its depth scale reads. */
export class Machine extends Model<InferAttributes<Machine>, InferCreationAttributes<Machine>> {
  declare id: CreationOptional<string>
  declare siteId: string
  declare code: string
  declare name: string
  declare boresPerGroup: number
  declare discGroups: CreationOptional<number>
  declare segments: number
  declare stations: CreationOptional<number>
  declare indexesPerMinute: number
  declare scaleMinMm: number
  declare scaleMaxMm: number
  declare deeperIsHigher: CreationOptional<boolean>
  declare isActive: CreationOptional<boolean>
  declare version: CreationOptional<number>
  declare createdAt: CreationOptional<Date>
  declare updatedAt: CreationOptional<Date>
}

export function defineMachine(sequelize: Sequelize): void {
  Machine.init(
    {
      id: { type: DataTypes.UUID, primaryKey: true, defaultValue: newId },
      siteId: { type: DataTypes.UUID, allowNull: false },
      code: { type: DataTypes.STRING, allowNull: false },
      name: { type: DataTypes.STRING, allowNull: false },
      boresPerGroup: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      discGroups: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 6 },
      segments: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      stations: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 5 },
      indexesPerMinute: { type: DataTypes.DECIMAL(6, 2), allowNull: false },
      scaleMinMm: { type: DataTypes.DECIMAL(7, 3), allowNull: false },
      scaleMaxMm: { type: DataTypes.DECIMAL(7, 3), allowNull: false },
      deeperIsHigher: { type: DataTypes.BOOLEAN, allowNull: false, defaultValue: true },
      isActive: { type: DataTypes.BOOLEAN, allowNull: false, defaultValue: true },
      version: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 1 },
      createdAt: DataTypes.DATE(3),
      updatedAt: DataTypes.DATE(3),
    },
    { sequelize, tableName: 'machines', underscored: true, timestamps: true },
  )
}
