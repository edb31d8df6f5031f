import type { CreationAttributes, Model, ModelStatic } from 'sequelize'

const ROWS_A_CALL = 5000

/** Stores many rows of one model, some thousand a statement. */
export async function insertAll<M extends Model>(model: ModelStatic<M>, rows: readonly CreationAttributes<M>[]): Promise<void> {
  for (let from = 0; from < rows.length; from += ROWS_A_CALL) await model.bulkCreate(rows.slice(from, from + ROWS_A_CALL))
}
