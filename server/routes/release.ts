import { z } from 'zod'
import { BatchId } from '#shared/schemas/batches.ts'
import { Id } from '#shared/schemas/field.ts'
import { CloseDeviation, DecideBatch, DeviationAnswer, DispositionAnswer, OpenDeviation, ReleaseReview } from '#shared/schemas/release.ts'
import type { Config } from '../config.ts'
import { endpoint, type Endpoint } from '../http/endpoint.ts'
import { FileAnswer } from '../http/file-answer.ts'
import { closeDeviation, openDeviation } from '../services/release/deviations.ts'
import { decideBatch, readReleaseReview } from '../services/release/decide-batch.ts'
import { exportRecord, printRecord } from '../services/release/export-record.ts'

const DeviationId = z.object({ deviationId: Id })

/** The quality unit: what is missing, what was not normal, the signed decision, the record on paper and as a file. */
export function releaseEndpoints({ isDemo }: Config): Endpoint[] {
  return [
    endpoint({
      method: 'get',
      path: '/batches/:batchId/release',
      summary: 'Checklist, acceptance and decisions of a batch',
      allow: 'record:read',
      params: BatchId,
      answer: { status: 200, schema: ReleaseReview },
      problems: [404],
      handle: ({ actor, params }) => readReleaseReview(actor, params.batchId),
    }),
    endpoint({
      method: 'post',
      path: '/batches/:batchId/dispositions',
      summary: 'Release, hold or reject a batch by signature',
      allow: 'batch:dispose',
      idempotent: true,
      params: BatchId,
      body: DecideBatch,
      answer: { status: 201, schema: DispositionAnswer },
      problems: [404, 409, 429],
      handle: ({ actor, params, body, client }) => decideBatch(actor, params.batchId, body, client),
    }),
    endpoint({
      method: 'post',
      path: '/batches/:batchId/deviations',
      summary: 'Open a deviation',
      allow: 'deviation:open',
      idempotent: true,
      params: BatchId,
      body: OpenDeviation,
      answer: { status: 201, schema: DeviationAnswer },
      problems: [404, 409],
      handle: ({ actor, params, body }) => openDeviation(actor, params.batchId, body),
    }),
    endpoint({
      method: 'post',
      path: '/deviations/:deviationId/closure',
      summary: 'Close a deviation with its findings',
      allow: 'deviation:close',
      idempotent: true,
      params: DeviationId,
      body: CloseDeviation,
      answer: { status: 200, schema: DeviationAnswer },
      problems: [404, 409],
      handle: ({ actor, params, body }) => closeDeviation(actor, params.deviationId, body),
    }),
    endpoint({
      method: 'get',
      path: '/batches/:batchId/record.pdf',
      summary: 'The batch record as PDF',
      allow: 'record:read',
      params: BatchId,
      answer: { status: 200, file: 'application/pdf' },
      problems: [404],
      handle: async ({ actor, params }) => {
        const { name, content } = await printRecord(actor, params.batchId, isDemo)
        return new FileAnswer({ name, mediaType: 'application/pdf', content, isInline: true })
      },
    }),
    endpoint({
      method: 'get',
      path: '/batches/:batchId/record.json',
      summary: 'The batch record as a machine-readable file with signatures and audit entries',
      allow: 'record:read',
      params: BatchId,
      answer: { status: 200, file: 'application/json' },
      problems: [404],
      handle: async ({ actor, params }) => {
        const { name, content } = await exportRecord(actor, params.batchId)
        return new FileAnswer({ name, mediaType: 'application/json', content })
      },
    }),
  ]
}
