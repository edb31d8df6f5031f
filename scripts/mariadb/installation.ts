import { spawnSync } from 'node:child_process'
import { existsSync } from 'node:fs'
import { delimiter, join } from 'node:path'
import { SetUpError } from '../set-up-error.ts'

/** The server and what its first start needs; no service, no account, nothing on port 3306. */
const PACKAGES = ['mariadb-server-core', 'mariadb-client-core']
/** An ordinary user's PATH has no sbin. */
const EXTRA_FOLDERS = ['/usr/sbin', '/usr/local/sbin', '/sbin']

/** Where a program is, looked for in the PATH and in the folders for servers. */
export function findProgram(name: string): string | undefined {
  const folders = [...(process.env['PATH'] ?? '').split(delimiter), ...EXTRA_FOLDERS]
  return folders.map((folder) => join(folder, name)).find((path) => existsSync(path))
}

export const isRoot = (): boolean => process.getuid?.() === 0

/** Installs Debian packages, as root on a machine with apt; otherwise says in one sentence what to run. */
export function installDebianPackages(what: string, packages: readonly string[]): void {
  const apt = findProgram('apt-get')
  if (!isRoot() || apt === undefined) throw new SetUpError(`${what} is missing: run \`sudo apt-get install ${packages.join(' ')}\`.`)
  process.stdout.write(`Installing ${what} (${packages.join(', ')}) …\n`)
  const env = { ...process.env, DEBIAN_FRONTEND: 'noninteractive' }
  const run = (args: readonly string[]): boolean => spawnSync(apt, [...args], { env, stdio: ['ignore', 'ignore', 'inherit'] }).status === 0
  const install = ['install', '-y', '-qq', '--no-install-recommends', ...packages]
  if (!run(install) && !(run(['update', '-qq']) && run(install))) {
    throw new SetUpError(
      `${what} could not be installed: run \`apt-get update && apt-get install ${packages.join(' ')}\` and look at what it says.`,
    )
  }
}

/** The programs of MariaDB, installed first where they are missing. */
export function requireMariadb(): { server: string; installer: string } {
  if (!findProgram('mariadbd') || !findProgram('mariadb-install-db')) installDebianPackages('MariaDB', PACKAGES)
  const server = findProgram('mariadbd')
  const installer = findProgram('mariadb-install-db')
  if (!server || !installer) throw new SetUpError(`MariaDB is missing: run \`sudo apt-get install ${PACKAGES.join(' ')}\`.`)
  return { server, installer }
}
