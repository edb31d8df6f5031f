import { spawnSync } from 'node:child_process'
import { existsSync } from 'node:fs'
import { delimiter, join } from 'node:path'
import { SetUpError } from './set-up-error.ts'

/** An ordinary user's PATH has no sbin. */
const FOLDERS_FOR_SERVERS = ['/usr/sbin', '/usr/local/sbin', '/sbin']

/** Where a program is, looked for in the PATH and in the folders for servers. */
export function findProgram(name: string): string | undefined {
  const folders = [...(process.env['PATH'] ?? '').split(delimiter), ...FOLDERS_FOR_SERVERS]
  return folders.map((folder) => join(folder, name)).find((path) => existsSync(path))
}

export const isRoot = (): boolean => process.getuid?.() === 0

/**
 * Installs Debian packages, as root on a machine with apt.
 * @throws {SetUpError} otherwise, with what to run in one sentence
 */
export function installDebianPackages(what: string, packages: readonly string[]): void {
  const apt = findProgram('apt-get')
  const names = packages.join(' ')
  if (!isRoot() || apt === undefined) throw new SetUpError(`${what} is missing: run \`sudo apt-get install ${names}\`.`)
  process.stdout.write(`Installing ${what} (${packages.join(', ')}) …\n`)
  const run = (...args: string[]): boolean => {
    const env = { ...process.env, DEBIAN_FRONTEND: 'noninteractive' }
    return spawnSync(apt, ['-qq', ...args], { env, stdio: ['ignore', 'ignore', 'inherit'] }).status === 0
  }
  // One list that cannot be reached makes the update fail though the others would do.
  run('update')
  if (!run('install', '-y', '--no-install-recommends', ...packages)) {
    throw new SetUpError(`${what} could not be installed: run \`apt-get update && apt-get install ${names}\` and look at what it says.`)
  }
}
