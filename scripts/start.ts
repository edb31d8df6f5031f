import { existsSync, mkdirSync, readFileSync } from 'node:fs'
import { join, resolve } from 'node:path'
import { z } from 'zod'
import { ConfigError, loadConfig } from '#server/config.ts'
import { startServer } from '#server/main.ts'
import { buildClientIfStale } from './client-build.ts'
import { isPortFree } from './free-port.ts'
import { takeInstanceLock } from './instance-lock.ts'
import { localEnvironment } from './local-environment.ts'
import { startOwnDatabase } from './mariadb/own-database.ts'
import { SetUpError } from './set-up-error.ts'

const DEFAULT_PORT = 4310
const DemoSignIns = z.array(z.object({ role: z.string(), email: z.string(), password: z.string() }))

function printDemoSignIns(folder: string): void {
  const file = join(folder, 'demo-sign-ins.json')
  if (!existsSync(file)) return
  const signIns = DemoSignIns.parse(JSON.parse(readFileSync(file, 'utf8')))
  console.log('\nDemo sign-ins (also in var/demo-sign-ins.json):')
  for (const { role, email, password } of signIns) console.log(`  ${role.padEnd(14)} ${email.padEnd(38)} ${password}`)
}

async function requireFreePort(port: number): Promise<void> {
  if (await isPortFree(port)) return
  throw new SetUpError(`Port ${port} is taken by another program: start with another one, for example \`PORT=${port + 1} npm start\`.`)
}

async function start(): Promise<void> {
  const folder = resolve(process.env['DATA_DIRECTORY'] ?? 'var')
  const port = Number(process.env['PORT'] ?? DEFAULT_PORT)
  mkdirSync(folder, { recursive: true })
  const lock = takeInstanceLock(folder, `http://127.0.0.1:${port}`)
  process.on('exit', () => lock.release())
  await requireFreePort(port)
  const database = await startOwnDatabase({ folder, flushAtCommit: 1 })
  try {
    await buildClientIfStale()
    const server = await startServer(loadConfig({ ...localEnvironment(folder), ...process.env, ...database.env }))
    console.log(`\nScruple serves at ${server.address}`)
    printDemoSignIns(folder)
    console.log('\nCtrl-C stops it.')
    await new Promise<void>((done) => {
      for (const signal of ['SIGINT', 'SIGTERM'] as const) process.once(signal, () => done())
    })
    await server.close()
  } finally {
    await database.stop()
  }
}

try {
  await start()
  process.exit(0)
} catch (error) {
  if (!(error instanceof SetUpError) && !(error instanceof ConfigError)) throw error
  console.error(error.message)
  process.exit(1)
}
