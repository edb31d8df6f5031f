import { mkdirSync } from 'node:fs'
import type { Server } from 'node:http'
import { pino } from 'pino'
import { createApp } from './app.ts'
import { loadConfig, type Config } from './config.ts'
import { connectDatabase } from './database/database.ts'
import { migrate } from './database/migrate.ts'
import { startJobs } from './jobs/index.ts'
import { loadDemoIfEmpty } from './services/demo/load-demo-if-empty.ts'
import { passPhrasePool } from './workers/pass-phrase-pool.ts'
import { simulationPool } from './workers/simulation-pool.ts'

const REQUEST_TIMEOUT_MS = 120_000
const HEADERS_TIMEOUT_MS = 20_000
const DRAIN_MS = 10_000

export interface RunningServer {
  address: string
  close(): Promise<void>
}

function listen(app: ReturnType<typeof createApp>, { host, port }: Config['http']): Promise<Server> {
  return new Promise((resolve, reject) => {
    const server = app.listen(port, host, (error?: Error) => (error ? reject(error) : resolve(server)))
    server.requestTimeout = REQUEST_TIMEOUT_MS
    server.headersTimeout = HEADERS_TIMEOUT_MS
  })
}

function addressOf(server: Server): string {
  const address = server.address()
  if (address === null || typeof address === 'string') throw new Error('The server has no network address.')
  return `http://${address.address}:${address.port}`
}

/** Running requests finish, streams are told to reconnect, and nothing new is taken. */
function drain(server: Server): Promise<void> {
  return new Promise((resolve) => {
    const deadline = setTimeout(() => server.closeAllConnections(), DRAIN_MS)
    server.close(() => {
      clearTimeout(deadline)
      resolve()
    })
    server.closeIdleConnections()
  })
}

/** Migrates, loads the demo on an empty database when asked to, and serves. */
export async function startServer(config: Config): Promise<RunningServer> {
  const logger = pino({ level: config.logLevel })
  mkdirSync(`${config.dataDirectory}/uploads`, { recursive: true })
  await migrate(config.database)
  const sequelize = connectDatabase(config.database)
  if (config.isDemo) await loadDemoIfEmpty(config)
  const jobs = await startJobs(config, logger)
  const server = await listen(createApp(config, logger), config.http)
  return {
    address: addressOf(server),
    close: async () => {
      await jobs.stop()
      await drain(server)
      await passPhrasePool().close()
      await simulationPool().close()
      await sequelize.close()
    },
  }
}

/** Run by itself (behind a balancer, in production): environment in, one log line out, SIGTERM ends it cleanly. */
async function runAlone(): Promise<void> {
  const running = await startServer(loadConfig(process.env))
  process.stdout.write(`Scruple serves at ${running.address}\n`)
  const stop = (): void => {
    void running.close().then(() => process.exit(0))
  }
  process.on('SIGTERM', stop)
  process.on('SIGINT', stop)
}

if (process.argv[1] === import.meta.filename) await runAlone()
