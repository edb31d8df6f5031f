import type { ControlPlanAnswer } from '#shared/schemas/control-plans.ts'
import type { ChartKind, WeighingBasis } from '#shared/vocabulary.ts'

export interface LimitDraft {
  meanAlertPercent: number | undefined
  meanActionPercent: number | undefined
  individualAlertPercent: number | undefined
  individualActionPercent: number | undefined
  rsdAlertPercent: number | undefined
  rsdActionPercent: number | undefined
}

export interface PlanDraft extends LimitDraft {
  productId: string
  basis: WeighingBasis
  sampleSize: number | undefined
  startUpSampleSize: number | undefined
  intervalMinutes: number | undefined
  chart: ChartKind
  runTests: number[]
  reactionSteps: string[]
  statisticalGround: string
}

/** The plan in force of the product to start from, else an empty one: no limit has a default of ours. */
export function planDraft(productId: string, plans: readonly ControlPlanAnswer[]): PlanDraft {
  const base = plans.find((plan) => plan.productId === productId && plan.state === 'approved')
  return {
    productId,
    basis: base?.basis ?? 'net-mean-tare',
    sampleSize: base?.sampleSize,
    startUpSampleSize: base?.startUpSampleSize,
    intervalMinutes: base?.intervalMinutes,
    chart: base?.chart ?? 'xbar-s',
    runTests: base?.runTests ?? [1],
    meanAlertPercent: base?.meanAlertPercent,
    meanActionPercent: base?.meanActionPercent,
    individualAlertPercent: base?.individualAlertPercent,
    individualActionPercent: base?.individualActionPercent,
    rsdAlertPercent: base?.rsdAlertPercent,
    rsdActionPercent: base?.rsdActionPercent,
    reactionSteps: base?.reactionSteps ?? [],
    statisticalGround: base?.statisticalGround ?? '',
  }
}

/** A step a line; empty lines are none. */
export function stepsOf(text: string): string[] {
  return text
    .split('\n')
    .map((line) => line.trim())
    .filter((line) => line !== '')
}
