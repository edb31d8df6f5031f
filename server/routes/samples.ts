import { z } from 'zod'
import { BatchId } from '#shared/schemas/batches.ts'
import { Id } from '#shared/schemas/field.ts'
import {
  AbandonSample,
  CorrectWeighing,
  DueSample,
  OpenSample,
  PutWeighing,
  SampleAnswer,
  SampleId,
  SampleListItem,
  SampleQuery,
  WeighingKept,
  WeighingPlace,
} from '#shared/schemas/samples.ts'
import { endpoint } from '../http/endpoint.ts'
import { listDueSamples } from '../reads/due-samples.ts'
import { Sample } from '../models/sample.ts'
import { findBatch } from '../services/batches/find-batch.ts'
import { abandonSample, completeSample, correctWeighing } from '../services/samples/finish-sample.ts'
import { openSample } from '../services/samples/open-sample.ts'
import { presentSample, presentSampleItem } from '../services/samples/present-sample.ts'
import { putWeighing } from '../services/samples/put-weighing.ts'
import { findSample } from '../services/samples/sample-context.ts'

/** From the sample that is due to the last capsule and its corrections. */
export const sampleEndpoints = [
  endpoint({
    method: 'get',
    path: '/due-samples',
    summary: 'What each running machine needs weighed next',
    allow: 'record:read',
    query: z.strictObject({ siteId: Id.optional() }),
    answer: { status: 200, schema: z.array(DueSample) },
    handle: ({ actor, query }) => listDueSamples(actor, query.siteId, new Date()),
  }),
  endpoint({
    method: 'get',
    path: '/batches/:batchId/samples',
    summary: 'The samples of a batch, in order',
    allow: 'record:read',
    params: BatchId,
    query: SampleQuery,
    answer: { status: 200, schema: z.array(SampleListItem) },
    problems: [404],
    handle: async ({ actor, params, query: { state } }) => {
      const { id: batchId } = await findBatch(actor, 'record:read', params.batchId)
      const samples = await Sample.findAll({ where: { batchId, ...(state === undefined ? {} : { state }) }, order: [['sequence', 'ASC']] })
      return samples.map(presentSampleItem)
    },
  }),
  endpoint({
    method: 'post',
    path: '/batches/:batchId/samples',
    summary: 'Begin a sample',
    allow: 'sample:record',
    idempotent: true,
    params: BatchId,
    body: OpenSample,
    answer: { status: 201, schema: SampleAnswer },
    problems: [404, 409],
    handle: ({ actor, params, body }) => openSample(actor, params.batchId, body),
  }),
  endpoint({
    method: 'get',
    path: '/samples/:sampleId',
    summary: 'One sample with every capsule',
    allow: 'record:read',
    params: SampleId,
    answer: { status: 200, schema: SampleAnswer },
    problems: [404],
    handle: async ({ actor, params }) => presentSample(await findSample(actor, 'record:read', params.sampleId)),
  }),
  endpoint({
    method: 'put',
    path: '/samples/:sampleId/weighings/:ordinal',
    summary: 'Keep one weight, for good',
    allow: 'sample:record',
    params: WeighingPlace,
    body: PutWeighing,
    answer: { status: 200, schema: WeighingKept },
    problems: [404, 409],
    handle: ({ actor, params, body }) => putWeighing(actor, params.sampleId, params.ordinal, body),
  }),
  endpoint({
    method: 'post',
    path: '/samples/:sampleId/weighings/:ordinal/corrections',
    summary: 'Correct one weight, with a reason',
    allow: 'sample:correct',
    idempotent: true,
    params: WeighingPlace,
    body: CorrectWeighing,
    answer: { status: 201, schema: SampleAnswer },
    problems: [404, 409],
    handle: ({ actor, params, body }) => correctWeighing(actor, params.sampleId, params.ordinal, body),
  }),
  endpoint({
    method: 'post',
    path: '/samples/:sampleId/completion',
    summary: 'Judge a sample whose capsules are all weighed',
    allow: 'sample:record',
    idempotent: true,
    params: SampleId,
    answer: { status: 200, schema: SampleAnswer },
    problems: [404, 409],
    handle: ({ actor, params }) => completeSample(actor, params.sampleId),
  }),
  endpoint({
    method: 'post',
    path: '/samples/:sampleId/abandonment',
    summary: 'Leave a sample unfinished, with a reason',
    allow: 'sample:record',
    idempotent: true,
    params: SampleId,
    body: AbandonSample,
    answer: { status: 200, schema: SampleAnswer },
    problems: [404, 409],
    handle: ({ actor, params, body }) => abandonSample(actor, params.sampleId, body),
  }),
]
