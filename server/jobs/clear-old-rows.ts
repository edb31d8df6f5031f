import type { Logger } from 'pino'
import { Op } from 'sequelize'
import { IdempotencyKey } from '../models/idempotency-key.ts'
import { LiveEvent } from '../models/live-event.ts'
import type { Job } from './job.ts'

const HOUR_MS = 3_600_000
/** Longer than the longest time a tablet may be off line (requirement F7). */
const KEEP_KEYS_MS = 14 * 24 * HOUR_MS
const KEEP_EVENTS_MS = 24 * HOUR_MS

/** Working memory, never records: answered keys after two weeks, live events after a day. */
export function startClearingOldRows(logger: Logger): Job {
  const clear = async (): Promise<void> => {
    const now = Date.now()
    await IdempotencyKey.destroy({ where: { createdAt: { [Op.lt]: new Date(now - KEEP_KEYS_MS) } } })
    await LiveEvent.destroy({ where: { createdAt: { [Op.lt]: new Date(now - KEEP_EVENTS_MS) } } })
  }
  const timer = setInterval(() => {
    clear().catch((error: unknown) => logger.error({ err: error }, 'Old working rows could not be cleared; it is tried again in an hour.'))
  }, HOUR_MS)
  timer.unref()
  return {
    stop: () => {
      clearInterval(timer)
      return Promise.resolve()
    },
  }
}
