import type { ControlPlanAnswer } from '#shared/schemas/control-plans.ts'
import { limitBand } from '#shared/trade/plan-limits.ts'
import { formatMg } from '@/format/number.ts'

/** “388.0 to 412.0 mg”: what a limit in percent means for a target. */
export function bandText(targetFillMg: number, percent: number): string {
  const { lowerMg, upperMg } = limitBand(targetFillMg, percent)
  return `${formatMg(lowerMg)} to ${formatMg(upperMg)} mg`
}

export interface LimitRow {
  what: string
  alertPercent: number
  actionPercent: number
  /** Weights, where the limit is one of weights. */
  alertMg: string
  actionMg: string
}

/** The limits of a plan, in percent and as weights of its product. */
export function limitRows(plan: ControlPlanAnswer, targetFillMg: number | undefined): LimitRow[] {
  const band = (percent: number): string => (targetFillMg === undefined ? '–' : bandText(targetFillMg, percent))
  const weights = (what: string, alertPercent: number, actionPercent: number): LimitRow => ({
    ...{ what, alertPercent, actionPercent, alertMg: band(alertPercent), actionMg: band(actionPercent) },
  })
  return [
    weights('Mean of a sample, ±', plan.meanAlertPercent, plan.meanActionPercent),
    weights('Each capsule, ±', plan.individualAlertPercent, plan.individualActionPercent),
    { what: 'RSD of a sample', alertPercent: plan.rsdAlertPercent, actionPercent: plan.rsdActionPercent, alertMg: '–', actionMg: '–' },
  ]
}
