import { spawn, type ChildProcess } from 'node:child_process'
import { existsSync, openSync, closeSync, readFileSync, rmSync } from 'node:fs'
import { join } from 'node:path'
import { setTimeout as wait } from 'node:timers/promises'
import { createConnection } from 'mariadb'
import { processStart } from '../process-start.ts'
import { DATABASE, MIGRATE_USER } from './accounts.ts'
import { isRoot } from '../debian-packages.ts'

const READY_WITHIN_MS = 120_000
const STOP_WITHIN_MS = 30_000
const POLL_MS = 25
const GUARD = join(import.meta.dirname, 'guard.sh')

export interface ServerSettings {
  /** The program mariadbd. */
  program: string
  /** The folder with the data (`db`), the log and the pid file. */
  folder: string
  /** A folder for the socket and the first statements; gone when the server is. */
  runFolder: string
  migratePassword: string
  options: readonly string[]
}

const pidFile = (folder: string): string => join(folder, 'mariadbd.pid')
const dataOption = (folder: string): string => `--datadir=${join(folder, 'db')}`

/** The process of the server on this folder's data, if one runs. The command line tells it from whoever got an old number. */
export function serverPid(folder: string): number | undefined {
  if (!existsSync(pidFile(folder))) return undefined
  const pid = Number(readFileSync(pidFile(folder), 'utf8').trim())
  if (processStart(pid) === undefined) return undefined
  const commandLine = existsSync(`/proc/${pid}/cmdline`) ? readFileSync(`/proc/${pid}/cmdline`, 'utf8') : ''
  return commandLine.split('\0').includes(dataOption(folder)) ? pid : undefined
}

/** Asks the server to stop, waits until it has, and insists when it does not. */
export async function stopServer(folder: string): Promise<void> {
  const pid = serverPid(folder)
  if (pid !== undefined) {
    process.kill(pid, 'SIGTERM')
    await ended(pid, STOP_WITHIN_MS)
    if (processStart(pid) !== undefined) {
      process.kill(pid, 'SIGKILL')
      await ended(pid, STOP_WITHIN_MS)
    }
  }
  rmSync(pidFile(folder), { force: true })
}

async function ended(pid: number, withinMs: number): Promise<void> {
  const deadline = Date.now() + withinMs
  while (processStart(pid) !== undefined && Date.now() < deadline) await wait(POLL_MS)
}

function commandLine({ folder, runFolder, options }: ServerSettings, port: number): string[] {
  return [
    '--no-defaults',
    ...(isRoot() ? ['--user=root'] : []),
    dataOption(folder),
    `--socket=${join(runFolder, 's')}`,
    `--pid-file=${pidFile(folder)}`,
    `--init-file=${join(runFolder, 'init.sql')}`,
    '--bind-address=127.0.0.1',
    `--port=${port}`,
    '--skip-name-resolve',
    '--character-set-server=utf8mb4',
    '--collation-server=utf8mb4_unicode_ci',
    '--default-time-zone=+00:00',
    '--innodb-lock-wait-timeout=5',
    // Not in every release: there a row changed since the snapshot is no error, and the services' own guards hold.
    '--loose-innodb-snapshot-isolation=ON',
    '--max-allowed-packet=64M',
    '--max-connections=200',
    '--local-infile=0',
    ...options,
  ]
}

async function answers(port: number, password: string): Promise<boolean> {
  try {
    const connection = await createConnection({
      host: '127.0.0.1',
      port,
      user: MIGRATE_USER,
      password,
      database: DATABASE,
      connectTimeout: 1_000,
    })
    await connection.query('SELECT 1')
    await connection.end()
    return true
  } catch {
    // Not up yet; the caller asks again until the time is over, and the log has the reasons.
    return false
  }
}

/**
 * Starts the server on a port and waits until it answers; undefined when it does not. It runs in a session of its own,
 * since Ctrl-C in the terminal must not reach it before the program has let go, and under a guard that stops it when
 * this process ends in any other way.
 */
export async function launchServer(settings: ServerSettings, port: number): Promise<ChildProcess | undefined> {
  const { program, folder, runFolder, migratePassword } = settings
  const log = openSync(join(folder, 'mariadbd.log'), 'a')
  const guard = spawn('/bin/sh', [GUARD, runFolder, program, ...commandLine(settings, port)], {
    cwd: folder,
    detached: true,
    stdio: ['pipe', log, log],
  })
  closeSync(log)
  const deadline = Date.now() + READY_WITHIN_MS
  while (guard.exitCode === null && guard.signalCode === null && Date.now() < deadline) {
    if (await answers(port, migratePassword)) return guard
    await wait(POLL_MS)
  }
  await stopServer(folder)
  return undefined
}
