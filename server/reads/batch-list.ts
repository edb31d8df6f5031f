import { QueryTypes } from 'sequelize'
import type { BatchList, BatchListItem, BatchQuery } from '#shared/schemas/batches.ts'
import { database } from '../database/database.ts'
import { sitesWith, type Actor } from '../http/actor.ts'

type Row = Omit<BatchListItem, 'startedAt' | 'endedAt'> & { startedAt: Date | null; endedAt: Date | null }

const CONDITIONS = `b.site_id IN (:sites)
  AND (:state IS NULL OR b.state = :state)
  AND (:machineId IS NULL OR b.machine_id = :machineId)
  AND (:productId IS NULL OR b.product_id = :productId)
  AND (:search IS NULL OR b.number LIKE CONCAT('%', :search, '%'))`

const PAGE = `
  SELECT b.id, b.site_id AS siteId, b.number, b.state, m.code AS machineCode, p.code AS productCode, p.name AS productName,
    b.started_at AS startedAt, b.ended_at AS endedAt, b.sample_count AS sampleCount,
    (SELECT s.verdict FROM samples s WHERE s.batch_id = b.id AND s.state = 'complete' ORDER BY s.started_at DESC LIMIT 1) AS lastVerdict,
    (SELECT COUNT(*) FROM signals g WHERE g.batch_id = b.id AND g.state <> 'closed') AS openSignals
  FROM batches b
  JOIN machines m ON m.id = b.machine_id
  JOIN products p ON p.id = b.product_id
  WHERE ${CONDITIONS}
  ORDER BY b.started_at IS NULL DESC, b.started_at DESC, b.id DESC
  LIMIT :limit OFFSET :offset`

/** The batches of the actor's sites, those not started first, then the newest. */
export async function listBatches(actor: Actor, query: BatchQuery): Promise<BatchList> {
  const own = sitesWith(actor, 'record:read')
  const sites = query.siteId === undefined ? own : own.filter((id) => id === query.siteId)
  if (sites.length === 0) return { items: [], total: 0 }
  const { state = null, machineId = null, productId = null, limit, offset } = query
  const search = query.search?.replace(/[\\%_]/g, '\\$&') ?? null
  const replacements = { sites, state, machineId, productId, search, limit, offset }
  const rows = await database().query<Row>(PAGE, { replacements, type: QueryTypes.SELECT })
  const [count] = await database().query<{ total: number }>(`SELECT COUNT(*) AS total FROM batches b WHERE ${CONDITIONS}`, {
    replacements,
    type: QueryTypes.SELECT,
  })
  const items = rows.map((row) => ({
    ...row,
    startedAt: row.startedAt?.toISOString() ?? null,
    endedAt: row.endedAt?.toISOString() ?? null,
  }))
  return { items, total: count?.total ?? 0 }
}
