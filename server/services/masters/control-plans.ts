import type { ControlPlanAnswer, ControlPlanQuery } from '#shared/schemas/control-plans.ts'
import { NotFoundError } from '../../errors.ts'
import type { Permission } from '#shared/permissions.ts'
import { requirePermission, type Actor } from '../../http/actor.ts'
import { ControlPlan } from '../../models/control-plan.ts'
import { Product } from '../../models/product.ts'
import { userNames } from '../user-names.ts'
import { findMaster, readableSites } from './master-record.ts'

function pickRules(plan: ControlPlan) {
  const { basis, sampleSize, startUpSampleSize, intervalMinutes, chart, runTests, reactionSteps, statisticalGround } = plan
  const { meanAlertPercent, meanActionPercent, individualAlertPercent, individualActionPercent, rsdAlertPercent, rsdActionPercent } = plan
  return {
    ...{ basis, sampleSize, startUpSampleSize, intervalMinutes, chart, runTests, reactionSteps, statisticalGround },
    ...{ meanAlertPercent, meanActionPercent, individualAlertPercent, individualActionPercent, rsdAlertPercent, rsdActionPercent },
  }
}

/** Plans with the names of who proposed and approved them; the list may mix products. */
export async function presentPlans(plans: readonly ControlPlan[], products: readonly Product[]): Promise<ControlPlanAnswer[]> {
  const byId = new Map(products.map((product) => [product.id, product]))
  const names = await userNames(plans.flatMap(({ proposedById, approvedById }) => [proposedById, approvedById]))
  const person = (id: string) => ({ id, name: names.get(id) ?? 'unknown' })
  return plans.flatMap((plan) => {
    const product = byId.get(plan.productId)
    if (!product) return []
    const { id, productId, planVersion, state, proposedById, approvedById, version } = plan
    return {
      ...{ id, siteId: product.siteId, productId, productCode: product.code, planVersion, state, ...pickRules(plan) },
      proposedBy: person(proposedById),
      proposedAt: plan.createdAt.toISOString(),
      approvedBy: approvedById === null ? null : person(approvedById),
      approvedAt: plan.approvedAt?.toISOString() ?? null,
      version,
    }
  })
}

/** One plan as clients see it. */
export async function presentPlan(plan: ControlPlan, product: Product): Promise<ControlPlanAnswer> {
  const [answer] = await presentPlans([plan], [product])
  if (!answer) throw new Error(`Control plan ${plan.id} was not presented.`)
  return answer
}

/** Plans that the actor may read, newest version first within a product. */
export async function listControlPlans(actor: Actor, { siteId, productId }: ControlPlanQuery): Promise<ControlPlanAnswer[]> {
  const products =
    productId === undefined
      ? await Product.findAll({ where: { siteId: readableSites(actor, siteId) } })
      : [await findMaster(Product, actor, { permission: 'record:read', kind: 'product', id: productId })]
  const plans = await ControlPlan.findAll({
    where: { productId: products.map(({ id }) => id) },
    order: [
      ['productId', 'ASC'],
      ['planVersion', 'DESC'],
    ],
  })
  return presentPlans(plans, products)
}

/** A plan and its product, locked together in that order so that two approvals at once cannot both stand. */
export async function findPlan(
  actor: Actor,
  permission: Permission,
  id: string,
  { isLocked = false } = {},
): Promise<{ plan: ControlPlan; product: Product }> {
  const found = await ControlPlan.findByPk(id, { attributes: ['productId'] })
  if (!found) throw new NotFoundError('control plan', id)
  const product = await Product.findByPk(found.productId, isLocked ? { lock: true } : {})
  if (!product) throw new NotFoundError('control plan', id)
  requirePermission(actor, permission, { siteId: product.siteId, kind: 'control plan', id })
  const plan = await ControlPlan.findByPk(id, isLocked ? { lock: true, rejectOnEmpty: true } : { rejectOnEmpty: true })
  return { plan, product }
}

/** One plan. */
export async function readControlPlan(actor: Actor, id: string): Promise<ControlPlanAnswer> {
  const { plan, product } = await findPlan(actor, 'record:read', id)
  return presentPlan(plan, product)
}
