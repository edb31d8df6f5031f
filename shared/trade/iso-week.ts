const DAY_MS = 86_400_000

/** The Monday on which a week by ISO 8601 begins, 00:00 UTC; week 1 holds 4 January. */
export function weekStart(week: string): Date {
  const [year = '', number = ''] = week.split('-W')
  const fourth = new Date(Date.UTC(Number(year), 0, 4))
  const monday = fourth.getTime() - ((fourth.getUTCDay() + 6) % 7) * DAY_MS
  return new Date(monday + (Number(number) - 1) * 7 * DAY_MS)
}

/** The week by ISO 8601 that a moment lies in. */
export function weekOf(moment: Date): string {
  const day = new Date(Date.UTC(moment.getUTCFullYear(), moment.getUTCMonth(), moment.getUTCDate()))
  const thursday = new Date(day.getTime() + (3 - ((day.getUTCDay() + 6) % 7)) * DAY_MS)
  const year = thursday.getUTCFullYear()
  const number = 1 + Math.round((thursday.getTime() - weekStart(`${year}-W01`).getTime()) / DAY_MS / 7 - 3 / 7)
  return `${year}-W${String(number).padStart(2, '0')}`
}

/** The week so many weeks later (or earlier). */
export function weekAfter(week: string, weeks: number): string {
  return weekOf(new Date(weekStart(week).getTime() + weeks * 7 * DAY_MS))
}
