import { spawn, spawnSync, type ChildProcess } from 'node:child_process'
import { randomBytes } from 'node:crypto'
import { existsSync, mkdirSync, mkdtempSync, openSync, readFileSync, renameSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir, userInfo } from 'node:os'
import { join, resolve } from 'node:path'
import { createConnection } from 'mariadb'
import { z } from 'zod'
import { freePort } from '../free-port.ts'
import { SetUpError } from '../set-up-error.ts'
import { isRoot, requireMariadb } from './installation.ts'

const START_TRIES = 3
const READY_WITHIN_MS = 60_000
const STOP_WITHIN_MS = 20_000

const Accounts = z.object({ runPassword: z.string(), migratePassword: z.string() })
type Accounts = z.output<typeof Accounts>

export interface OwnDatabaseOptions {
  /** The folder that holds the data, the accounts and the log. */
  folder: string
  /** 1: a commit is on disk when it is answered. 2: only for tests. */
  flushAtCommit: 1 | 2
  /** Further options of the server. */
  extra?: readonly string[]
}

export interface OwnDatabase {
  /** What `server/config.ts` reads. */
  env: Record<string, string>
  pid: number
  stop(): Promise<void>
}

function accountsIn(folder: string): Accounts {
  const file = join(folder, 'database.json')
  if (existsSync(file)) return Accounts.parse(JSON.parse(readFileSync(file, 'utf8')))
  const accounts = { runPassword: randomBytes(24).toString('hex'), migratePassword: randomBytes(24).toString('hex') }
  writeFileSync(file, JSON.stringify(accounts), { mode: 0o600 })
  return accounts
}

/** One statement a line; read by the server at each start, so that no client program is needed. */
function initialStatements({ runPassword, migratePassword }: Accounts): string {
  return [
    `CREATE DATABASE IF NOT EXISTS scruple CHARACTER SET utf8mb4 COLLATE utf8mb4_unicode_ci;`,
    `CREATE USER IF NOT EXISTS 'scruple_migrate'@'127.0.0.1' IDENTIFIED BY '${migratePassword}';`,
    `GRANT ALL PRIVILEGES ON scruple.* TO 'scruple_migrate'@'127.0.0.1' WITH GRANT OPTION;`,
    `CREATE USER IF NOT EXISTS 'scruple_run'@'127.0.0.1' IDENTIFIED BY '${runPassword}';`,
    '',
  ].join('\n')
}

const asRoot = (): string[] => (isRoot() ? ['--user=root'] : [])

/** The data folder is made beside its place and renamed, so that a killed first start leaves no half database. */
function createData(folder: string, installer: string): void {
  if (existsSync(join(folder, 'db'))) return
  rmSync(join(folder, 'db.new'), { recursive: true, force: true })
  const account = ['--auth-root-authentication-method=socket', `--auth-root-socket-user=${userInfo().username}`, '--skip-test-db']
  const { status, stderr } = spawnSync(installer, ['--no-defaults', ...asRoot(), '--datadir=./db.new', ...account], {
    cwd: folder,
    encoding: 'utf8',
  })
  if (status !== 0)
    throw new SetUpError(`MariaDB could not make its data folder in ${folder}: ${stderr.trim().split('\n').pop() ?? 'no reason given'}`)
  renameSync(join(folder, 'db.new'), join(folder, 'db'))
}

function isAlive(pid: number): boolean {
  try {
    process.kill(pid, 0)
    return true
  } catch {
    // No such process, or one of somebody else: in neither case ours.
    return false
  }
}

/** A server of ours that outlived a killed start is stopped; it is known by its pid file and by the data folder on its command line. */
async function stopLeftOver(folder: string): Promise<void> {
  const file = join(folder, 'mariadbd.pid')
  if (!existsSync(file)) return
  const pid = Number(readFileSync(file, 'utf8').trim())
  const commandLine = existsSync(`/proc/${pid}/cmdline`) ? readFileSync(`/proc/${pid}/cmdline`, 'utf8') : ''
  if (pid > 0 && commandLine.includes(join(folder, 'db'))) await terminate(pid)
  rmSync(file, { force: true })
}

