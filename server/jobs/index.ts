import type { Logger } from 'pino'
import type { Config } from '../config.ts'
import { startClearingOldRows } from './clear-old-rows.ts'
import type { Job } from './job.ts'
import { startMailCatcher } from './mail-catcher.ts'
import { startMailOutbox } from './mail-outbox.ts'

/** Starts everything that runs beside the requests. */
export async function startJobs(config: Config, logger: Logger): Promise<Job> {
  const jobs: Job[] = [startClearingOldRows(logger)]
  const catcher = config.isMailCatcherOn ? await startMailCatcher(config.dataDirectory) : undefined
  if (catcher) jobs.push(catcher)
  const smtp = catcher ? { host: '127.0.0.1', port: catcher.port, isSecure: false, user: undefined, password: undefined } : config.smtp
  if (smtp) jobs.unshift(startMailOutbox(smtp, config.mailFrom, logger))
  return {
    stop: async () => {
      for (const job of jobs) await job.stop()
    },
  }
}
