import type { CreateProduct, ProductAnswer, UpdateProduct } from '#shared/schemas/products.ts'
import type { SiteQuery } from '#shared/schemas/master-fields.ts'
import { limitsBeyondSpecification } from '#shared/trade/plan-limits.ts'
import { inTransaction } from '../../database/in-transaction.ts'
import { ConflictError } from '../../errors.ts'
import { requirePermission, type Actor } from '../../http/actor.ts'
import { ControlPlan } from '../../models/control-plan.ts'
import { Product } from '../../models/product.ts'
import { requireVersion } from '../require-version.ts'
import { changedFields, findMaster, noteMaster, readableSites, requireFreeCode, requireUnused } from './master-record.ts'
import { usedInBatches } from './used-in-batches.ts'

/** What every batch of the product was filled to and judged by. */
const JUDGED_BY = [
  'capsuleSize',
  'targetFillMg',
  'lowerSpecificationMg',
  'upperSpecificationMg',
  'labelClaims',
  'acceptanceStandards',
] as const

function presentProduct(product: Product, known: { hasBatches: boolean; approvedPlanVersion: number | null }): ProductAnswer {
  const { id, siteId, code, name, capsuleSize, targetFillMg, lowerSpecificationMg, upperSpecificationMg } = product
  const { labelClaims, acceptanceStandards, isActive, version } = product
  const figures = { capsuleSize, targetFillMg, lowerSpecificationMg, upperSpecificationMg, labelClaims, acceptanceStandards }
  return { id, siteId, code, name, ...figures, isActive, ...known, version }
}

async function presentProducts(products: readonly Product[]): Promise<ProductAnswer[]> {
  const ids = products.map(({ id }) => id)
  const used = await usedInBatches('productId', ids)
  const plans = await ControlPlan.findAll({ where: { productId: ids, state: 'approved' }, attributes: ['productId', 'planVersion'] })
  const approved = new Map(plans.map(({ productId, planVersion }) => [productId, planVersion]))
  return products.map((product) =>
    presentProduct(product, { hasBatches: used.has(product.id), approvedPlanVersion: approved.get(product.id) ?? null }),
  )
}

async function presentOne(product: Product): Promise<ProductAnswer> {
  const [answer] = await presentProducts([product])
  if (!answer) throw new Error(`Product ${product.id} was not presented.`)
  return answer
}

/** The products of one site or of all where the actor may read, by code. */
export async function listProducts(actor: Actor, { siteId }: SiteQuery): Promise<ProductAnswer[]> {
  return presentProducts(await Product.findAll({ where: { siteId: readableSites(actor, siteId) }, order: [['code', 'ASC']] }))
}

/** A new product; no batch of it can be planned before a control plan is approved. */
export async function createProduct(actor: Actor, fields: CreateProduct): Promise<ProductAnswer> {
  const { siteId, code } = fields
  requirePermission(actor, 'product:write', { siteId, kind: 'site', id: siteId })
  return inTransaction(async () => {
    requireFreeCode('product', await Product.findOne({ where: { siteId, code } }), { code })
    const product = await Product.create(fields)
    await noteMaster(actor, { siteId, action: 'product:create', record: { kind: 'product', id: product.id }, new: fields })
    return presentProduct(product, { hasBatches: false, approvedPlanVersion: null })
  })
}

/** A tighter specification must not leave a plan standing that is wider than it (requirement B2). */
async function requirePlansWithin(productId: string, fields: Parameters<typeof limitsBeyondSpecification>[0]): Promise<void> {
  const plans = await ControlPlan.findAll({ where: { productId, state: ['proposed', 'approved'] } })
  const wider = plans.find((plan) => limitsBeyondSpecification(fields, plan).length > 0)
  if (!wider) return
  throw new ConflictError(
    'plan-beyond-specification',
    `The limits of control plan version ${wider.planVersion} (${wider.state}) would be wider than this specification. Withdraw it first.`,
    { controlPlanId: wider.id },
  )
}

/** Changes a product; what batches were filled to and judged by only as long as there is none. */
export async function updateProduct(actor: Actor, id: string, { version, reason, ...fields }: UpdateProduct): Promise<ProductAnswer> {
  return inTransaction(async () => {
    const product = await findMaster(Product, actor, { permission: 'product:write', kind: 'product', id, isLocked: true })
    requireVersion('product', product, version)
    const { siteId } = product
    requireFreeCode('product', await Product.findOne({ where: { siteId, code: fields.code } }), { code: fields.code, ownId: id })
    const old = await presentOne(product)
    requireUnused(`product ${product.code}`, old.hasBatches, changedFields(old, fields, JUDGED_BY))
    await requirePlansWithin(id, fields)
    await product.update({ ...fields, version: version + 1 })
    const now = await presentOne(product)
    await noteMaster(actor, { siteId, action: 'product:update', record: { kind: 'product', id }, old, new: now, reason })
    return now
  })
}
