import type { CreateMachine, MachineAnswer, UpdateMachine } from '#shared/schemas/machines.ts'
import type { SiteQuery } from '#shared/schemas/master-fields.ts'
import { inTransaction } from '../../database/in-transaction.ts'
import { requirePermission, type Actor } from '../../http/actor.ts'
import { Machine } from '../../models/machine.ts'
import { requireVersion } from '../require-version.ts'
import { changedFields, findMaster, noteMaster, readableSites, requireFreeCode, requireUnused } from './master-record.ts'
import { usedInBatches } from './used-in-batches.ts'

/** Positions of every recorded weight are read by these. */
const GEOMETRY = ['boresPerGroup', 'discGroups', 'segments', 'stations'] as const

function presentMachine(machine: Machine, hasBatches: boolean): MachineAnswer {
  const { id, siteId, code, name, boresPerGroup, discGroups, segments, stations } = machine
  const { indexesPerMinute, scaleMinMm, scaleMaxMm, deeperIsHigher, isActive, version } = machine
  const geometry = { boresPerGroup, discGroups, segments, stations, indexesPerMinute, scaleMinMm, scaleMaxMm, deeperIsHigher }
  return { id, siteId, code, name, ...geometry, isActive, hasBatches, version }
}

/** The machines of one site or of all where the actor may read, by code. */
export async function listMachines(actor: Actor, { siteId }: SiteQuery): Promise<MachineAnswer[]> {
  const machines = await Machine.findAll({ where: { siteId: readableSites(actor, siteId) }, order: [['code', 'ASC']] })
  const used = await usedInBatches(
    'machineId',
    machines.map(({ id }) => id),
  )
  return machines.map((machine) => presentMachine(machine, used.has(machine.id)))
}

/** A new machine at a site. */
export async function createMachine(actor: Actor, fields: CreateMachine): Promise<MachineAnswer> {
  const { siteId, code } = fields
  requirePermission(actor, 'machine:write', { siteId, kind: 'site', id: siteId })
  return inTransaction(async () => {
    requireFreeCode('machine', await Machine.findOne({ where: { siteId, code } }), { code })
    const machine = await Machine.create(fields)
    await noteMaster(actor, { siteId, action: 'machine:create', record: { kind: 'machine', id: machine.id }, new: fields })
    return presentMachine(machine, false)
  })
}

/** Changes a machine; its geometry only as long as no batch was planned on it. */
export async function updateMachine(actor: Actor, id: string, { version, reason, ...fields }: UpdateMachine): Promise<MachineAnswer> {
  return inTransaction(async () => {
    const machine = await findMaster(Machine, actor, { permission: 'machine:write', kind: 'machine', id, isLocked: true })
    requireVersion('machine', machine, version)
    const { siteId } = machine
    requireFreeCode('machine', await Machine.findOne({ where: { siteId, code: fields.code } }), { code: fields.code, ownId: id })
    const hasBatches = (await usedInBatches('machineId', [id])).has(id)
    const old = presentMachine(machine, hasBatches)
    requireUnused(`machine ${machine.code}`, hasBatches, changedFields(old, fields, GEOMETRY))
    await machine.update({ ...fields, version: version + 1 })
    const now = presentMachine(machine, hasBatches)
    await noteMaster(actor, { siteId, action: 'machine:update', record: { kind: 'machine', id }, old, new: now, reason })
    return now
  })
}
