import { spawn, type ChildProcess } from 'node:child_process'
import { once } from 'node:events'
import { createInterface } from 'node:readline'
import { loadConfig } from '#server/config.ts'
import { openDataFolder } from './data-folder.ts'
import { freePort, requireFreePort } from './free-port.ts'
import { takeInstanceLock } from './instance-lock.ts'
import { localEnvironment } from './local-environment.ts'
import { accountsIn, databaseEnvironment } from './mariadb/accounts.ts'
import { startOwnDatabase } from './mariadb/own-database.ts'
import { askedToStop, runCommand } from './run-command.ts'

const TSX = 'node_modules/tsx/dist/cli.mjs'
const VITE = 'node_modules/vite/bin/vite.js'

/** Starts a program whose every line says which side it comes from. */
function run(label: string, args: readonly string[], env: Record<string, string | undefined>): ChildProcess {
  const child = spawn(process.execPath, [...args], { env: { ...process.env, ...env }, stdio: ['ignore', 'pipe', 'pipe'] })
  for (const stream of [child.stdout, child.stderr]) createInterface(stream).on('line', (line) => console.log(`${label} ${line}`))
  return child
}

async function stop(child: ChildProcess): Promise<void> {
  if (child.exitCode !== null || child.signalCode !== null) return
  const ended = once(child, 'exit')
  child.kill('SIGTERM')
  await ended
}

/** The server restarts and the page updates as files are saved; the data is that of `npm start`. */
async function develop(): Promise<number> {
  const folder = openDataFolder(process.env['DATA_DIRECTORY'] ?? 'var')
  const given = localEnvironment(folder)
  const { port } = loadConfig({ ...given, ...databaseEnvironment(1, accountsIn(folder)) }).http
  const lock = await takeInstanceLock(folder, `http://127.0.0.1:${port}`)
  process.on('exit', lock.release)
  await requireFreePort('127.0.0.1', port, 'npm run dev')
  const database = await startOwnDatabase({ folder, flushAtCommit: 1 })
  const apiPort = String(await freePort())
  const children = [
    run('server', [TSX, 'watch', '--clear-screen=false', 'server/main.ts'], { ...given, ...database.env, PORT: apiPort }),
    run('client', [VITE, '--host', '127.0.0.1', '--port', String(port), '--strictPort'], { API_ORIGIN: `http://127.0.0.1:${apiPort}` }),
  ]
  const isOneGone = Promise.race(children.map((child) => once(child, 'exit'))).then(() => 1)
  const exitCode = await Promise.race([askedToStop().then(() => 0), isOneGone])
  await Promise.all(children.map(stop))
  await database.stop()
  return exitCode
}

await runCommand(develop)
