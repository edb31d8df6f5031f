import { existsSync, mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { startOwnDatabase, type OwnDatabase } from './own-database.ts'

/** Memory, where the machine offers it as a folder: tests start faster and leave nothing behind. */
const FAST_FOLDER = '/dev/shm'

/** A database for one run of the tests; its data is gone when it stops. */
export async function startThrowAwayDatabase(): Promise<OwnDatabase> {
  const folder = mkdtempSync(join(existsSync(FAST_FOLDER) ? FAST_FOLDER : tmpdir(), 'scruple-database-'))
  const database = await startOwnDatabase({ folder, flushAtCommit: 2 })
  return {
    ...database,
    stop: async () => {
      await database.stop()
      rmSync(folder, { recursive: true, force: true })
    },
  }
}
