import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'
import {
  SAMPLE_KINDS,
  type SampleKind,
  SAMPLE_STATES,
  type SampleState,
  VERDICTS,
  type Verdict,
  WEIGHING_BASES,
  type WeighingBasis,
  WEIGHING_ENTRIES,
  type WeighingEntry,
} from '#shared/vocabulary.ts'
import { newId } from './new-id.ts'

/** Capsules weighed together. It carries its own summary, so that charts never scan weights. */
export class Sample extends Model<InferAttributes<Sample>, InferCreationAttributes<Sample>> {
  declare id: CreationOptional<string>
  declare batchId: string
  declare sequence: number
  declare kind: SampleKind
  declare basis: WeighingBasis
  declare state: CreationOptional<SampleState>
  declare plannedN: number
  declare n: CreationOptional<number>
  declare meanMg: CreationOptional<number | null>
  declare sdMg: CreationOptional<number | null>
  declare rangeMg: CreationOptional<number | null>
  declare minMg: CreationOptional<number | null>
  declare maxMg: CreationOptional<number | null>
  declare toolingSetId: string
  declare shellLotId: string
  declare tareMeanMg: CreationOptional<number | null>
  declare tareSdMg: CreationOptional<number | null>
  declare tareN: CreationOptional<number | null>
  declare balanceId: CreationOptional<string | null>
  declare balanceCheckId: CreationOptional<string | null>
  declare weighingFileId: CreationOptional<string | null>
  declare firstSegment: CreationOptional<number | null>
  declare dueAt: CreationOptional<Date | null>
  declare startedAt: Date
  declare completedAt: CreationOptional<Date | null>
  declare capsulesMade: CreationOptional<number | null>
  declare weighedById: string
  declare entry: WeighingEntry
  declare verdict: CreationOptional<Verdict | null>
  declare verdictReasons: CreationOptional<object[] | null>
  declare isLate: CreationOptional<boolean>
  declare correctionCount: CreationOptional<number>
  declare abandonedReason: CreationOptional<string | null>
  declare excludedReason: CreationOptional<string | null>
  declare excludedById: CreationOptional<string | null>
  declare version: CreationOptional<number>
  declare createdAt: CreationOptional<Date>
  declare updatedAt: CreationOptional<Date>
}

export function defineSample(sequelize: Sequelize): void {
  Sample.init(
    {
      id: { type: DataTypes.UUID, primaryKey: true, defaultValue: newId },
      batchId: { type: DataTypes.UUID, allowNull: false },
      sequence: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      kind: { type: DataTypes.ENUM(...SAMPLE_KINDS), allowNull: false },
      basis: { type: DataTypes.ENUM(...WEIGHING_BASES), allowNull: false },
      state: { type: DataTypes.ENUM(...SAMPLE_STATES), allowNull: false, defaultValue: 'incomplete' },
      plannedN: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      n: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 0 },
      meanMg: { type: DataTypes.DECIMAL(10, 4), allowNull: true, defaultValue: null },
      sdMg: { type: DataTypes.DECIMAL(10, 4), allowNull: true, defaultValue: null },
      rangeMg: { type: DataTypes.DECIMAL(9, 3), allowNull: true, defaultValue: null },
      minMg: { type: DataTypes.DECIMAL(9, 3), allowNull: true, defaultValue: null },
      maxMg: { type: DataTypes.DECIMAL(9, 3), allowNull: true, defaultValue: null },
      toolingSetId: { type: DataTypes.UUID, allowNull: false },
      shellLotId: { type: DataTypes.UUID, allowNull: false },
      tareMeanMg: { type: DataTypes.DECIMAL(9, 4), allowNull: true, defaultValue: null },
      tareSdMg: { type: DataTypes.DECIMAL(9, 4), allowNull: true, defaultValue: null },
      tareN: { type: DataTypes.INTEGER.UNSIGNED, allowNull: true, defaultValue: null },
      balanceId: { type: DataTypes.UUID, allowNull: true, defaultValue: null },
      balanceCheckId: { type: DataTypes.UUID, allowNull: true, defaultValue: null },
      weighingFileId: { type: DataTypes.UUID, allowNull: true, defaultValue: null },
      firstSegment: { type: DataTypes.INTEGER.UNSIGNED, allowNull: true, defaultValue: null },
      dueAt: { type: DataTypes.DATE(3), allowNull: true, defaultValue: null },
      startedAt: { type: DataTypes.DATE(3), allowNull: false },
      completedAt: { type: DataTypes.DATE(3), allowNull: true, defaultValue: null },
      capsulesMade: { type: DataTypes.INTEGER.UNSIGNED, allowNull: true, defaultValue: null },
      weighedById: { type: DataTypes.UUID, allowNull: false },
      entry: { type: DataTypes.ENUM(...WEIGHING_ENTRIES), allowNull: false },
      verdict: { type: DataTypes.ENUM(...VERDICTS), allowNull: true, defaultValue: null },
      verdictReasons: { type: DataTypes.JSON, allowNull: true, defaultValue: null },
      isLate: { type: DataTypes.BOOLEAN, allowNull: false, defaultValue: false },
      correctionCount: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 0 },
      abandonedReason: { type: DataTypes.STRING, allowNull: true, defaultValue: null },
      excludedReason: { type: DataTypes.STRING, allowNull: true, defaultValue: null },
      excludedById: { type: DataTypes.UUID, allowNull: true, defaultValue: null },
      version: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 1 },
      createdAt: DataTypes.DATE(3),
      updatedAt: DataTypes.DATE(3),
    },
    { sequelize, tableName: 'samples', underscored: true, timestamps: true },
  )
}
