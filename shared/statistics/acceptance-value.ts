/**
 * The numbers of the harmonised uniformity test, shared by the standard that judges and by the probability that it will.
 * @see USP <905> = Ph. Eur. 2.9.40 = JP 6.02, table 2, as in USP 38–NF 33 (second supplement 2015)
 */
export const UNIFORMITY_RULE = {
  /** L1: the highest acceptance value that passes, at both stages. */
  limit: 15,
  /** L2, percent of M: how far a single one of 30 units may lie from M. */
  unitLimitPercent: 25,
  /** The window of the mean that costs nothing, percent of claim; the upper end is the target where that is higher. */
  lowestReference: 98.5,
  highestReference: 101.5,
  /** Acceptability constant and number of units of the two stages. */
  stages: [
    { stage: 1, n: 10, k: 2.4 },
    { stage: 2, n: 30, k: 2 },
  ],
} as const

/** The upper end of the window in which a mean content costs nothing, percent of claim: 101.5, or T where T is higher. */
export function highestReference(target: number): number {
  return Math.max(UNIFORMITY_RULE.highestReference, target)
}

/**
 * M, the reference value: the mean content, kept inside 98.5 and 101.5 (or the target, where that is above 101.5).
 * @param mean mean content, percent of claim
 * @param target T, the mean of the potency limits, percent of claim; 100 unless the monograph says otherwise
 * @returns percent of claim
 * @see USP <905>, table 2
 */
export function referenceValue(mean: number, target: number): number {
  return Math.min(Math.max(mean, UNIFORMITY_RULE.lowestReference), highestReference(target))
}

/**
 * AV = |M − X̄| + k·s, before rounding.
 * @param sample mean and SD (divisor n − 1) in percent of claim, and the constant k of its stage
 * @param target T in percent of claim
 * @returns percent of claim
 * @see USP <905>, table 2
 */
export function acceptanceValue({ mean, sd, k }: { mean: number; sd: number; k: number }, target: number): number {
  return Math.abs(referenceValue(mean, target) - mean) + k * sd
}

/**
 * Rounds to one decimal, a five upwards: the form in which the acceptance value is compared with 15.0.
 * Twelve significant digits are kept first, so that 15.05 counts as the five that a person sees and not as the
 * 15.0499… that a binary number holds.
 * @see USP General Notices 7.10 and 7.20
 */
export function roundAcceptanceValue(value: number): number {
  return Math.floor(Number((value * 10).toPrecision(12)) + 0.5) / 10
}
