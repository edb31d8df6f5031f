import { requirePositive, requireValues } from './errors.ts'
import { summarise } from './summary.ts'

/** USP <41>: twice the SD may be at most this share of the smallest net weight. */
const LARGEST_SHARE = 0.001
/** USP <41>: an SD below this part of the readability is taken as this part of it. */
const SMALLEST_SD_IN_READABILITY = 0.41

/**
 * The smallest net weight that may be weighed accurately on a balance: 2·s/m ≤ 0.10 %, so m = 2000·s, with s at least
 * 0.41 of the readability; hence never below 820 readabilities.
 * @param balance SD of repeated weighings of one weight, and readability, in one unit; the result is in that unit
 * @param safetyFactor 1 or more (USP <1251> advises one; it is not binding)
 * @throws {StatisticsError} `not-finite`, `not-positive`
 * @see USP <41> Balances (text of 1 August 2019); fixtures/reference/balance.json
 */
export function minimumWeight({ repeatability, readability }: { repeatability: number; readability: number }, safetyFactor = 1): number {
  requirePositive('readability', readability)
  requirePositive('safetyFactor', safetyFactor)
  return (2 / LARGEST_SHARE) * Math.max(repeatability, SMALLEST_SD_IN_READABILITY * readability) * safetyFactor
}

/**
 * Repeatability of a balance: the SD of at least ten weighings of one weight.
 * @throws {StatisticsError} `too-few-values`, `not-finite`
 * @see USP <41> Balances
 */
export function balanceRepeatability(weighings: ArrayLike<number>): number {
  requireValues('weighings', weighings, { min: 10 })
  return summarise(weighings).sd
}

/** Whether a balance is repeatable enough for a net weight: 2·s as a percentage of it, at most 0.10 %. */
export function repeatabilityFor(
  balance: { repeatability: number; readability: number },
  smallestNet: number,
): { relativePercent: number; meets: boolean } {
  requirePositive('smallestNet', smallestNet)
  const s = Math.max(balance.repeatability, SMALLEST_SD_IN_READABILITY * balance.readability)
  const share = (2 * s) / smallestNet
  return { relativePercent: 100 * share, meets: share <= LARGEST_SHARE }
}
