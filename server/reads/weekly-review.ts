import { QueryTypes } from 'sequelize'
import type { ReviewFigures } from '#shared/schemas/review.ts'
import type { BatchState } from '#shared/vocabulary.ts'
import { weekAfter, weekStart } from '#shared/trade/iso-week.ts'
import { database } from '../database/database.ts'

interface BatchRow {
  id: string
  number: string
  state: BatchState
  machineCode: string
  productCode: string
  toolingSetCode: string
  startedAt: Date
  targetMg: number
  lowerMg: number
  upperMg: number
  samples: number
  weights: number | null
  sumN: number | null
  sumNMean: number | null
  sumSquares: number | null
  alerts: number
  actions: number
  adjustments: number
}

/** Summaries of samples only: a week of any number of weights is read without touching one. */
const BATCHES = `
  SELECT b.id, b.number, b.state, m.code AS machineCode, p.code AS productCode, t.code AS toolingSetCode, b.started_at AS startedAt,
    p.target_fill_mg AS targetMg, p.lower_specification_mg AS lowerMg, p.upper_specification_mg AS upperMg,
    COUNT(s.id) AS samples, SUM(s.n) AS sumN, SUM(s.n * (s.mean_mg - IF(s.basis = 'gross', s.tare_mean_mg, 0))) AS sumNMean,
    SUM((s.n - 1) * s.sd_mg * s.sd_mg + s.n * POW(s.mean_mg - IF(s.basis = 'gross', s.tare_mean_mg, 0) - p.target_fill_mg, 2)) AS sumSquares,
    SUM(s.verdict = 'alert') AS alerts, SUM(s.verdict = 'action') AS actions,
    (SELECT COUNT(*) FROM machine_events e WHERE e.batch_id = b.id AND e.kind = 'adjustment') AS adjustments
  FROM batches b
  JOIN machines m ON m.id = b.machine_id
  JOIN products p ON p.id = b.product_id
  JOIN tooling_sets t ON t.id = b.tooling_set_id
  LEFT JOIN samples s ON s.batch_id = b.id AND s.state = 'complete' AND s.kind <> 'start-up' AND s.excluded_reason IS NULL
  WHERE b.site_id = :siteId AND b.started_at >= :from AND b.started_at < :to
  GROUP BY b.id
  ORDER BY b.started_at`

const SIGNALS = `
  SELECT g.severity, g.state, g.cause FROM signals g JOIN batches b ON b.id = g.batch_id
  WHERE b.site_id = :siteId AND g.raised_at >= :from AND g.raised_at < :to`

interface ChangeoverRow {
  id: string
  machineCode: string
  fromCode: string | null
  toCode: string
  startedAt: Date
  minutes: number | null
  plannedMinutes: number | null
  trials: number | null
  scrappedCapsules: number | null
}

const CHANGEOVERS = `
  SELECT c.id, m.code AS machineCode, f.code AS fromCode, t.code AS toCode, c.started_at AS startedAt,
    TIMESTAMPDIFF(SECOND, COALESCE(c.last_good_capsule_at, c.started_at), COALESCE(c.first_approved_capsule_at, c.finished_at)) / 60 AS minutes,
    c.planned_minutes AS plannedMinutes, c.trials, c.scrapped_capsules AS scrappedCapsules
  FROM changeovers c
  JOIN machines m ON m.id = c.machine_id
  LEFT JOIN tooling_sets f ON f.id = c.from_tooling_set_id
  JOIN tooling_sets t ON t.id = c.to_tooling_set_id
  WHERE c.site_id = :siteId AND c.started_at >= :from AND c.started_at < :to
  ORDER BY c.started_at`

const DECISIONS = `
  SELECT d.decision, COUNT(*) AS count FROM dispositions d JOIN batches b ON b.id = d.batch_id
  WHERE b.site_id = :siteId AND d.decided_at >= :from AND d.decided_at < :to GROUP BY d.decision`

function presentBatch(row: BatchRow): ReviewFigures['batches'][number] {
  const { id, number, state, machineCode, productCode, toolingSetCode, targetMg, samples, alerts, actions, adjustments } = row
  const n = Number(row.sumN ?? 0)
  const mean = n > 0 ? Number(row.sumNMean) / n : null
  // Σ(x − target)² less n(mean − target)² is Σ(x − mean)²: the overall spread from the samples' own summaries.
  const squares = mean === null ? null : Number(row.sumSquares) - n * (mean - targetMg) ** 2
  const sd = squares === null || n < 2 ? null : Math.sqrt(Math.max(0, squares) / (n - 1))
  const ppk = mean === null || sd === null || sd === 0 ? null : Math.min(row.upperMg - mean, mean - row.lowerMg) / (3 * sd)
  return {
    ...{ id, number, state, machineCode, productCode, toolingSetCode, targetMg, samples, ppk, adjustments },
    startedAt: row.startedAt.toISOString(),
    meanMg: mean,
    meanOffPercent: mean === null ? null : (100 * (mean - targetMg)) / targetMg,
    rsdPercent: mean === null || sd === null ? null : (100 * sd) / mean,
    alerts: Number(alerts),
    actions: Number(actions),
  }
}

function causesOf(signals: readonly { cause: string | null }[]): ReviewFigures['signals']['causes'] {
  const counts = new Map<string, number>()
  for (const { cause } of signals) if (cause !== null) counts.set(cause, (counts.get(cause) ?? 0) + 1)
  return [...counts].map(([cause, count]) => ({ cause, count })).toSorted((a, b) => b.count - a.count)
}

/** One week of a site in figures, from the summaries that batches and samples carry. */
export async function readWeek(siteId: string, week: string): Promise<ReviewFigures> {
  const from = weekStart(week)
  const to = weekStart(weekAfter(week, 1))
  const options = { replacements: { siteId, from, to }, type: QueryTypes.SELECT } as const
  const batches = await database().query<BatchRow>(BATCHES, options)
  const signals = await database().query<{ severity: string; state: string; cause: string | null }>(SIGNALS, options)
  const changeovers = await database().query<ChangeoverRow>(CHANGEOVERS, options)
  const decisions = await database().query<{ decision: string; count: number }>(DECISIONS, options)
  const [deviations] = await database().query<{ open: number }>(
    `SELECT COUNT(*) AS open FROM deviations WHERE site_id = :siteId AND state = 'open'`,
    options,
  )
  const decided = (word: string): number => decisions.find(({ decision }) => decision === word)?.count ?? 0
  return {
    week,
    fromUtc: from.toISOString(),
    toUtc: to.toISOString(),
    batches: batches.map(presentBatch),
    signals: {
      alerts: signals.filter(({ severity }) => severity === 'alert').length,
      actions: signals.filter(({ severity }) => severity === 'action').length,
      open: signals.filter(({ state }) => state !== 'closed').length,
      causes: causesOf(signals),
    },
    changeovers: changeovers.map(({ id, machineCode, fromCode, toCode, startedAt, minutes, plannedMinutes, trials, scrappedCapsules }) => ({
      ...{ id, machineCode, plannedMinutes, trials, scrappedCapsules },
      from: fromCode ?? '',
      to: toCode,
      startedAt: startedAt.toISOString(),
      minutes: minutes === null ? null : Number(minutes),
    })),
    decisions: {
      released: decided('release'),
      onHold: decided('hold'),
      rejected: decided('reject'),
      openDeviations: deviations?.open ?? 0,
    },
  }
}
