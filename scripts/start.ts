import { join } from 'node:path'
import { z } from 'zod'
import { loadConfig, type Config } from '#server/config.ts'
import { startServer } from '#server/main.ts'
import { buildClientIfStale } from './client-build.ts'
import { openDataFolder } from './data-folder.ts'
import { requireFreePort } from './free-port.ts'
import { takeInstanceLock } from './instance-lock.ts'
import { readJson } from './json-file.ts'
import { localEnvironment } from './local-environment.ts'
import { accountsIn, databaseEnvironment } from './mariadb/accounts.ts'
import { startOwnDatabase } from './mariadb/own-database.ts'
import { askedToStop, runCommand } from './run-command.ts'

const DemoSignIns = z.array(z.object({ role: z.string(), email: z.string(), password: z.string() }))
/** Stands in until the database is up, so that a wrong setting is told at once. */
const ANY_PORT = 1

function printDemoSignIns(folder: string): void {
  const file = join(folder, 'demo-sign-ins.json')
  const signIns = readJson(file, DemoSignIns) ?? []
  if (signIns.length === 0) return
  console.log(`\nDemo sign-ins (also in ${file}):`)
  for (const { role, email, password } of signIns) console.log(`  ${role.padEnd(14)} ${email.padEnd(38)} ${password}`)
}

async function serve(config: Config): Promise<void> {
  const server = await startServer(config)
  console.log(`\nScruple serves at ${server.address}`)
  if (config.isDemo) printDemoSignIns(config.dataDirectory)
  console.log('\nCtrl-C stops it.')
  await askedToStop()
  await server.close()
}

/** The database, the demo and the secrets are Scruple's own, under the data folder. */
async function startWithOwnDatabase(): Promise<number> {
  const folder = openDataFolder(process.env['DATA_DIRECTORY'] ?? 'var')
  const given = localEnvironment(folder)
  const { host, port } = loadConfig({ ...given, ...databaseEnvironment(ANY_PORT, accountsIn(folder)) }).http
  const lock = await takeInstanceLock(folder, `http://${host}:${port}`)
  process.on('exit', lock.release)
  await requireFreePort(host, port, 'npm start')
  const database = await startOwnDatabase({ folder, flushAtCommit: 1 })
  try {
    buildClientIfStale()
    await serve(loadConfig({ ...given, ...database.env }))
  } finally {
    await database.stop()
  }
  return 0
}

/** Everything is told by the environment, as in production; nothing is made up and no demo is loaded unasked. */
async function startOnGivenDatabase(): Promise<number> {
  const config = loadConfig(process.env)
  await requireFreePort(config.http.host, config.http.port, 'npm start')
  buildClientIfStale()
  await serve(config)
  return 0
}

const isDatabaseGiven = process.env['DATABASE_HOST'] !== undefined || process.env['DATABASE_PORT'] !== undefined
await runCommand(isDatabaseGiven || process.env['NODE_ENV'] === 'production' ? startOnGivenDatabase : startWithOwnDatabase)
