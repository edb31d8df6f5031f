import { QueryTypes } from 'sequelize'
import type { BalanceDetail } from '#shared/schemas/balances.ts'
import type { BalanceCheckKind } from '#shared/vocabulary.ts'
import { database } from '../database/database.ts'

interface Row {
  sampleId: string
  batchId: string
  batchNumber: string
  sequence: number
  startedAt: Date
}

/** From the last passed check of these kinds on; a balance that never passed one puts all its samples in doubt. */
const QUERY = `
  SELECT s.id AS sampleId, b.id AS batchId, b.number AS batchNumber, s.sequence, s.started_at AS startedAt
  FROM samples s
  JOIN batches b ON b.id = s.batch_id
  WHERE s.balance_id = :balanceId
    AND s.started_at > COALESCE((SELECT MAX(c.checked_at) FROM balance_checks c WHERE c.balance_id = :balanceId AND c.has_passed AND c.kind IN (:kinds)), '1970-01-01')
  ORDER BY s.started_at`

/** Every sample weighed on a balance since its last good check: what a failed check puts in doubt (21 CFR 111.113(a)(4)). */
export async function samplesInDoubt(balanceId: string, kinds: readonly BalanceCheckKind[]): Promise<BalanceDetail['samplesInDoubt']> {
  const rows = await database().query<Row>(QUERY, { replacements: { balanceId, kinds: [...kinds] }, type: QueryTypes.SELECT })
  return rows.map(({ startedAt, ...row }) => ({ ...row, startedAt: startedAt.toISOString() }))
}
