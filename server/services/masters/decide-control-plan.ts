import type { ApproveControlPlan, ControlPlanAnswer, ProposeControlPlan, WithdrawControlPlan } from '#shared/schemas/control-plans.ts'
import { limitBand, limitsBeyondSpecification, type PlanLimits } from '#shared/trade/plan-limits.ts'
import { inTransaction } from '../../database/in-transaction.ts'
import { ConflictError, InvalidFieldError } from '../../errors.ts'
import { requirePermission, sitesWith, type Actor } from '../../http/actor.ts'
import type { Client } from '../../http/client.ts'
import { ControlPlan } from '../../models/control-plan.ts'
import { Product } from '../../models/product.ts'
import { requireVersion } from '../require-version.ts'
import { signRecord } from '../signatures.ts'
import { findPlan, presentPlan } from './control-plans.ts'
import { findMaster, noteMaster } from './master-record.ts'

/** Refuses action limits that are wider than the specification (requirement B2, 21 CFR 211.110(b)). */
function requireWithinSpecification(product: Product, plan: PlanLimits): void {
  const [field] = limitsBeyondSpecification(product, plan)
  if (field === undefined) return
  const { lowerMg, upperMg } = limitBand(product.targetFillMg, plan[field])
  const limits = `${lowerMg.toFixed(1)} to ${upperMg.toFixed(1)} mg`
  const specification = `${product.lowerSpecificationMg} to ${product.upperSpecificationMg} mg`
  throw new InvalidFieldError(`/${field}`, `This limit means ${limits}, wider than the specification of ${specification}.`)
}

function requireProposed(plan: ControlPlan): void {
  if (plan.state === 'proposed') return
  throw new ConflictError(
    'plan-not-proposed',
    `Version ${plan.planVersion} of this plan is ${plan.state}; only a proposed one can be approved.`,
  )
}

const staleable = (plan: ControlPlan, answer: ControlPlanAnswer) => ({ version: plan.version, toJSON: () => answer })

/** Proposes the next version of a product's plan. It changes nothing for batches until somebody else approves it. */
export async function proposeControlPlan(actor: Actor, { productId, ...rules }: ProposeControlPlan): Promise<ControlPlanAnswer> {
  return inTransaction(async () => {
    const product = await findMaster(Product, actor, { permission: 'control-plan:propose', kind: 'product', id: productId, isLocked: true })
    requireWithinSpecification(product, rules)
    const newest = await ControlPlan.max<number | null, ControlPlan>('planVersion', { where: { productId } })
    const runTests = [...rules.runTests].sort((a, b) => a - b)
    const plan = await ControlPlan.create({
      ...{ productId, ...rules, runTests },
      ...{ planVersion: (newest ?? 0) + 1, state: 'proposed', proposedById: actor.userId },
    })
    const answer = await presentPlan(plan, product)
    const record = { kind: 'control-plan', id: plan.id }
    await noteMaster(actor, { siteId: product.siteId, action: 'control-plan:propose', record, new: answer })
    return answer
  })
}

/**
 * Approves a plan by signature. Whoever proposed it cannot approve it; the version approved before is superseded, and
 * batches that run keep the plan they began with (requirement B3).
 */
export async function approveControlPlan(
  actor: Actor,
  id: string,
  { version, password }: ApproveControlPlan,
  client: Client,
): Promise<ControlPlanAnswer> {
  return inTransaction(async () => {
    const { plan, product } = await findPlan(actor, 'control-plan:approve', id, { isLocked: true })
    const old = await presentPlan(plan, product)
    requireVersion('control plan', staleable(plan, old), version)
    requireProposed(plan)
    if (plan.proposedById === actor.userId) {
      throw new ConflictError('same-person', 'You proposed this plan; a different person approves it.')
    }
    requireWithinSpecification(product, plan)
    const { siteId } = product
    const record = { kind: 'control-plan', id }
    const signature = await signRecord(actor, { siteId, meaning: 'control plan approved', record, content: old, password, client })
    await supersede(actor, product)
    await plan.update({ state: 'approved', approvedById: actor.userId, approvedAt: signature.signedAt, version: version + 1 })
    const now = await presentPlan(plan, product)
    await noteMaster(actor, { siteId, action: 'control-plan:approve', record, old: { state: 'proposed' }, new: { state: 'approved' } })
    return now
  })
}

async function supersede(actor: Actor, { id: productId, siteId }: Product): Promise<void> {
  const before = await ControlPlan.findAll({ where: { productId, state: 'approved' }, lock: true })
  for (const plan of before) {
    await plan.update({ state: 'superseded', version: plan.version + 1 })
    const record = { kind: 'control-plan', id: plan.id }
    await noteMaster(actor, { siteId, action: 'control-plan:supersede', record, old: { state: 'approved' }, new: { state: 'superseded' } })
  }
}

/** Takes a plan back: a proposed one by those who propose or approve, an approved one by those who approve. */
export async function withdrawControlPlan(actor: Actor, id: string, { version, reason }: WithdrawControlPlan): Promise<ControlPlanAnswer> {
  return inTransaction(async () => {
    const { plan, product } = await findPlan(actor, 'record:read', id, { isLocked: true })
    const mayPropose = plan.state === 'proposed' && sitesWith(actor, 'control-plan:propose').includes(product.siteId)
    if (!mayPropose) requirePermission(actor, 'control-plan:approve', { siteId: product.siteId, kind: 'control plan', id })
    const old = await presentPlan(plan, product)
    requireVersion('control plan', staleable(plan, old), version)
    if (plan.state !== 'proposed' && plan.state !== 'approved') {
      throw new ConflictError('plan-not-open', `Version ${plan.planVersion} of this plan is ${plan.state} already.`)
    }
    await plan.update({ state: 'withdrawn', version: version + 1 })
    const record = { kind: 'control-plan', id }
    const change = { old: { state: old.state }, new: { state: 'withdrawn' } }
    await noteMaster(actor, { siteId: product.siteId, action: 'control-plan:withdraw', record, ...change, reason })
    return presentPlan(plan, product)
  })
}
