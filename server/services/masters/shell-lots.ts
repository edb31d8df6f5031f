import type { CreateShellLot, ShellLotAnswer, ShellLotDetail, UpdateShellLot } from '#shared/schemas/shell-lots.ts'
import type { SiteQuery } from '#shared/schemas/master-fields.ts'
import { summarise } from '#shared/statistics/summary.ts'
import { inTransaction } from '../../database/in-transaction.ts'
import { requirePermission, type Actor } from '../../http/actor.ts'
import { ShellLot } from '../../models/shell-lot.ts'
import { ShellWeight } from '../../models/shell-weight.ts'
import { requireVersion } from '../require-version.ts'
import { changedFields, findMaster, noteMaster, readableSites, requireFreeCode, requireUnused } from './master-record.ts'
import { tareGuards } from './tare-guards.ts'
import { usedInBatches } from './used-in-batches.ts'

/** A shell lot as clients see it; the standard error is SD ÷ √n of the tare in force. */
export function presentShellLot(lot: ShellLot, hasBatches: boolean): ShellLotAnswer {
  const { id, siteId, code, capsuleSize, material, tareVersion, tareN, tareMeanMg, tareSdMg, isActive, version } = lot
  const tareStandardErrorMg = tareSdMg === null ? null : tareSdMg / Math.sqrt(tareN)
  const tare = { tareVersion, tareN, tareMeanMg, tareSdMg, tareStandardErrorMg, tareWeighedAt: lot.tareWeighedAt?.toISOString() ?? null }
  return { id, siteId, code, capsuleSize, material, ...tare, isActive, hasBatches, version }
}

/** The shell lots of one site or of all where the actor may read, by code. */
export async function listShellLots(actor: Actor, { siteId }: SiteQuery): Promise<ShellLotAnswer[]> {
  const lots = await ShellLot.findAll({ where: { siteId: readableSites(actor, siteId) }, order: [['code', 'ASC']] })
  const used = await usedInBatches(
    'shellLotId',
    lots.map(({ id }) => id),
  )
  return lots.map((lot) => presentShellLot(lot, used.has(lot.id)))
}

async function taresOf(shellLotId: string): Promise<ShellLotDetail['tares']> {
  const rows = await ShellWeight.findAll({
    where: { shellLotId },
    order: [
      ['tareVersion', 'DESC'],
      ['ordinal', 'ASC'],
    ],
  })
  const versions = [...new Set(rows.map(({ tareVersion }) => tareVersion))]
  return versions.map((tareVersion) => {
    const weightsMg = rows.filter((row) => row.tareVersion === tareVersion).map(({ weightMg }) => weightMg)
    const { n, mean, sd } = summarise(weightsMg)
    return { tareVersion, n, meanMg: mean, sdMg: sd, standardErrorMg: sd / Math.sqrt(n), weightsMg }
  })
}

/** A shell lot with all its tares and what the tare in force is good for. */
export async function readShellLot(actor: Actor, id: string): Promise<ShellLotDetail> {
  return detailOf(await findMaster(ShellLot, actor, { permission: 'record:read', kind: 'shell lot', id }))
}

/** The lot in full, for reading and after a new tare. */
export async function detailOf(lot: ShellLot): Promise<ShellLotDetail> {
  const used = await usedInBatches('shellLotId', [lot.id])
  return { ...presentShellLot(lot, used.has(lot.id)), tares: await taresOf(lot.id), guards: await tareGuards(lot) }
}

/** A new shell lot; it gets its tare when shells were weighed. */
export async function createShellLot(actor: Actor, fields: CreateShellLot): Promise<ShellLotAnswer> {
  const { siteId, code } = fields
  requirePermission(actor, 'shell-lot:write', { siteId, kind: 'site', id: siteId })
  return inTransaction(async () => {
    requireFreeCode('shell lot', await ShellLot.findOne({ where: { siteId, code } }), { code })
    const lot = await ShellLot.create(fields)
    await noteMaster(actor, { siteId, action: 'shell-lot:create', record: { kind: 'shell-lot', id: lot.id }, new: fields })
    return presentShellLot(lot, false)
  })
}

/** Changes a shell lot; its size only as long as no batch was planned with it. */
export async function updateShellLot(actor: Actor, id: string, { version, reason, ...fields }: UpdateShellLot): Promise<ShellLotAnswer> {
  return inTransaction(async () => {
    const lot = await findMaster(ShellLot, actor, { permission: 'shell-lot:write', kind: 'shell lot', id, isLocked: true })
    requireVersion('shell lot', lot, version)
    const { siteId } = lot
    requireFreeCode('shell lot', await ShellLot.findOne({ where: { siteId, code: fields.code } }), { code: fields.code, ownId: id })
    const hasBatches = (await usedInBatches('shellLotId', [id])).has(id)
    const old = presentShellLot(lot, hasBatches)
    requireUnused(`shell lot ${lot.code}`, hasBatches, changedFields(old, fields, ['capsuleSize']))
    await lot.update({ ...fields, version: version + 1 })
    const now = presentShellLot(lot, hasBatches)
    await noteMaster(actor, { siteId, action: 'shell-lot:update', record: { kind: 'shell-lot', id }, old, new: now, reason })
    return now
  })
}
