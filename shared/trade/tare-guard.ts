import { requireFinite, requirePositive } from '../statistics/errors.ts'

/** Below this ratio of shell SD to fill SD one mean tare inflates the fill SD by less than 5 %. */
const MEAN_TARE_BELOW = 0.3
/** Above this ratio it inflates by more than 25 %, and single values are no longer about the fill. */
const INDIVIDUAL_TARE_ABOVE = 0.75

export type TareAdvice = 'mean-tare' | 'show-both' | 'individual-tare'

export interface TareGuard {
  /** SD of the shells over SD of the fill. */
  ratio: number
  /** How much larger the SD of net weights looks than the fill's own, percent. */
  inflationPercent: number
  advice: TareAdvice
}

/**
 * Whether one mean tare will do. Variances add, so with a mean tare the SD of net weights is √(SD_fill² + SD_shell²),
 * larger than the fill's own by the factor √(1 + r²), r = SD_shell/SD_fill.
 * Advice  r < 0.3 mean tare; up to 0.75 show both; above, or where the fill is lighter than its shell, weigh each shell.
 * @param fillSdMg above zero; the other figures in mg too
 * @throws {StatisticsError} `not-positive`, `not-finite`
 * @see derived from the addition of variances; thresholds are our own and common practice, no standard's
 */
export function tareGuard(weights: { shellSdMg: number; shellMeanMg: number; fillSdMg: number; fillMg: number }): TareGuard {
  const { shellSdMg, shellMeanMg, fillSdMg, fillMg } = weights
  requireFinite('shellSdMg', shellSdMg)
  requirePositive('fillSdMg', fillSdMg)
  const ratio = shellSdMg / fillSdMg
  const inflationPercent = 100 * (Math.sqrt(1 + ratio ** 2) - 1)
  if (ratio > INDIVIDUAL_TARE_ABOVE || fillMg < shellMeanMg) return { ratio, inflationPercent, advice: 'individual-tare' }
  return { ratio, inflationPercent, advice: ratio < MEAN_TARE_BELOW ? 'mean-tare' : 'show-both' }
}
