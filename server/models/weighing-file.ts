import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'
import { WEIGHING_FILE_STATES, type WeighingFileState } from '#shared/vocabulary.ts'
import { newId } from './new-id.ts'

/** A balance file as it was uploaded; its bytes lie in chunks beside it, unchanged. */
export class WeighingFile extends Model<InferAttributes<WeighingFile>, InferCreationAttributes<WeighingFile>> {
  declare id: CreationOptional<string>
  declare siteId: string
  declare batchId: string
  declare balanceId: string
  declare name: string
  declare sizeBytes: number
  declare sha256: string
  declare state: CreationOptional<WeighingFileState>
  /** The hash again once the file is published; unique at a site, so that no file counts twice. */
  declare publishedSha256: CreationOptional<string | null>
  declare mapping: CreationOptional<object | null>
  declare report: CreationOptional<object | null>
  declare uploadedById: string
  declare uploadedAt: Date
  declare publishedAt: CreationOptional<Date | null>
}

export function defineWeighingFile(sequelize: Sequelize): void {
  WeighingFile.init(
    {
      id: { type: DataTypes.UUID, primaryKey: true, defaultValue: newId },
      siteId: { type: DataTypes.UUID, allowNull: false },
      batchId: { type: DataTypes.UUID, allowNull: false },
      balanceId: { type: DataTypes.UUID, allowNull: false },
      name: { type: DataTypes.STRING, allowNull: false },
      sizeBytes: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      sha256: { type: DataTypes.STRING, allowNull: false },
      state: { type: DataTypes.ENUM(...WEIGHING_FILE_STATES), allowNull: false, defaultValue: 'uploaded' },
      publishedSha256: { type: DataTypes.STRING, allowNull: true, defaultValue: null },
      mapping: { type: DataTypes.JSON, allowNull: true, defaultValue: null },
      report: { type: DataTypes.JSON, allowNull: true, defaultValue: null },
      uploadedById: { type: DataTypes.UUID, allowNull: false },
      uploadedAt: { type: DataTypes.DATE(3), allowNull: false },
      publishedAt: { type: DataTypes.DATE(3), allowNull: true, defaultValue: null },
    },
    { sequelize, tableName: 'weighing_files', underscored: true, timestamps: false },
  )
}
