import { z } from 'zod'
import { RUN_TEST_NUMBERS } from '../statistics/run-tests/index.ts'
import { CHART_KINDS, CONTROL_PLAN_STATES, WEIGHING_BASES } from '../vocabulary.ts'
import { Id, Reason, UtcTime, Version } from './field.ts'
import { figure, whole, words } from './master-fields.ts'

const percent = figure({ min: 0.001, max: 100, decimals: 3, unit: '%' })

const planFields = {
  basis: z.enum(WEIGHING_BASES),
  sampleSize: whole(1, 1_000),
  startUpSampleSize: whole(1, 1_000),
  intervalMinutes: whole(1, 1_440),
  chart: z.enum(CHART_KINDS),
  runTests: z
    .array(z.int().refine((number) => RUN_TEST_NUMBERS.includes(number), `Run tests are numbered ${RUN_TEST_NUMBERS.join(', ')}.`))
    .min(1, 'Choose at least the test for points beyond the limits.'),
  meanAlertPercent: percent,
  meanActionPercent: percent,
  individualAlertPercent: percent,
  individualActionPercent: percent,
  rsdAlertPercent: percent,
  rsdActionPercent: percent,
  reactionSteps: z.array(words(300)).min(1, 'Say what is to be done on a signal.').max(30),
  statisticalGround: z.string().trim().min(20, 'Say in a sentence why this size and interval see what they must see.').max(1_000),
}

const PAIRS = [
  ['meanAlertPercent', 'meanActionPercent', 'of the mean'],
  ['individualAlertPercent', 'individualActionPercent', 'of the individual'],
  ['rsdAlertPercent', 'rsdActionPercent', 'of the RSD'],
] as const

export const ProposeControlPlan = z
  .strictObject({ productId: Id, ...planFields })
  .superRefine((plan, context) => {
    const refuse = (path: string, message: string): void => {
      context.addIssue({ code: 'custom', path: [path], message })
    }
    for (const [alert, action, what] of PAIRS) {
      if (plan[alert] > plan[action]) refuse(alert, `The alert limit ${what} lies beyond its action limit.`)
    }
    if (plan.chart !== 'individuals' && plan.sampleSize < 2)
      refuse('sampleSize', 'A chart of means and spread needs samples of at least 2.')
    if (new Set(plan.runTests).size < plan.runTests.length) refuse('runTests', 'Name each run test once.')
  })
  .meta({
    id: 'ProposeControlPlan',
    description: 'How a product is to be sampled and judged; it counts once somebody else has approved it.',
  })
export type ProposeControlPlan = z.output<typeof ProposeControlPlan>

export const ApproveControlPlan = z
  .strictObject({ version: Version, password: z.string().min(1).max(1_000) })
  .meta({ id: 'ApproveControlPlan', description: 'Approval by signature: the version that was seen and the pass-phrase again.' })
export type ApproveControlPlan = z.output<typeof ApproveControlPlan>

export const WithdrawControlPlan = z
  .strictObject({ version: Version, reason: Reason })
  .meta({ id: 'WithdrawControlPlan', description: 'A plan is taken back, and why.' })
export type WithdrawControlPlan = z.output<typeof WithdrawControlPlan>

export const ControlPlanAnswer = z
  .object({
    id: Id,
    siteId: Id,
    productId: Id,
    productCode: z.string(),
    planVersion: z.int(),
    state: z.enum(CONTROL_PLAN_STATES),
    ...planFields,
    runTests: z.array(z.int()),
    reactionSteps: z.array(z.string()),
    statisticalGround: z.string(),
    proposedBy: z.object({ id: Id, name: z.string() }),
    proposedAt: UtcTime,
    approvedBy: z.object({ id: Id, name: z.string() }).nullable(),
    approvedAt: UtcTime.nullable(),
    version: Version,
  })
  .meta({ id: 'ControlPlan', description: 'How a product is sampled and judged.' })
export type ControlPlanAnswer = z.output<typeof ControlPlanAnswer>

export const ControlPlanQuery = z
  .strictObject({ siteId: Id.optional(), productId: Id.optional() })
  .meta({ id: 'ControlPlanQuery', description: 'Plans of one site or product; all that you may see when left out.' })
export type ControlPlanQuery = z.output<typeof ControlPlanQuery>

export const ControlPlanId = z.object({ controlPlanId: Id })
