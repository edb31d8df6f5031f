import { BatchCapability, BatchChart, BatchChartQuery, BatchPositions } from '#shared/schemas/batch-chart.ts'
import { BatchId } from '#shared/schemas/batches.ts'
import { endpoint } from '../http/endpoint.ts'
import { readBatchCapability, readBatchPositions } from '../reads/batch-capability.ts'
import { readBatchChart } from '../reads/batch-chart.ts'

/** What the weights of a batch say. */
export const watchEndpoints = [
  endpoint({
    method: 'get',
    path: '/batches/:batchId/chart',
    summary: 'The control chart of a batch with phases, limits, signals, events and drift',
    allow: 'record:read',
    params: BatchId,
    query: BatchChartQuery,
    answer: { status: 200, schema: BatchChart },
    problems: [404],
    handle: ({ actor, params, query }) => readBatchChart(actor, params.batchId, query),
  }),
  endpoint({
    method: 'get',
    path: '/batches/:batchId/capability',
    summary: 'Capability of a batch with intervals',
    allow: 'record:read',
    params: BatchId,
    answer: { status: 200, schema: BatchCapability },
    problems: [404, 409],
    handle: ({ actor, params }) => readBatchCapability(actor, params.batchId),
  }),
  endpoint({
    method: 'get',
    path: '/batches/:batchId/positions',
    summary: 'Which positions differ from the others',
    allow: 'record:read',
    params: BatchId,
    answer: { status: 200, schema: BatchPositions },
    problems: [404],
    handle: ({ actor, params }) => readBatchPositions(actor, params.batchId),
  }),
]