async function terminate(pid: number): Promise<void> {
  if (!isAlive(pid)) return
  process.kill(pid, 'SIGTERM')
  const deadline = Date.now() + STOP_WITHIN_MS
  while (isAlive(pid)) {
    if (Date.now() > deadline) process.kill(pid, 'SIGKILL')
    await new Promise((wait) => setTimeout(wait, 25))
  }
}

function serverOptions(folder: string, socketFolder: string, port: number, { flushAtCommit, extra = [] }: OwnDatabaseOptions): string[] {
  return [
    '--no-defaults',
    ...asRoot(),
    `--datadir=${join(folder, 'db')}`,
    `--socket=${join(socketFolder, 's')}`,
    `--pid-file=${join(folder, 'mariadbd.pid')}`,
    `--init-file=${join(socketFolder, 'init.sql')}`,
    '--bind-address=127.0.0.1',
    `--port=${port}`,
    '--skip-name-resolve',
    '--character-set-server=utf8mb4',
    '--collation-server=utf8mb4_unicode_ci',
    '--default-time-zone=+00:00',
    `--innodb-flush-log-at-trx-commit=${flushAtCommit}`,
    '--innodb-lock-wait-timeout=5',
    '--innodb-log-file-size=64M',
    '--innodb-buffer-pool-size=256M',
    '--max-allowed-packet=64M',
    '--local-infile=0',
    '--max-connections=200',
    ...extra,
  ]
}

async function isReady(port: number, password: string): Promise<boolean> {
  try {
    const connection = await createConnection({
      host: '127.0.0.1',
      port,
      user: 'scruple_migrate',
      password,
      database: 'scruple',
      connectTimeout: 1_000,
    })
    await connection.query('SELECT 1')
    await connection.end()
    return true
  } catch {
    // Not up yet; the caller tries again until its time is over and then shows the log.
    return false
  }
}

/** Starts the server in a session of its own, since a signal to the terminal's group must not stop it before the program has. */
async function launch(
  server: string,
  folder: string,
  socketFolder: string,
  options: OwnDatabaseOptions,
  accounts: Accounts,
): Promise<{ child: ChildProcess; port: number } | undefined> {
  const port = await freePort()
  const log = openSync(join(folder, 'mariadbd.log'), 'a')
  const child = spawn(server, serverOptions(folder, socketFolder, port, options), {
    cwd: folder,
    detached: true,
    stdio: ['ignore', log, log],
  })
  const deadline = Date.now() + READY_WITHIN_MS
  while (child.exitCode === null && Date.now() < deadline) {
    if (await isReady(port, accounts.migratePassword)) return { child, port }
    await new Promise((wait) => setTimeout(wait, 25))
  }
  return undefined
}

/** A MariaDB of our own on the loopback interface, with its data under the folder; no other one on the machine is touched. */
export async function startOwnDatabase(options: OwnDatabaseOptions): Promise<OwnDatabase> {
  const { server, installer } = requireMariadb()
  const folder = resolve(options.folder)
  mkdirSync(folder, { recursive: true })
  await stopLeftOver(folder)
  createData(folder, installer)
  const accounts = accountsIn(folder)
  // A socket path of 108 characters or more aborts the start, so it never lies in the project.
  const socketFolder = mkdtempSync(join(tmpdir(), 'scruple-'))
  writeFileSync(join(socketFolder, 'init.sql'), initialStatements(accounts), { mode: 0o600 })
  for (let attempt = 1; attempt <= START_TRIES; attempt++) {
    const launched = await launch(server, folder, socketFolder, options, accounts)
    if (!launched) continue
    const { child, port } = launched
    const pid = child.pid ?? 0
    child.unref()
    return {
      env: environmentOf(port, accounts),
      pid,
      stop: async () => {
        await terminate(pid)
        rmSync(socketFolder, { recursive: true, force: true })
      },
    }
  }
  throw new SetUpError(`MariaDB did not start; its reasons are in ${join(folder, 'mariadbd.log')}.`)
}

function environmentOf(port: number, { runPassword, migratePassword }: Accounts): Record<string, string> {
  return {
    DATABASE_HOST: '127.0.0.1',
    DATABASE_PORT: String(port),
    DATABASE_NAME: 'scruple',
    DATABASE_RUN_USER: 'scruple_run',
    DATABASE_RUN_PASSWORD: runPassword,
    DATABASE_MIGRATE_USER: 'scruple_migrate',
    DATABASE_MIGRATE_PASSWORD: migratePassword,
  }
}
