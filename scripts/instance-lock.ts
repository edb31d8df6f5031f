import { existsSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { z } from 'zod'
import { SetUpError } from './set-up-error.ts'

const Lock = z.object({ pid: z.int(), startTicks: z.string(), address: z.string() })

/** When a process began, in the kernel's own count: a later process may get the same number, never the same beginning. */
function startTicks(pid: number): string | undefined {
  const file = `/proc/${pid}/stat`
  if (!existsSync(file)) return undefined
  return readFileSync(file, 'utf8').split(') ').pop()?.split(' ')[19]
}

/** One Scruple on one data folder: a second start says where the first one is. What a killed start left behind is ignored. */
export function takeInstanceLock(folder: string, address: string): { release(): void } {
  const file = join(folder, 'scruple.lock')
  const held = existsSync(file) ? Lock.safeParse(JSON.parse(readFileSync(file, 'utf8') || 'null')) : undefined
  if (held?.success && startTicks(held.data.pid) === held.data.startTicks) {
    throw new SetUpError(`Scruple is running already, at ${held.data.address} (process ${held.data.pid}).`)
  }
  writeFileSync(file, JSON.stringify({ pid: process.pid, startTicks: startTicks(process.pid) ?? '', address }))
  return { release: () => rmSync(file, { force: true }) }
}
