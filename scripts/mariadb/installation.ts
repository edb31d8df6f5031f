import { findProgram, installDebianPackages } from '../debian-packages.ts'
import { SetUpError } from '../set-up-error.ts'

/** The server and what its first start needs; no service, no account, nothing on port 3306. */
const PACKAGES = ['mariadb-server-core', 'mariadb-client-core']
/** The last one is called by the installer of the data folder. */
const PROGRAMS = ['mariadbd', 'mariadb-install-db', 'my_print_defaults']

/**
 * The programs of MariaDB, installed first where they are missing.
 * @throws {SetUpError} with what to run, when they cannot be installed
 */
export function requireMariadb(): { server: string; installer: string } {
  if (PROGRAMS.some((name) => findProgram(name) === undefined)) installDebianPackages('MariaDB', PACKAGES)
  const [server, installer] = PROGRAMS.map(findProgram)
  if (server === undefined || installer === undefined) {
    throw new SetUpError(`MariaDB is missing: run \`sudo apt-get install ${PACKAGES.join(' ')}\`.`)
  }
  return { server, installer }
}
