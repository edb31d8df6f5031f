import { z } from 'zod'
import { SiteQuery } from '#shared/schemas/master-fields.ts'
import { CreateMachine, MachineAnswer, MachineId, UpdateMachine } from '#shared/schemas/machines.ts'
import { endpoint } from '../http/endpoint.ts'
import { createMachine, listMachines, updateMachine } from '../services/masters/machines.ts'

/** Capsule fillers and their geometry. */
export const machineEndpoints = [
  endpoint({
    method: 'get',
    path: '/machines',
    summary: 'Machines of your sites',
    allow: 'record:read',
    query: SiteQuery,
    answer: { status: 200, schema: z.array(MachineAnswer) },
    problems: [404],
    handle: ({ actor, query }) => listMachines(actor, query),
  }),
  endpoint({
    method: 'post',
    path: '/machines',
    summary: 'Add a machine',
    allow: 'machine:write',
    idempotent: true,
    body: CreateMachine,
    answer: { status: 201, schema: MachineAnswer },
    problems: [404, 409],
    handle: ({ actor, body }) => createMachine(actor, body),
  }),
  endpoint({
    method: 'put',
    path: '/machines/:machineId',
    summary: 'Change a machine',
    allow: 'machine:write',
    params: MachineId,
    body: UpdateMachine,
    answer: { status: 200, schema: MachineAnswer },
    problems: [404, 409],
    handle: ({ actor, params, body }) => updateMachine(actor, params.machineId, body),
  }),
]
