import { z } from 'zod'
import { SiteQuery } from '#shared/schemas/master-fields.ts'
import {
  CreateShellLot,
  RecordTare,
  RecordTareFile,
  ShellLotAnswer,
  ShellLotDetail,
  ShellLotId,
  UpdateShellLot,
} from '#shared/schemas/shell-lots.ts'
import { endpoint } from '../http/endpoint.ts'
import { recordTare, recordTareFile } from '../services/masters/record-tare.ts'
import { createShellLot, listShellLots, readShellLot, updateShellLot } from '../services/masters/shell-lots.ts'

/** A thousand weights with room to spare. */
const TARE_FILE_BYTES = 1_000_000

/** Shell lots and their tares. */
export const shellLotEndpoints = [
  endpoint({
    method: 'get',
    path: '/shell-lots',
    summary: 'Shell lots of your sites with the tare in force',
    allow: 'record:read',
    query: SiteQuery,
    answer: { status: 200, schema: z.array(ShellLotAnswer) },
    problems: [404],
    handle: ({ actor, query }) => listShellLots(actor, query),
  }),
  endpoint({
    method: 'get',
    path: '/shell-lots/:shellLotId',
    summary: 'One shell lot with every tare and what it is good for',
    allow: 'record:read',
    params: ShellLotId,
    answer: { status: 200, schema: ShellLotDetail },
    problems: [404],
    handle: ({ actor, params }) => readShellLot(actor, params.shellLotId),
  }),
  endpoint({
    method: 'post',
    path: '/shell-lots',
    summary: 'Add a shell lot',
    allow: 'shell-lot:write',
    idempotent: true,
    body: CreateShellLot,
    answer: { status: 201, schema: ShellLotAnswer },
    problems: [404, 409],
    handle: ({ actor, body }) => createShellLot(actor, body),
  }),
  endpoint({
    method: 'put',
    path: '/shell-lots/:shellLotId',
    summary: 'Change a shell lot',
    allow: 'shell-lot:write',
    params: ShellLotId,
    body: UpdateShellLot,
    answer: { status: 200, schema: ShellLotAnswer },
    problems: [404, 409],
    handle: ({ actor, params, body }) => updateShellLot(actor, params.shellLotId, body),
  }),
  endpoint({
    method: 'post',
    path: '/shell-lots/:shellLotId/tares',
    summary: 'Record weighed empty shells as the next tare',
    allow: 'shell-lot:write',
    idempotent: true,
    params: ShellLotId,
    body: RecordTare,
    answer: { status: 201, schema: ShellLotDetail },
    problems: [404],
    handle: ({ actor, params, body }) => recordTare(actor, params.shellLotId, body),
  }),
  endpoint({
    method: 'post',
    path: '/shell-lots/:shellLotId/tare-files',
    summary: 'Record the next tare from a CSV of one column',
    allow: 'shell-lot:write',
    idempotent: true,
    upload: { maxBytes: TARE_FILE_BYTES },
    params: ShellLotId,
    body: RecordTareFile,
    answer: { status: 201, schema: ShellLotDetail },
    problems: [404, 413],
    handle: ({ actor, params, body, file }) => recordTareFile(actor, params.shellLotId, file, body),
  }),
]
