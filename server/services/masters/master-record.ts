import type { Model, ModelStatic } from 'sequelize'
import type { Permission } from '#shared/permissions.ts'
import { ConflictError, NotFoundError } from '../../errors.ts'
import { requirePermission, sitesWith, type Actor } from '../../http/actor.ts'
import { appendAudit, chainOf } from '../audit.ts'

/** A master that belongs to one site and is known there by its code. */
type SiteRecord = Model & { id: string; siteId: string; code: string; version: number }

export interface Wanted {
  permission: Permission
  kind: string
  id: string
  /** Kept from others until the transaction ends, because it is about to change. */
  isLocked?: boolean
}

/** The record, if the actor may do this at its site; somebody of another site learns nothing of it. */
export async function findMaster<R extends SiteRecord>(
  model: ModelStatic<R>,
  actor: Actor,
  { permission, kind, id, isLocked = false }: Wanted,
): Promise<R> {
  const record = await model.findByPk(id, isLocked ? { lock: true } : {})
  if (!record) throw new NotFoundError(kind, id)
  requirePermission(actor, permission, { siteId: record.siteId, kind, id })
  return record
}

/** The sites to list from: the one asked for, or all where the actor may read. */
export function readableSites(actor: Actor, siteId: string | undefined): string[] {
  if (siteId === undefined) return sitesWith(actor, 'record:read')
  requirePermission(actor, 'record:read', { siteId, kind: 'site', id: siteId })
  return [siteId]
}

/** Refuses a code that another record of the site has; the unique key of the table settles what happens at the same moment. */
export function requireFreeCode(kind: string, taken: { id: string } | null, { code, ownId }: { code: string; ownId?: string }): void {
  if (!taken || taken.id === ownId) return
  const message = `There is a ${kind} ${code} at this site already.`
  throw new ConflictError('already-there', message, { id: taken.id, issues: [{ pointer: '/code', message }] })
}

export interface MasterNote {
  siteId: string
  action: string
  record: { kind: string; id: string }
  old?: object
  new?: object
  reason?: string
}

/** Audits a change of a master in the chain of its site. */
export async function noteMaster(actor: Actor, { siteId, ...note }: MasterNote): Promise<void> {
  await appendAudit({ actor, chain: chainOf.masters(siteId), ...note })
}

/** The names of the fields in which two records differ, so that a refusal can say what would change. */
export function changedFields<T extends object>(old: T, next: Partial<T>, fields: readonly (keyof T)[]): (keyof T)[] {
  return fields.filter((field) => next[field] !== undefined && JSON.stringify(old[field]) !== JSON.stringify(next[field]))
}

/** Refuses a change of figures that recorded batches were made with: a new record gets them, the old one stays true. */
export function requireUnused(what: string, isUsed: boolean, changed: readonly PropertyKey[]): void {
  if (!isUsed || changed.length === 0) return
  const message = `Batches were planned with ${what}, so this is part of their record. Make a new one with its own code instead.`
  throw new ConflictError('in-use', message, { issues: changed.map((field) => ({ pointer: `/${String(field)}`, message })) })
}
