type Stamp = string | number | Date

function formatter(timeZone: string, options: Intl.DateTimeFormatOptions): Intl.DateTimeFormat {
  return new Intl.DateTimeFormat('en-GB', { timeZone, hourCycle: 'h23', ...options })
}

/** 14:30 in the site's zone. */
export function formatClock(stamp: Stamp, timeZone: string): string {
  return formatter(timeZone, { hour: '2-digit', minute: '2-digit' }).format(new Date(stamp))
}

/** 3 Mar 2026. */
export function formatDay(stamp: Stamp, timeZone: string): string {
  return formatter(timeZone, { day: 'numeric', month: 'short', year: 'numeric' }).format(new Date(stamp))
}

/** 3 Mar 14:30: enough inside a run. */
export function formatMoment(stamp: Stamp, timeZone: string): string {
  return formatter(timeZone, { day: 'numeric', month: 'short', hour: '2-digit', minute: '2-digit' })
    .format(new Date(stamp))
    .replace(',', '')
}

/** 3 Mar 2026, 14:30:07 GMT: unambiguous, for records. */
export function formatStamp(stamp: Stamp, timeZone: string): string {
  return formatter(timeZone, {
    day: 'numeric',
    month: 'short',
    year: 'numeric',
    hour: '2-digit',
    minute: '2-digit',
    second: '2-digit',
    timeZoneName: 'short',
  }).format(new Date(stamp))
}

/** How long: "25 min", "3 h 10 min", "4 days". */
export function formatDuration(minutes: number): string {
  const whole = Math.round(Math.abs(minutes))
  if (whole < 60) return `${whole} min`
  if (whole < 48 * 60) return whole % 60 === 0 ? `${Math.floor(whole / 60)} h` : `${Math.floor(whole / 60)} h ${whole % 60} min`
  return `${Math.round(whole / 1_440)} days`
}
