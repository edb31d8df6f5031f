import {
  ApproveStartUp,
  BatchAnswer,
  BatchId,
  BatchList,
  BatchQuery,
  EndBatch,
  PlanBatch,
  SetAssay,
  StartBatch,
} from '#shared/schemas/batches.ts'
import { endpoint } from '../http/endpoint.ts'
import { listBatches } from '../reads/batch-list.ts'
import { findBatch } from '../services/batches/find-batch.ts'
import { planBatch } from '../services/batches/plan-batch.ts'
import { presentBatch } from '../services/batches/present-batch.ts'
import { approveStartUp, endBatch, setAssay, startBatch } from '../services/batches/run-batch.ts'

/** The life of a batch up to its end; what follows is in dispositions.ts. */
export const batchEndpoints = [
  endpoint({
    method: 'get',
    path: '/batches',
    summary: 'Batches of your sites, newest first',
    allow: 'record:read',
    query: BatchQuery,
    answer: { status: 200, schema: BatchList },
    handle: ({ actor, query }) => listBatches(actor, query),
  }),
  endpoint({
    method: 'post',
    path: '/batches',
    summary: 'Plan a batch',
    allow: 'batch:plan',
    idempotent: true,
    body: PlanBatch,
    answer: { status: 201, schema: BatchAnswer },
    problems: [404, 409],
    handle: ({ actor, body }) => planBatch(actor, body),
  }),
  endpoint({
    method: 'get',
    path: '/batches/:batchId',
    summary: 'One batch',
    allow: 'record:read',
    params: BatchId,
    answer: { status: 200, schema: BatchAnswer },
    problems: [404],
    handle: async ({ actor, params }) => presentBatch(await findBatch(actor, 'record:read', params.batchId)),
  }),
  endpoint({
    method: 'post',
    path: '/batches/:batchId/start',
    summary: 'Start the run',
    allow: 'batch:run',
    idempotent: true,
    params: BatchId,
    body: StartBatch,
    answer: { status: 200, schema: BatchAnswer },
    problems: [404, 409],
    handle: ({ actor, params, body }) => startBatch(actor, params.batchId, body),
  }),
  endpoint({
    method: 'post',
    path: '/batches/:batchId/start-up-approval',
    summary: 'Approve the start-up by signature',
    allow: 'start-up:approve',
    idempotent: true,
    params: BatchId,
    body: ApproveStartUp,
    answer: { status: 200, schema: BatchAnswer },
    problems: [404, 409, 429],
    handle: ({ actor, params, body, client }) => approveStartUp(actor, params.batchId, body, client),
  }),
  endpoint({
    method: 'post',
    path: '/batches/:batchId/end',
    summary: 'End the run and book what came out',
    allow: 'batch:run',
    idempotent: true,
    params: BatchId,
    body: EndBatch,
    answer: { status: 200, schema: BatchAnswer },
    problems: [404, 409],
    handle: ({ actor, params, body }) => endBatch(actor, params.batchId, body),
  }),
  endpoint({
    method: 'put',
    path: '/batches/:batchId/assay',
    summary: 'Set the assay of the blend',
    allow: 'batch:dispose',
    params: BatchId,
    body: SetAssay,
    answer: { status: 200, schema: BatchAnswer },
    problems: [404, 409],
    handle: ({ actor, params, body }) => setAssay(actor, params.batchId, body),
  }),
]
