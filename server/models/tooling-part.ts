import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'
import { TOOLING_PART_KINDS, type ToolingPartKind } from '#shared/vocabulary.ts'
import { newId } from './new-id.ts'

/** One part of a tooling set with its serial and the capsules made through it. */
export class ToolingPart extends Model<InferAttributes<ToolingPart>, InferCreationAttributes<ToolingPart>> {
  declare id: CreationOptional<string>
  declare toolingSetId: string
  declare kind: ToolingPartKind
  declare serial: string
  declare station: CreationOptional<number | null>
  declare capsulesAtFitting: CreationOptional<number>
  declare capsulesAtInspection: CreationOptional<number>
  declare capsulesNow: CreationOptional<number>
  declare inspectionInterval: CreationOptional<number | null>
  /** When the part was taken out of the set; null while it belongs to it. */
  declare removedAt: CreationOptional<Date | null>
  declare version: CreationOptional<number>
}

export function defineToolingPart(sequelize: Sequelize): void {
  ToolingPart.init(
    {
      id: { type: DataTypes.UUID, primaryKey: true, defaultValue: newId },
      toolingSetId: { type: DataTypes.UUID, allowNull: false },
      kind: { type: DataTypes.ENUM(...TOOLING_PART_KINDS), allowNull: false },
      serial: { type: DataTypes.STRING, allowNull: false },
      station: { type: DataTypes.INTEGER.UNSIGNED, allowNull: true, defaultValue: null },
      capsulesAtFitting: { type: DataTypes.BIGINT.UNSIGNED, allowNull: false, defaultValue: 0 },
      capsulesAtInspection: { type: DataTypes.BIGINT.UNSIGNED, allowNull: false, defaultValue: 0 },
      capsulesNow: { type: DataTypes.BIGINT.UNSIGNED, allowNull: false, defaultValue: 0 },
      inspectionInterval: { type: DataTypes.BIGINT.UNSIGNED, allowNull: true, defaultValue: null },
      removedAt: { type: DataTypes.DATE(3), allowNull: true, defaultValue: null },
      version: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 1 },
    },
    { sequelize, tableName: 'tooling_parts', underscored: true, timestamps: false },
  )
}
