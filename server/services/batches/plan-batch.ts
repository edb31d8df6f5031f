import type { BatchAnswer, PlanBatch } from '#shared/schemas/batches.ts'
import { inTransaction } from '../../database/in-transaction.ts'
import { ConflictError, InvalidFieldError } from '../../errors.ts'
import { requirePermission, type Actor } from '../../http/actor.ts'
import { Batch } from '../../models/batch.ts'
import { ControlPlan } from '../../models/control-plan.ts'
import { Machine } from '../../models/machine.ts'
import { Product } from '../../models/product.ts'
import { ShellLot } from '../../models/shell-lot.ts'
import { ToolingSet } from '../../models/tooling-set.ts'
import { appendAudit, chainOf } from '../audit.ts'
import { presentBatch } from './present-batch.ts'

/** What the batch is made with; each must belong to the site, be in use and fit the others. */
async function findParts({
  siteId,
  machineId,
  productId,
  toolingSetId,
  shellLotId,
}: PlanBatch): Promise<{ machine: Machine; product: Product; toolingSet: ToolingSet; shellLot: ShellLot }> {
  const ofSite = (id: string): { where: { id: string; siteId: string; isActive: true } } => ({ where: { id, siteId, isActive: true } })
  const machine = await Machine.findOne(ofSite(machineId))
  if (!machine) throw new InvalidFieldError('/machineId', 'There is no such machine in use at this site.')
  const product = await Product.findOne(ofSite(productId))
  if (!product) throw new InvalidFieldError('/productId', 'There is no such product in use at this site.')
  const toolingSet = await ToolingSet.findOne(ofSite(toolingSetId))
  if (!toolingSet) throw new InvalidFieldError('/toolingSetId', 'There is no such tooling set in use at this site.')
  const shellLot = await ShellLot.findOne(ofSite(shellLotId))
  if (!shellLot) throw new InvalidFieldError('/shellLotId', 'There is no such shell lot in use at this site.')
  return { machine, product, toolingSet, shellLot }
}

function requireFit({ machine, product, toolingSet, shellLot }: Awaited<ReturnType<typeof findParts>>): void {
  if (toolingSet.capsuleSize !== product.capsuleSize) {
    throw new InvalidFieldError(
      '/toolingSetId',
      `Tooling set ${toolingSet.code} is for size ${toolingSet.capsuleSize}; product ${product.code} is size ${product.capsuleSize}.`,
    )
  }
  if (shellLot.capsuleSize !== product.capsuleSize) {
    throw new InvalidFieldError(
      '/shellLotId',
      `Shell lot ${shellLot.code} is size ${shellLot.capsuleSize}; product ${product.code} is size ${product.capsuleSize}.`,
    )
  }
  if (toolingSet.boresPerGroup !== machine.boresPerGroup) {
    throw new InvalidFieldError(
      '/toolingSetId',
      `Tooling set ${toolingSet.code} has ${toolingSet.boresPerGroup} bores a group; machine ${machine.code} has ${machine.boresPerGroup}.`,
    )
  }
}

/** Plans a batch under the approved control plan of its product; without one no batch starts (requirement B1). */
export async function planBatch(actor: Actor, request: PlanBatch): Promise<BatchAnswer> {
  requirePermission(actor, 'batch:plan', { siteId: request.siteId, kind: 'site', id: request.siteId })
  return inTransaction(async () => {
    const parts = await findParts(request)
    requireFit(parts)
    const plan = await ControlPlan.findOne({ where: { productId: parts.product.id, state: 'approved' } })
    if (!plan) throw new ConflictError('no-approved-plan', `Product ${parts.product.code} has no approved control plan; a batch needs one.`)
    const batch = await Batch.create({
      ...request,
      controlPlanId: plan.id,
      indexesPerMinute: request.indexesPerMinute ?? parts.machine.indexesPerMinute,
    })
    await appendAudit({
      actor,
      chain: chainOf.batch(batch.id),
      action: 'batch:plan',
      record: { kind: 'batch', id: batch.id },
      new: { ...request, controlPlanId: plan.id },
    })
    return presentBatch(batch)
  })
}
