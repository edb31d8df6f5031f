import { DataTypes, Model, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'

/** One piece of the original bytes of a balance file. */
export class WeighingFileChunk extends Model<InferAttributes<WeighingFileChunk>, InferCreationAttributes<WeighingFileChunk>> {
  declare weighingFileId: string
  declare ordinal: number
  declare bytes: Buffer
}

export function defineWeighingFileChunk(sequelize: Sequelize): void {
  WeighingFileChunk.init(
    {
      weighingFileId: { type: DataTypes.UUID, primaryKey: true, allowNull: false },
      ordinal: { type: DataTypes.INTEGER.UNSIGNED, primaryKey: true, allowNull: false },
      bytes: { type: DataTypes.BLOB('medium'), allowNull: false },
    },
    { sequelize, tableName: 'weighing_file_chunks', underscored: true, timestamps: false },
  )
}
