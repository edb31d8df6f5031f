import { Op } from 'sequelize'
import type { SignedInUser } from '#shared/schemas/auth.ts'
import { Site } from '../../models/site.ts'
import type { User } from '../../models/user.ts'
import { UserRole } from '../../models/user-role.ts'

/** A person as the client knows them: name, and roles site by site. */
export async function presentSignedInUser(user: User): Promise<SignedInUser> {
  const roles = await UserRole.findAll({ where: { userId: user.id } })
  const sites = await Site.findAll({ where: { id: { [Op.in]: roles.map(({ siteId }) => siteId) } }, order: [['code', 'ASC']] })
  return {
    id: user.id,
    email: user.email,
    name: user.name,
    sites: sites.map(({ id, code, name, timeZone }) => ({
      id,
      code,
      name,
      timeZone,
      roles: roles.filter(({ siteId }) => siteId === id).map(({ role }) => role),
    })),
  }
}
