import { renameSync, rmSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { setTimeout as wait } from 'node:timers/promises'
import { z } from 'zod'
import { processStart } from './process-start.ts'
import { readJson } from './json-file.ts'
import { SetUpError } from './set-up-error.ts'

const Lock = z.object({ pid: z.int(), startedAt: z.string(), address: z.string() })
/** Longer than two starts in the same moment need to see each other. */
const SETTLE_MS = 50

/**
 * One Scruple on one data folder: a second start says where the first one is. What a killed start left behind is ignored.
 * @throws {SetUpError} with the address of the one that runs
 */
export async function takeInstanceLock(folder: string, address: string): Promise<{ release: () => void }> {
  const file = join(folder, 'scruple.lock')
  const mine = { pid: process.pid, startedAt: processStart(process.pid) ?? '', address }
  refuseSecond(file, mine.pid)
  const draft = `${file}.${process.pid}`
  writeFileSync(draft, JSON.stringify(mine))
  renameSync(draft, file)
  await wait(SETTLE_MS)
  refuseSecond(file, mine.pid)
  return {
    release: () => {
      if (readJson(file, Lock)?.pid === mine.pid) rmSync(file, { force: true })
    },
  }
}

function refuseSecond(file: string, myPid: number): void {
  const held = readJson(file, Lock)
  if (held === undefined || held.pid === myPid || processStart(held.pid) !== held.startedAt) return
  throw new SetUpError(`Scruple is running already, at ${held.address} (process ${held.pid}).`)
}
