import { Op } from 'sequelize'
import { Batch } from '../../models/batch.ts'

type BatchPart = 'machineId' | 'toolingSetId' | 'shellLotId' | 'productId'

/** Which of these masters any batch was planned with. */
export async function usedInBatches(part: BatchPart, ids: readonly string[]): Promise<ReadonlySet<string>> {
  if (ids.length === 0) return new Set()
  const rows = await Batch.findAll({ attributes: [part], where: { [part]: { [Op.in]: [...ids] } }, group: [part] })
  return new Set(rows.map((row) => row[part]))
}
