import type { CreateSite, SiteAnswer, UpdateSite } from '#shared/schemas/sites.ts'
import { inTransaction } from '../../database/in-transaction.ts'
import { NotFoundError } from '../../errors.ts'
import { requirePermission, sitesWith, type Actor } from '../../http/actor.ts'
import { Site } from '../../models/site.ts'
import { UserRole } from '../../models/user-role.ts'
import { appendAudit, chainOf } from '../audit.ts'
import { requireVersion } from '../require-version.ts'
import { noteMaster, requireFreeCode } from './master-record.ts'

function presentSite({ id, code, name, timeZone, version }: Site): SiteAnswer {
  return { id, code, name, timeZone, version }
}

/** The sites where the actor has a role, by code. */
export async function listSites(actor: Actor): Promise<SiteAnswer[]> {
  const sites = await Site.findAll({ where: { id: sitesWith(actor, 'record:read') }, order: [['code', 'ASC']] })
  return sites.map(presentSite)
}

/** A new site; whoever makes it administers it, or nobody could ever enter. */
export async function createSite(actor: Actor, fields: CreateSite): Promise<SiteAnswer> {
  return inTransaction(async () => {
    requireFreeCode('site', await Site.findOne({ where: { code: fields.code } }), fields)
    const site = await Site.create(fields)
    await UserRole.create({ userId: actor.userId, siteId: site.id, role: 'administrator' })
    await noteMaster(actor, { siteId: site.id, action: 'site:create', record: { kind: 'site', id: site.id }, new: fields })
    await appendAudit({
      actor,
      chain: chainOf.people,
      action: 'user:set-roles',
      record: { kind: 'user', id: actor.userId },
      new: { siteId: site.id, roles: ['administrator'] },
    })
    return presentSite(site)
  })
}

/** Changes name, code or zone of a site. Stored times are UTC, so a new zone changes only how they are shown. */
export async function updateSite(actor: Actor, siteId: string, { version, reason, ...fields }: UpdateSite): Promise<SiteAnswer> {
  return inTransaction(async () => {
    requirePermission(actor, 'site:write', { siteId, kind: 'site', id: siteId })
    const site = await Site.findByPk(siteId, { lock: true })
    if (!site) throw new NotFoundError('site', siteId)
    requireVersion('site', site, version)
    requireFreeCode('site', await Site.findOne({ where: { code: fields.code } }), { code: fields.code, ownId: siteId })
    const old = presentSite(site)
    await site.update({ ...fields, version: version + 1 })
    await noteMaster(actor, { siteId, action: 'site:update', record: { kind: 'site', id: siteId }, old, new: presentSite(site), reason })
    return presentSite(site)
  })
}
