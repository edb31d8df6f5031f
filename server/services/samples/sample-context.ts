import type { Permission } from '#shared/permissions.ts'
import { ConflictError, NotFoundError } from '../../errors.ts'
import { requirePermission, type Actor } from '../../http/actor.ts'
import { Balance } from '../../models/balance.ts'
import { Batch } from '../../models/batch.ts'
import { ControlPlan } from '../../models/control-plan.ts'
import { Machine } from '../../models/machine.ts'
import { Product } from '../../models/product.ts'
import { Sample } from '../../models/sample.ts'

/** A sample and all that its weights are judged by. */
export interface SampleContext {
  sample: Sample
  batch: Batch
  machine: Machine
  product: Product
  plan: ControlPlan
  balance: Balance | null
}

const found = { rejectOnEmpty: true } as const

/** Everything around a batch that a sample needs. */
export async function contextOf(sample: Sample, batch: Batch): Promise<SampleContext> {
  const machine = await Machine.findByPk(batch.machineId, found)
  const product = await Product.findByPk(batch.productId, found)
  const plan = await ControlPlan.findByPk(batch.controlPlanId, found)
  const balance = sample.balanceId === null ? null : await Balance.findByPk(sample.balanceId)
  return { sample, batch, machine, product, plan, balance }
}

/** The sample with its context, if the actor may do this at its site; the sample is locked while it changes. */
export async function findSample(
  actor: Actor,
  permission: Permission,
  sampleId: string,
  { isLocked = false } = {},
): Promise<SampleContext> {
  const sample = await Sample.findByPk(sampleId, isLocked ? { lock: true } : {})
  const batch = sample && (await Batch.findByPk(sample.batchId))
  if (!batch) throw new NotFoundError('sample', sampleId)
  requirePermission(actor, permission, { siteId: batch.siteId, kind: 'sample', id: sampleId })
  return contextOf(sample, batch)
}

/** Refuses work on a sample that is finished or abandoned. */
export function requireIncomplete({ state, sequence }: Sample): void {
  if (state !== 'incomplete')
    throw new ConflictError('sample-not-incomplete', `Sample ${sequence} is ${state}; it takes no more weights.`, { state })
}
