import { QueryTypes } from 'sequelize'
import type { DueSample } from '#shared/schemas/samples.ts'
import type { MachineEventKind, SampleKind, Verdict, WeighingBasis } from '#shared/vocabulary.ts'
import { database } from '../database/database.ts'
import { sitesWith, type Actor } from '../http/actor.ts'

interface Row {
  batchId: string
  batchNumber: string
  machineCode: string
  productCode: string
  productName: string
  basis: WeighingBasis
  sampleSize: number
  startUpSampleSize: number
  intervalMinutes: number
  startedAt: Date
  startUpApprovedAt: Date | null
  lastVerdict: Verdict | null
  lastSampleAt: Date | null
  incompleteId: string | null
  incompleteN: number | null
  incompletePlanned: number | null
  eventKind: MachineEventKind | null
  eventAt: Date | null
  openSignals: number
}

const RUNNING = `
  SELECT b.id AS batchId, b.number AS batchNumber, m.code AS machineCode, p.code AS productCode, p.name AS productName,
    c.basis, c.sample_size AS sampleSize, c.start_up_sample_size AS startUpSampleSize, c.interval_minutes AS intervalMinutes,
    b.started_at AS startedAt, b.start_up_approved_at AS startUpApprovedAt,
    l.verdict AS lastVerdict, l.started_at AS lastSampleAt,
    i.id AS incompleteId, i.planned_n AS incompletePlanned, (SELECT COUNT(*) FROM weighings w WHERE w.sample_id = i.id) AS incompleteN,
    e.kind AS eventKind, e.happened_at AS eventAt,
    (SELECT COUNT(*) FROM signals g WHERE g.batch_id = b.id AND g.state <> 'closed') AS openSignals
  FROM batches b
  JOIN machines m ON m.id = b.machine_id
  JOIN products p ON p.id = b.product_id
  JOIN control_plans c ON c.id = b.control_plan_id
  LEFT JOIN samples l ON l.id = (SELECT s.id FROM samples s WHERE s.batch_id = b.id AND s.state = 'complete' ORDER BY s.started_at DESC LIMIT 1)
  LEFT JOIN samples i ON i.id = (SELECT s.id FROM samples s WHERE s.batch_id = b.id AND s.state = 'incomplete' LIMIT 1)
  LEFT JOIN machine_events e ON e.id = (
    SELECT v.id FROM machine_events v
    WHERE v.batch_id = b.id AND v.kind IN ('adjustment', 'changeover', 'stop', 'shell-lot', 'blend-container', 'speed')
    ORDER BY v.happened_at DESC LIMIT 1)
  WHERE b.site_id IN (:sites) AND b.state = 'running'
  ORDER BY m.code`

/** After these the next sample is due at once, whatever the interval says (trade practice). */
const TRIGGERS: Partial<Record<MachineEventKind, { kind: SampleKind; because: string }>> = {
  adjustment: { kind: 'after-adjustment', because: 'a setting was moved' },
  changeover: { kind: 'after-adjustment', because: 'the tooling was changed' },
  stop: { kind: 'after-stop', because: 'the machine was stopped' },
  'shell-lot': { kind: 'routine', because: 'a new shell lot was taken' },
  'blend-container': { kind: 'routine', because: 'a new blend container was taken' },
  speed: { kind: 'after-adjustment', because: 'the speed was changed' },
}

function next(row: Row): { kind: SampleKind; n: number; dueAt: Date; because: string } {
  const { startedAt, startUpApprovedAt, lastSampleAt, eventKind, eventAt, intervalMinutes, sampleSize } = row
  if (!startUpApprovedAt)
    return { kind: 'start-up', n: row.startUpSampleSize, dueAt: lastSampleAt ?? startedAt, because: 'the start-up is not approved yet' }
  const since = lastSampleAt ?? startUpApprovedAt
  const trigger = eventKind === null ? undefined : TRIGGERS[eventKind]
  if (trigger && eventAt && eventAt > since) return { ...trigger, n: sampleSize, dueAt: eventAt }
  if (row.lastVerdict === 'action')
    return { kind: 'resample', n: 2 * sampleSize, dueAt: since, because: 'the last sample was beyond action: two good ones are needed' }
  if (row.lastVerdict === 'alert')
    return { kind: 'resample', n: 2 * sampleSize, dueAt: since, because: 'the last sample was at alert: weigh double at once' }
  return {
    kind: 'routine',
    n: sampleSize,
    dueAt: new Date(since.getTime() + intervalMinutes * 60_000),
    because: `every ${intervalMinutes} minutes`,
  }
}

/** What each running machine of the actor's sites needs weighed next, and when. */
export async function listDueSamples(actor: Actor, siteId: string | undefined, now: Date): Promise<DueSample[]> {
  const sites = sitesWith(actor, 'record:read').filter((id) => siteId === undefined || id === siteId)
  if (sites.length === 0) return []
  const rows = await database().query<Row>(RUNNING, { replacements: { sites }, type: QueryTypes.SELECT })
  return rows.map((row) => {
    const { dueAt, ...due } = next(row)
    const { batchId, batchNumber, machineCode, productCode, productName, basis, lastVerdict, lastSampleAt, openSignals } = row
    return {
      ...{ batchId, batchNumber, machineCode, productCode, productName, basis, lastVerdict, openSignals },
      ...due,
      dueAt: dueAt.toISOString(),
      isOverdue: dueAt.getTime() < now.getTime() - 60_000,
      lastSampleAt: lastSampleAt?.toISOString() ?? null,
      incomplete:
        row.incompleteId === null ? null : { id: row.incompleteId, n: row.incompleteN ?? 0, plannedN: row.incompletePlanned ?? 0 },
    }
  })
}
