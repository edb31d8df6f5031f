import type { Logger } from 'pino'
import type { Config } from '../config.ts'

/** Something that runs beside the requests until it is stopped. */
export interface Job {
  stop(): Promise<void>
}

/** Starts everything that runs beside the requests. */
export function startJobs(_config: Config, _logger: Logger): Promise<Job> {
  return Promise.resolve({ stop: () => Promise.resolve() })
}
