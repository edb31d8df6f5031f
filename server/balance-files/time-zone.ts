const DAY_MS = 86_400_000
/** No zone changes its clock inside a quarter of an hour, so the answer holds for all of it. */
const QUARTER_MS = 900_000
const MAX_REMEMBERED = 1000

/**
 * Finds the instants that a wall clock of one zone shows as a given time: one, none (the hour skipped in spring),
 * or two in order (the hour repeated in autumn). `localMs` is the wall time read as if it were UTC.
 */
export class WallClock {
  private readonly format: Intl.DateTimeFormat
  private readonly remembered = new Map<number, readonly number[]>()

  constructor(timeZone: string) {
    this.format = new Intl.DateTimeFormat('en-US', {
      timeZone,
      hourCycle: 'h23',
      year: 'numeric',
      month: 'numeric',
      day: 'numeric',
      hour: 'numeric',
      minute: 'numeric',
      second: 'numeric',
    })
  }

  instants(localMs: number): number[] {
    const quarter = Math.floor(localMs / QUARTER_MS)
    let offsets = this.remembered.get(quarter)
    if (!offsets) {
      offsets = this.offsetsFor(quarter * QUARTER_MS)
      if (this.remembered.size >= MAX_REMEMBERED) this.remembered.clear()
      this.remembered.set(quarter, offsets)
    }
    return offsets.map((offset) => localMs - offset)
  }

  private offsetsFor(localMs: number): number[] {
    const candidates = new Set([this.offsetAt(localMs - DAY_MS), this.offsetAt(localMs + DAY_MS)])
    return [...candidates].filter((offset) => this.offsetAt(localMs - offset) === offset).sort((a, b) => b - a)
  }

  private offsetAt(instantMs: number): number {
    const parts: Partial<Record<string, number>> = {}
    for (const { type, value } of this.format.formatToParts(instantMs)) parts[type] = Number(value)
    const { year = 0, month = 1, day = 1, hour = 0, minute = 0, second = 0 } = parts
    return Date.UTC(year, month - 1, day, hour, minute, second) - Math.floor(instantMs / 1000) * 1000
  }
}
