import { z } from 'zod'
import { SiteQuery } from '#shared/schemas/master-fields.ts'
import {
  CreateToolingSet,
  InspectPart,
  ToolingPartId,
  ToolingSetAnswer,
  ToolingSetId,
  UpdateToolingSet,
} from '#shared/schemas/tooling-sets.ts'
import { endpoint } from '../http/endpoint.ts'
import { inspectPart } from '../services/masters/inspect-part.ts'
import { createToolingSet, listToolingSets, updateToolingSet } from '../services/masters/tooling-sets.ts'

/** Tooling sets and their parts. */
export const toolingSetEndpoints = [
  endpoint({
    method: 'get',
    path: '/tooling-sets',
    summary: 'Tooling sets of your sites with their parts',
    allow: 'record:read',
    query: SiteQuery,
    answer: { status: 200, schema: z.array(ToolingSetAnswer) },
    problems: [404],
    handle: ({ actor, query }) => listToolingSets(actor, query),
  }),
  endpoint({
    method: 'post',
    path: '/tooling-sets',
    summary: 'Add a tooling set with its parts',
    allow: 'tooling:write',
    idempotent: true,
    body: CreateToolingSet,
    answer: { status: 201, schema: ToolingSetAnswer },
    problems: [404, 409],
    handle: ({ actor, body }) => createToolingSet(actor, body),
  }),
  endpoint({
    method: 'put',
    path: '/tooling-sets/:toolingSetId',
    summary: 'Change a tooling set and its parts',
    allow: 'tooling:write',
    params: ToolingSetId,
    body: UpdateToolingSet,
    answer: { status: 200, schema: ToolingSetAnswer },
    problems: [404, 409],
    handle: ({ actor, params, body }) => updateToolingSet(actor, params.toolingSetId, body),
  }),
  endpoint({
    method: 'post',
    path: '/tooling-sets/:toolingSetId/parts/:partId/inspections',
    summary: 'Book the inspection of a part',
    allow: 'tooling:write',
    idempotent: true,
    params: ToolingPartId,
    body: InspectPart,
    answer: { status: 200, schema: ToolingSetAnswer },
    problems: [404, 409],
    handle: ({ actor, params, body }) => inspectPart(actor, params, body),
  }),
]
