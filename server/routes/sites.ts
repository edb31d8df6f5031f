import { z } from 'zod'
import { CreateSite, SiteAnswer, SiteId, UpdateSite } from '#shared/schemas/sites.ts'
import { endpoint } from '../http/endpoint.ts'
import { createSite, listSites, updateSite } from '../services/masters/sites.ts'

/** Sites: places with their own machines, people and time zone. */
export const siteEndpoints = [
  endpoint({
    method: 'get',
    path: '/sites',
    summary: 'Sites where you have a role',
    allow: 'record:read',
    answer: { status: 200, schema: z.array(SiteAnswer) },
    handle: ({ actor }) => listSites(actor),
  }),
  endpoint({
    method: 'post',
    path: '/sites',
    summary: 'Add a site; you administer it',
    allow: 'site:write',
    idempotent: true,
    body: CreateSite,
    answer: { status: 201, schema: SiteAnswer },
    problems: [409],
    handle: ({ actor, body }) => createSite(actor, body),
  }),
  endpoint({
    method: 'put',
    path: '/sites/:siteId',
    summary: 'Change a site',
    allow: 'site:write',
    params: SiteId,
    body: UpdateSite,
    answer: { status: 200, schema: SiteAnswer },
    problems: [404, 409],
    handle: ({ actor, params, body }) => updateSite(actor, params.siteId, body),
  }),
]
