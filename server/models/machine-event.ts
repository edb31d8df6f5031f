import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'
import { MACHINE_EVENT_KINDS, type MachineEventKind, MACHINE_SETTINGS, type MachineSetting } from '#shared/vocabulary.ts'
import { newId } from './new-id.ts'

/** Something that happened at a machine and may show in the weights. */
export class MachineEvent extends Model<InferAttributes<MachineEvent>, InferCreationAttributes<MachineEvent>> {
  declare id: CreationOptional<string>
  declare siteId: string
  declare machineId: string
  declare batchId: CreationOptional<string | null>
  declare kind: MachineEventKind
  declare happenedAt: Date
  declare recordedAt: Date
  declare station: CreationOptional<number | null>
  declare setting: CreationOptional<MachineSetting | null>
  declare valueFrom: CreationOptional<number | null>
  declare valueTo: CreationOptional<number | null>
  declare unit: CreationOptional<string | null>
  declare shellLotId: CreationOptional<string | null>
  declare toolingSetId: CreationOptional<string | null>
  declare changeoverId: CreationOptional<string | null>
  declare label: CreationOptional<string>
  declare reason: CreationOptional<string>
  declare recordedById: string
}

export function defineMachineEvent(sequelize: Sequelize): void {
  MachineEvent.init(
    {
      id: { type: DataTypes.UUID, primaryKey: true, defaultValue: newId },
      siteId: { type: DataTypes.UUID, allowNull: false },
      machineId: { type: DataTypes.UUID, allowNull: false },
      batchId: { type: DataTypes.UUID, allowNull: true, defaultValue: null },
      kind: { type: DataTypes.ENUM(...MACHINE_EVENT_KINDS), allowNull: false },
      happenedAt: { type: DataTypes.DATE(3), allowNull: false },
      recordedAt: { type: DataTypes.DATE(3), allowNull: false },
      station: { type: DataTypes.INTEGER.UNSIGNED, allowNull: true, defaultValue: null },
      setting: { type: DataTypes.ENUM(...MACHINE_SETTINGS), allowNull: true, defaultValue: null },
      valueFrom: { type: DataTypes.DECIMAL(12, 4), allowNull: true, defaultValue: null },
      valueTo: { type: DataTypes.DECIMAL(12, 4), allowNull: true, defaultValue: null },
      unit: { type: DataTypes.STRING, allowNull: true, defaultValue: null },
      shellLotId: { type: DataTypes.UUID, allowNull: true, defaultValue: null },
      toolingSetId: { type: DataTypes.UUID, allowNull: true, defaultValue: null },
      changeoverId: { type: DataTypes.UUID, allowNull: true, defaultValue: null },
      label: { type: DataTypes.STRING, allowNull: false, defaultValue: '' },
      reason: { type: DataTypes.STRING, allowNull: false, defaultValue: '' },
      recordedById: { type: DataTypes.UUID, allowNull: false },
    },
    { sequelize, tableName: 'machine_events', underscored: true, timestamps: false },
  )
}
