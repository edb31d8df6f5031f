import type { BalanceFileMapping } from '#shared/schemas/balance-files.ts'
import { WallClock } from './time-zone.ts'

const SHAPE =
  /^(\d{1,4})([-/.])(\d{1,2})\2(\d{1,4})[\sT,]\s*(\d{1,2}):(\d{2})(?::(\d{2})(?:[.,](\d{1,6}))?)?\s*([AaPp])?\.?(?:[Mm]\.?)?\s*(Z|UTC|GMT|[+-]\d{2}:?\d{2})?$/
const EARLIEST_MS = Date.UTC(2000, 0, 2)
/** A balance's clock may run a little ahead of the server's; more than a minute is a wrong time. */
const AHEAD_MS = 60_000

export type TimeReading =
  { ok: true; atMs: number; isRepeatedHour: boolean } | { ok: false; code: 'bad-time' | 'future-time'; expected: string }

const EXAMPLES = { 'year-first': '2026-03-31 14:05:09', 'day-first': '31.03.2026 14:05:09', 'month-first': '03/31/2026 14:05:09' }

/** Reads the times of one file: in the order of parts and in the zone that its mapping names. */
export class TimeColumn {
  private readonly clock: WallClock
  private lastMs = -Infinity

  constructor(
    private readonly format: BalanceFileMapping['timeFormat'],
    timeZone: string,
    private readonly now: Date,
  ) {
    this.clock = new WallClock(timeZone)
  }

  read(text: string): TimeReading {
    const match = SHAPE.exec(text)
    const localMs = match ? this.wallTime(match) : undefined
    if (!match || localMs === undefined) return this.refuse(`a date and time such as ${EXAMPLES[this.format]}`)
    const zone = match[10]
    const instants = zone === undefined ? this.clock.instants(localMs) : [localMs - zoneOffsetMs(zone)]
    const [first, second] = instants
    if (first === undefined) return this.refuse('a time that exists: this one was skipped when the clocks went forward')
    const atMs = second !== undefined && first < this.lastMs ? second : first
    if (atMs < EARLIEST_MS) return this.refuse('a time after 1 January 2000: the clock of the balance was not set')
    if (atMs > this.now.getTime() + AHEAD_MS) return { ok: false, code: 'future-time', expected: `a time before ${this.now.toISOString()}` }
    this.lastMs = atMs
    return { ok: true, atMs, isRepeatedHour: second !== undefined }
  }

  private refuse(expected: string): TimeReading {
    return { ok: false, code: 'bad-time', expected }
  }

  private wallTime(match: RegExpExecArray): number | undefined {
    const [, a = '', , b = '', c = '', hours = '', minutes = '', seconds = '0', fraction = '', half] = match
    const [year, month, day] = this.format === 'year-first' ? [a, b, c] : this.format === 'day-first' ? [c, b, a] : [c, a, b]
    if (!isYear(year) || month.length > 2 || day.length > 2) return undefined
    const fullYear = year.length === 2 ? 2000 + Number(year) : Number(year)
    const hour = half === undefined ? Number(hours) : twelveHours(Number(hours), half)
    const parts = [fullYear, Number(month) - 1, Number(day), hour, Number(minutes), Number(seconds)] as const
    const wall = new Date(Date.UTC(...parts, Number(fraction.slice(0, 3).padEnd(3, '0'))))
    const isReal =
      wall.getUTCMonth() === parts[1] && wall.getUTCDate() === parts[2] && parts[3] < 24 && parts[3] >= 0 && parts[4] < 60 && parts[5] < 60
    return isReal ? wall.getTime() : undefined
  }
}

function isYear(text: string): boolean {
  return text.length === 4 || text.length === 2
}

/** Hours of a twelve-hour clock; -1 where there is no such hour. */
function twelveHours(hours: number, half: string): number {
  if (hours < 1 || hours > 12) return -1
  return (hours % 12) + (half.toLowerCase() === 'p' ? 12 : 0)
}

function zoneOffsetMs(zone: string): number {
  if (!/^[+-]/.test(zone)) return 0
  const minutes = Number(zone.slice(1, 3)) * 60 + Number(zone.slice(-2))
  return (zone.startsWith('-') ? -minutes : minutes) * 60_000
}
