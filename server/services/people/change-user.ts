import type { RenameUser, SetRoles, SetUserActive, UserAnswer } from '#shared/schemas/users.ts'
import { inTransaction } from '../../database/in-transaction.ts'
import { ConflictError, ForbiddenError } from '../../errors.ts'
import { requirePermission, sitesWith, type Actor } from '../../http/actor.ts'
import type { Client } from '../../http/client.ts'
import type { User } from '../../models/user.ts'
import { UserRole } from '../../models/user-role.ts'
import { appendAudit, chainOf } from '../audit.ts'
import { requireVersion } from '../require-version.ts'
import { endSessionsOf } from '../sign-in/sessions.ts'
import { findUser, presentOneUser } from './list-users.ts'

/** What touches a person everywhere is for who administers every site where they have a role. */
export function requireWholePerson(actor: Actor, roles: readonly UserRole[]): void {
  const mine = sitesWith(actor, 'user:write')
  if (roles.some(({ siteId }) => !mine.includes(siteId))) throw new ForbiddenError('user:write')
}

async function findForChange(actor: Actor, id: string, version: number): Promise<{ user: User; roles: UserRole[]; old: UserAnswer }> {
  const { user, roles } = await findUser(actor, id)
  const old = await presentOneUser(actor, user)
  // The stored row holds the hash of a pass-phrase; a stale version answers with what may be seen.
  requireVersion('user', { version: user.version, toJSON: () => old }, version)
  return { user, roles, old }
}

/** Changes the printed name. Signatures keep the name that they were made with. */
export async function renameUser(actor: Actor, id: string, { name, version, reason }: RenameUser): Promise<UserAnswer> {
  return inTransaction(async () => {
    const { user, roles, old } = await findForChange(actor, id, version)
    requireWholePerson(actor, roles)
    await user.update({ name, version: version + 1 })
    const change = { old: { name: old.name }, new: { name }, reason }
    await appendAudit({ actor, chain: chainOf.people, action: 'user:rename', record: { kind: 'user', id }, ...change })
    return presentOneUser(actor, user)
  })
}

/** Sets all roles at one site; every session of the person ends, so that the new roles hold at the next request. */
export async function setRoles(actor: Actor, id: string, request: SetRoles, client: Client): Promise<UserAnswer> {
  const { siteId, roles, version, reason } = request
  requirePermission(actor, 'user:write', { siteId, kind: 'site', id: siteId })
  return inTransaction(async () => {
    const { user, roles: held } = await findForChange(actor, id, version)
    if (id === actor.userId && !roles.includes('administrator')) {
      throw new ConflictError('own-role', 'You cannot take the administrator role from yourself; another administrator can.')
    }
    const before = held.filter((row) => row.siteId === siteId).map(({ role }) => role)
    await UserRole.destroy({ where: { userId: id, siteId } })
    for (const role of roles) await UserRole.create({ userId: id, siteId, role })
    await user.update({ version: version + 1 })
    await endSessionsOf(id, 'roles-changed', client)
    const change = { old: { siteId, roles: before }, new: { siteId, roles }, reason }
    await appendAudit({ actor, chain: chainOf.people, action: 'user:set-roles', record: { kind: 'user', id }, ...change })
    return presentOneUser(actor, user)
  })
}

/** Lets a person sign in or not. Nobody is deleted: what they did keeps their name. */
export async function setUserActive(
  actor: Actor,
  id: string,
  { isActive, version, reason }: SetUserActive,
  client: Client,
): Promise<UserAnswer> {
  return inTransaction(async () => {
    const { user, roles, old } = await findForChange(actor, id, version)
    if (id === actor.userId && !isActive)
      throw new ConflictError('own-account', 'You cannot deactivate yourself; another administrator can.')
    requireWholePerson(actor, roles)
    await user.update({ isActive, version: version + 1 })
    if (!isActive) await endSessionsOf(id, 'deactivated', client)
    const change = { old: { isActive: old.isActive }, new: { isActive }, reason }
    const action = isActive ? 'user:activate' : 'user:deactivate'
    await appendAudit({ actor, chain: chainOf.people, action, record: { kind: 'user', id }, ...change })
    return presentOneUser(actor, user)
  })
}
