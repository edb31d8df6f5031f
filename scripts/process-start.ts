import { existsSync, readFileSync } from 'node:fs'

/** Places of the fields in /proc/PID/stat after the program's name, which may hold anything: state, time of the start. */
const STATE = 0
const STARTED_AT = 19

/**
 * When a process began, in the kernel's own count; undefined when it has ended. A later process may get the same
 * number, never the same beginning.
 */
export function processStart(pid: number): string | undefined {
  const file = `/proc/${pid}/stat`
  if (!Number.isInteger(pid) || pid <= 0 || !existsSync(file)) return undefined
  const fields = readFileSync(file, 'utf8').split(') ').pop()?.split(' ')
  // A zombie has ended; only its parent has not asked yet.
  return fields?.[STATE] === 'Z' ? undefined : fields?.[STARTED_AT]
}
