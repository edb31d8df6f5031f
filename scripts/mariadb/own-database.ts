import { spawnSync, type ChildProcess } from 'node:child_process'
import { existsSync, mkdirSync, mkdtempSync, renameSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir, userInfo } from 'node:os'
import { join, resolve } from 'node:path'
import { setTimeout as wait } from 'node:timers/promises'
import { isRoot } from '../debian-packages.ts'
import { freePort } from '../free-port.ts'
import { SetUpError } from '../set-up-error.ts'
import { accountsIn, databaseEnvironment, initialStatements } from './accounts.ts'
import { launchServer, serverPid, stopServer, type ServerSettings } from './guarded-server.ts'
import { requireMariadb } from './installation.ts'

const START_TRIES = 3
const RESTART_TRIES = 5
const STOP_WITHIN_MS = 30_000
/** A socket path of 108 characters or more aborts the start; this leaves room for the file's own name. */
const LONGEST_RUN_FOLDER = 80

export interface OwnDatabaseOptions {
  /** The folder that holds the data, the accounts and the log. */
  folder: string
  /** 1: a commit is on disk when it is answered. 2: only for tests. */
  flushAtCommit: 1 | 2
  /** Where the socket lies; it is removed with the server. A new folder below the system's temporary one, unless given. */
  runFolder?: string
  /** Further options of the server; they win over ours. */
  extra?: readonly string[]
}

export interface OwnDatabase {
  /** What `server/config.ts` reads. */
  env: Record<string, string>
  /** The process of the server at this moment; another one after a restart. */
  pid: () => number | undefined
  stop: () => Promise<void>
}

/** The data folder is made beside its place and renamed, so that a killed first start leaves no half database. */
function createData(folder: string, installer: string): void {
  if (existsSync(join(folder, 'db'))) return
  rmSync(join(folder, 'db.new'), { recursive: true, force: true })
  // With any other method the installer makes accounts that anybody on the machine can use without a password.
  const account = ['--auth-root-authentication-method=socket', `--auth-root-socket-user=${userInfo().username}`, '--skip-test-db']
  const asRoot = isRoot() ? ['--user=root'] : []
  const { status, stdout, stderr } = spawnSync(installer, ['--no-defaults', ...asRoot, '--datadir=./db.new', ...account], {
    cwd: folder,
    encoding: 'utf8',
  })
  if (status !== 0) {
    writeFileSync(join(folder, 'mariadb-install-db.log'), stdout + stderr)
    throw new SetUpError(`MariaDB could not make its data folder; its reasons are in ${join(folder, 'mariadb-install-db.log')}.`)
  }
  renameSync(join(folder, 'db.new'), join(folder, 'db'))
}

function newRunFolder(): string {
  const parent = tmpdir().length > LONGEST_RUN_FOLDER ? '/tmp' : tmpdir()
  return mkdtempSync(join(parent, 'scruple-'))
}

/**
 * A MariaDB of our own on the loopback interface, with its data under the folder; no other one on the machine is touched.
 * It is started again, on the same port, when it ends without having been asked to.
 * @throws {SetUpError} when MariaDB is missing and cannot be installed, or does not start
 */
export async function startOwnDatabase(options: OwnDatabaseOptions): Promise<OwnDatabase> {
  const { server, installer } = requireMariadb()
  const folder = resolve(options.folder)
  mkdirSync(folder, { recursive: true })
  await stopServer(folder)
  createData(folder, installer)
  const accounts = accountsIn(folder)
  const runFolder = options.runFolder ?? newRunFolder()
  const prepare = (): void => {
    mkdirSync(runFolder, { recursive: true })
    writeFileSync(join(runFolder, 'init.sql'), initialStatements(accounts), { mode: 0o600 })
  }
  const flush = `--innodb-flush-log-at-trx-commit=${options.flushAtCommit}`
  const { migratePassword } = accounts
  const settings: ServerSettings = {
    program: server,
    folder,
    runFolder,
    migratePassword,
    options: [flush, '--innodb-log-file-size=64M', '--innodb-buffer-pool-size=256M', ...(options.extra ?? [])],
  }
  const { port, stop } = await keepUp(settings, prepare)
  return { env: databaseEnvironment(port, accounts), pid: () => serverPid(folder), stop }
}

async function launchAnywhere(settings: ServerSettings): Promise<{ guard: ChildProcess; port: number }> {
  for (let attempt = 1; attempt <= START_TRIES; attempt++) {
    // Somebody else may take the port between our look and the server's.
    const port = await freePort()
    const guard = await launchServer(settings, port)
    if (guard) return { guard, port }
  }
  throw new SetUpError(`MariaDB did not start; its reasons are in ${join(settings.folder, 'mariadbd.log')}.`)
}

async function launchAgain(settings: ServerSettings, port: number): Promise<ChildProcess> {
  for (let attempt = 1; attempt <= RESTART_TRIES; attempt++) {
    await stopServer(settings.folder)
    const guard = await launchServer(settings, port)
    if (guard) return guard
  }
  throw new Error(`MariaDB ended and could not be started again; its reasons are in ${join(settings.folder, 'mariadbd.log')}.`)
}

async function keepUp(settings: ServerSettings, prepare: () => void): Promise<{ port: number; stop: () => Promise<void> }> {
  prepare()
  const first = await launchAnywhere(settings)
  const { port } = first
  let isStopping = false
  let running = Promise.resolve(first.guard)
  const watch = (guard: ChildProcess): ChildProcess => {
    // The server must not keep this process alive; the guard ends with it.
    guard.unref()
    guard.once('exit', () => {
      if (isStopping) return
      prepare()
      running = launchAgain(settings, port).then(watch)
    })
    return guard
  }
  watch(first.guard)
  return {
    port,
    stop: async () => {
      isStopping = true
      await letGo(await running, settings)
    },
  }
}

async function letGo(guard: ChildProcess, { folder, runFolder }: ServerSettings): Promise<void> {
  const gone = new Promise((resolve) => guard.once('exit', resolve))
  if (guard.exitCode === null && guard.signalCode === null) {
    guard.ref()
    guard.stdin?.end()
    await Promise.race([gone, wait(STOP_WITHIN_MS, undefined, { ref: false })])
  }
  await stopServer(folder)
  rmSync(runFolder, { recursive: true, force: true })
}
