import { z } from 'zod'
import { BatchId } from '#shared/schemas/batches.ts'
import { MachineEventAnswer, RecordEvent } from '#shared/schemas/machine-events.ts'
import { endpoint } from '../http/endpoint.ts'
import { listEvents, recordEvent } from '../services/machine-events/record-event.ts'

/** What happens at the machine while a batch runs. */
export const machineEventEndpoints = [
  endpoint({
    method: 'get',
    path: '/batches/:batchId/events',
    summary: 'The events of a run, in order',
    allow: 'record:read',
    params: BatchId,
    answer: { status: 200, schema: z.array(MachineEventAnswer) },
    problems: [404],
    handle: ({ actor, params }) => listEvents(actor, params.batchId),
  }),
  endpoint({
    method: 'post',
    path: '/batches/:batchId/events',
    summary: 'Record an event of the run',
    allow: 'event:record',
    idempotent: true,
    params: BatchId,
    body: RecordEvent,
    answer: { status: 201, schema: MachineEventAnswer },
    problems: [404, 409],
    handle: ({ actor, params, body }) => recordEvent(actor, params.batchId, body),
  }),
]
