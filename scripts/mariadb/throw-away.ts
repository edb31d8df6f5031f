import { existsSync, mkdtempSync, statfsSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { startOwnDatabase, type OwnDatabase } from './own-database.ts'

/** Memory, where the machine offers it as a folder. In many containers it is too small for a database. */
const MEMORY = '/dev/shm'
const ROOM_BYTES = 2 ** 30

function fastFolder(): string {
  if (!existsSync(MEMORY)) return tmpdir()
  const { bavail, bsize } = statfsSync(MEMORY)
  return bavail * bsize >= ROOM_BYTES ? MEMORY : tmpdir()
}

/** A database for one run of the tests. Its data is gone when it stops, or when the run is killed. */
export function startThrowAwayDatabase(): Promise<OwnDatabase> {
  const folder = mkdtempSync(join(fastFolder(), 'scruple-test-'))
  return startOwnDatabase({ folder, runFolder: folder, flushAtCommit: 2, extra: ['--innodb-log-file-size=32M'] })
}
