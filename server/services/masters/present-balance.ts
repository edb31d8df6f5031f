import type { BalanceAnswer, BalanceCheckAnswer } from '#shared/schemas/balances.ts'
import { minimumWeight } from '#shared/statistics/balance.ts'
import { Balance } from '../../models/balance.ts'
import { BalanceCheck } from '../../models/balance-check.ts'
import { Site } from '../../models/site.ts'
import { userNames } from '../user-names.ts'

/** The calendar day at a moment in a zone, as YYYY-MM-DD. */
export function dayInZone(moment: Date, timeZone: string): string {
  const parts = new Intl.DateTimeFormat('en', { timeZone, year: 'numeric', month: '2-digit', day: '2-digit' }).formatToParts(moment)
  const part = (type: Intl.DateTimeFormatPartTypes): string => parts.find((each) => each.type === type)?.value ?? ''
  return `${part('year')}-${part('month')}-${part('day')}`
}

/**
 * The smallest net weights a balance may serve: from one weighing (2000·s with s at least 0.41 of the readability, times
 * the site's safety factor), and from two weighings, whose difference carries √2·s (requirements C1 to C6, C9).
 */
export function minimumWeights(balance: Pick<Balance, 'repeatabilitySdMg' | 'readabilityMg' | 'safetyFactor'>): {
  minimumWeightMg: number
  minimumNetMg: number
} {
  const { repeatabilitySdMg: repeatability, readabilityMg: readability, safetyFactor } = balance
  const minimumWeightMg = minimumWeight({ repeatability, readability }, safetyFactor)
  return { minimumWeightMg, minimumNetMg: Math.SQRT2 * minimumWeightMg }
}

/** A check with the printed name of who made it. */
export function presentCheck(check: BalanceCheck, names: ReadonlyMap<string, string>): BalanceCheckAnswer {
  const { id, kind, referenceWeight, nominalMg, readingMg, toleranceMg, hasPassed, remarks } = check
  const figures = { referenceWeight, nominalMg, readingMg, toleranceMg, hasPassed, remarks }
  return { id, kind, checkedAt: check.checkedAt.toISOString(), checkedBy: names.get(check.checkedById) ?? 'unknown', ...figures }
}

/** Balances with their last check, their smallest weights, and whether their calibration has run out in the site's zone. */
export async function presentBalances(balances: readonly Balance[], now: Date): Promise<BalanceAnswer[]> {
  const sites = await Site.findAll({ where: { id: balances.map(({ siteId }) => siteId) } })
  const zones = new Map(sites.map(({ id, timeZone }) => [id, timeZone]))
  const answers: BalanceAnswer[] = []
  for (const balance of balances) {
    const { id, siteId, code, description, readabilityMg, repeatabilitySdMg, capacityMg, safetyFactor } = balance
    const { calibrationDueOn, state, version } = balance
    const last = await BalanceCheck.findOne({
      where: { balanceId: id },
      order: [
        ['checkedAt', 'DESC'],
        ['id', 'DESC'],
      ],
    })
    const lastCheck = last && presentCheck(last, await userNames([last.checkedById]))
    const isCalibrationOverdue = calibrationDueOn < dayInZone(now, zones.get(siteId) ?? 'UTC')
    const figures = { readabilityMg, repeatabilitySdMg, capacityMg, safetyFactor, calibrationDueOn, state }
    answers.push({ id, siteId, code, description, ...figures, isCalibrationOverdue, ...minimumWeights(balance), lastCheck, version })
  }
  return answers
}

/** One balance as clients see it. */
export async function presentBalance(balance: Balance, now: Date): Promise<BalanceAnswer> {
  const [answer] = await presentBalances([balance], now)
  if (!answer) throw new Error(`Balance ${balance.id} was not presented.`)
  return answer
}
