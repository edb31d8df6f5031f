import { spawn, type ChildProcess } from 'node:child_process'
import { mkdirSync } from 'node:fs'
import { resolve } from 'node:path'
import { takeInstanceLock } from './instance-lock.ts'
import { localEnvironment } from './local-environment.ts'
import { startOwnDatabase } from './mariadb/own-database.ts'
import { SetUpError } from './set-up-error.ts'

const API_PORT = '4311'

function run(label: string, args: readonly string[], env: Record<string, string>): ChildProcess {
  const child = spawn(process.execPath, [...args], { env: { ...process.env, ...env }, stdio: ['ignore', 'pipe', 'pipe'] })
  const print = (bytes: Buffer): void => {
    for (const line of bytes.toString().trimEnd().split('\n')) console.log(`${label} ${line}`)
  }
  child.stdout.on('data', print)
  child.stderr.on('data', print)
  return child
}

/** The server restarts and the page updates as files are saved; the data is that of `npm start`. */
async function develop(): Promise<void> {
  const folder = resolve(process.env['DATA_DIRECTORY'] ?? 'var')
  mkdirSync(folder, { recursive: true })
  const lock = takeInstanceLock(folder, 'http://127.0.0.1:5173')
  const database = await startOwnDatabase({ folder, flushAtCommit: 1 })
  const env = { ...localEnvironment(folder), ...database.env, PORT: API_PORT, API_ORIGIN: `http://127.0.0.1:${API_PORT}` }
  const children = [
    run('api   ', ['node_modules/tsx/dist/cli.mjs', 'watch', '--clear-screen=false', 'server/main.ts'], env),
    run('client', ['node_modules/vite/bin/vite.js', '--host', '127.0.0.1'], env),
  ]
  await new Promise<void>((done) => {
    for (const signal of ['SIGINT', 'SIGTERM'] as const) process.once(signal, () => done())
  })
  for (const child of children) child.kill('SIGTERM')
  await database.stop()
  lock.release()
}

try {
  await develop()
  process.exit(0)
} catch (error) {
  if (!(error instanceof SetUpError)) throw error
  console.error(error.message)
  process.exit(1)
}
