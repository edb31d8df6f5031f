import { mayDo, type Permission, type Role } from '#shared/permissions.ts'
import { ForbiddenError, NotFoundError } from '../errors.ts'

/** Who asks: a signed-in person, their roles by site, and where the request came from. */
export interface Actor {
  readonly userId: string
  readonly name: string
  readonly email: string
  readonly sessionId: string
  readonly rolesBySite: ReadonlyMap<string, readonly Role[]>
  readonly terminal: string
  readonly requestId: string
}

/** The sites at which the actor holds the permission. */
export function sitesWith(actor: Actor, permission: Permission): string[] {
  return [...actor.rolesBySite].filter(([, roles]) => mayDo(roles, permission)).map(([siteId]) => siteId)
}

/** Whether the actor holds the permission at any site. */
export function mayAnywhere(actor: Actor, permission: Permission): boolean {
  return [...actor.rolesBySite.values()].some((roles) => mayDo(roles, permission))
}

/**
 * Refuses an actor who lacks the permission at the record's site. Somebody without any role there learns only that
 * there is no such record.
 */
export function requirePermission(actor: Actor, permission: Permission, record: { siteId: string; kind: string; id: string }): void {
  const roles = actor.rolesBySite.get(record.siteId)
  if (!roles || roles.length === 0) throw new NotFoundError(record.kind, record.id)
  if (!mayDo(roles, permission)) throw new ForbiddenError(permission)
}
