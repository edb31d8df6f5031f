import { InvalidFieldError } from '../errors.ts'

/** Two clocks of one site differ by seconds; more than this ahead of the server is the future. */
const CLOCK_DIFFERENCE_MS = 5_000

/** A time that a person states, or now; the future is refused. A stated time never lies after the server's own. */
export function statedTime(pointer: string, stated: string | null | undefined, now: Date): Date {
  if (stated === undefined || stated === null) return now
  const time = new Date(stated)
  if (time.getTime() > now.getTime() + CLOCK_DIFFERENCE_MS) {
    throw new InvalidFieldError(pointer, `${stated} lies in the future; it is ${now.toISOString()} now.`)
  }
  return time < now ? time : now
}
