import type { CreateToolingSet, ToolingSetAnswer, UpdateToolingSet } from '#shared/schemas/tooling-sets.ts'
import type { SiteQuery } from '#shared/schemas/master-fields.ts'
import { inTransaction } from '../../database/in-transaction.ts'
import { requirePermission, type Actor } from '../../http/actor.ts'
import { ToolingPart } from '../../models/tooling-part.ts'
import { ToolingSet } from '../../models/tooling-set.ts'
import { requireVersion } from '../require-version.ts'
import { changedFields, findMaster, noteMaster, readableSites, requireFreeCode, requireUnused } from './master-record.ts'
import { presentPart, saveParts } from './tooling-parts.ts'
import { usedInBatches } from './used-in-batches.ts'

const FITTED = ['capsuleSize', 'boresPerGroup', 'discThicknessMm'] as const

function presentToolingSet(set: ToolingSet, parts: readonly ToolingPart[], hasBatches: boolean): ToolingSetAnswer {
  const { id, siteId, code, capsuleSize, boresPerGroup, discThicknessMm, remarks, isActive, version } = set
  return {
    ...{ id, siteId, code, capsuleSize, boresPerGroup, discThicknessMm, remarks, isActive, hasBatches, version },
    parts: parts.filter(({ removedAt }) => removedAt === null).map(presentPart),
  }
}

/** Every part that the sets ever had, those taken out too. */
function partsOf(toolingSetIds: readonly string[]): Promise<ToolingPart[]> {
  return ToolingPart.findAll({
    where: { toolingSetId: [...toolingSetIds] },
    order: [
      ['kind', 'ASC'],
      ['station', 'ASC'],
      ['serial', 'ASC'],
    ],
  })
}

/** The set with its parts as it stands now. */
export async function presentStoredSet(set: ToolingSet): Promise<ToolingSetAnswer> {
  const used = await usedInBatches('toolingSetId', [set.id])
  return presentToolingSet(set, await partsOf([set.id]), used.has(set.id))
}

/** The tooling sets of one site or of all where the actor may read, by code. */
export async function listToolingSets(actor: Actor, { siteId }: SiteQuery): Promise<ToolingSetAnswer[]> {
  const sets = await ToolingSet.findAll({ where: { siteId: readableSites(actor, siteId) }, order: [['code', 'ASC']] })
  const ids = sets.map(({ id }) => id)
  const parts = ids.length === 0 ? [] : await partsOf(ids)
  const used = await usedInBatches('toolingSetId', ids)
  return sets.map((set) =>
    presentToolingSet(
      set,
      parts.filter(({ toolingSetId }) => toolingSetId === set.id),
      used.has(set.id),
    ),
  )
}

/** A new tooling set with its parts. */
export async function createToolingSet(actor: Actor, { parts, ...fields }: CreateToolingSet): Promise<ToolingSetAnswer> {
  const { siteId, code } = fields
  requirePermission(actor, 'tooling:write', { siteId, kind: 'site', id: siteId })
  return inTransaction(async () => {
    requireFreeCode('tooling set', await ToolingSet.findOne({ where: { siteId, code } }), { code })
    const set = await ToolingSet.create(fields)
    await saveParts(set.id, [], parts)
    const now = await presentStoredSet(set)
    await noteMaster(actor, { siteId, action: 'tooling-set:create', record: { kind: 'tooling-set', id: set.id }, new: now })
    return now
  })
}

/** Changes a tooling set and its parts; parts that are left out were taken out of the set, and the audit trail keeps them. */
export async function updateToolingSet(
  actor: Actor,
  id: string,
  { version, reason, parts, ...fields }: UpdateToolingSet,
): Promise<ToolingSetAnswer> {
  return inTransaction(async () => {
    const set = await findMaster(ToolingSet, actor, { permission: 'tooling:write', kind: 'tooling set', id, isLocked: true })
    const old = await presentStoredSet(set)
    requireVersion('tooling set', { version: set.version, toJSON: () => old }, version)
    const { siteId } = set
    requireFreeCode('tooling set', await ToolingSet.findOne({ where: { siteId, code: fields.code } }), { code: fields.code, ownId: id })
    requireUnused(`tooling set ${set.code}`, old.hasBatches, changedFields(old, fields, FITTED))
    await set.update({ ...fields, version: version + 1 })
    await saveParts(id, await partsOf([id]), parts)
    const now = await presentStoredSet(set)
    await noteMaster(actor, { siteId, action: 'tooling-set:update', record: { kind: 'tooling-set', id }, old, new: now, reason })
    return now
  })
}
