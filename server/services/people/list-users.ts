import { Op } from 'sequelize'
import { ROLES } from '#shared/permissions.ts'
import type { UserAnswer } from '#shared/schemas/users.ts'
import { NotFoundError } from '../../errors.ts'
import { sitesWith, type Actor } from '../../http/actor.ts'
import { Session } from '../../models/session.ts'
import { Site } from '../../models/site.ts'
import { User } from '../../models/user.ts'
import { UserRole } from '../../models/user-role.ts'

interface Around {
  sites: readonly Site[]
  roles: readonly UserRole[]
  sessions: readonly Session[]
}

function presentUser(user: User, { sites, roles, sessions }: Around): UserAnswer {
  const { id, email, name, isActive, mustChangePassPhrase, version } = user
  const own = sessions.filter(({ userId }) => userId === id)
  const last = own.reduce<Date | undefined>((latest, { startedAt }) => (latest && latest > startedAt ? latest : startedAt), undefined)
  const now = new Date()
  const rolesAt = (siteId: string) => {
    const held = new Set(roles.filter((row) => row.userId === id && row.siteId === siteId).map(({ role }) => role))
    return ROLES.filter((role) => held.has(role))
  }
  return {
    ...{ id, email, name, isActive, mustChangePassPhrase },
    sites: sites.map((site) => ({ siteId: site.id, siteCode: site.code, roles: rolesAt(site.id) })).filter((site) => site.roles.length > 0),
    openSessions: own.filter(({ endedAt, expiresAt }) => endedAt === null && expiresAt > now).length,
    lastSignInAt: last?.toISOString() ?? null,
    version,
  }
}

/** People with what the actor, as an administrator of some sites, may see of them. */
export async function presentUsers(actor: Actor, users: readonly User[]): Promise<UserAnswer[]> {
  const ids = users.map(({ id }) => id)
  const sites = await Site.findAll({ where: { id: sitesWith(actor, 'user:write') }, order: [['code', 'ASC']] })
  const roles = await UserRole.findAll({ where: { userId: ids } })
  const sessions = await Session.findAll({ where: { userId: ids }, attributes: ['userId', 'startedAt', 'expiresAt', 'endedAt'] })
  return users.map((user) => presentUser(user, { sites, roles, sessions }))
}

/** One person as the actor sees them. */
export async function presentOneUser(actor: Actor, user: User): Promise<UserAnswer> {
  const [answer] = await presentUsers(actor, [user])
  if (!answer) throw new Error(`User ${user.id} was not presented.`)
  return answer
}

/** Everybody with a role at a site that the actor administers, and everybody who lost their last role anywhere. */
export async function listUsers(actor: Actor): Promise<UserAnswer[]> {
  const all = await UserRole.findAll({ attributes: ['userId', 'siteId'] })
  const mine = new Set(sitesWith(actor, 'user:write'))
  const visible = new Set(all.filter(({ siteId }) => mine.has(siteId)).map(({ userId }) => userId))
  const elsewhere = [...new Set(all.map(({ userId }) => userId))].filter((id) => !visible.has(id))
  const users = await User.findAll({ where: { id: { [Op.notIn]: elsewhere } }, order: [['name', 'ASC']] })
  return presentUsers(actor, users)
}

/** The person, locked for a change, if the actor administers a site of theirs; otherwise nobody is there. */
export async function findUser(actor: Actor, id: string): Promise<{ user: User; roles: UserRole[] }> {
  const user = await User.findByPk(id, { lock: true })
  if (!user) throw new NotFoundError('user', id)
  const roles = await UserRole.findAll({ where: { userId: id } })
  const mine = sitesWith(actor, 'user:write')
  if (roles.length > 0 && !roles.some(({ siteId }) => mine.includes(siteId))) throw new NotFoundError('user', id)
  return { user, roles }
}
