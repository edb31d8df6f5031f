import { formatDifference } from '@/format/number.ts'

/** “−10.0 % of the target”: what a limit in mg means; undefined while either is missing. */
export function shareOfTarget(limitMg: number | undefined, targetMg: number | undefined): string | undefined {
  if (limitMg === undefined || targetMg === undefined || targetMg <= 0) return undefined
  return `${formatDifference(100 * (limitMg / targetMg - 1), 1)} % from the target`
}
