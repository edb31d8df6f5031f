import type {
  CloseDeviation,
  DecideBatch,
  DeviationAnswer,
  DispositionAnswer,
  OpenDeviation,
  ReleaseReview,
} from '#shared/schemas/release.ts'
import type { BatchAnswer } from '#shared/schemas/batches.ts'
import { api } from './client.ts'

export const fetchRelease = (batchId: string, signal?: AbortSignal) =>
  api.get<ReleaseReview>(`/batches/${batchId}/release`, signal ? { signal } : {})
export const decideBatch = (batchId: string, request: DecideBatch, idempotencyKey: string) =>
  api.post<DispositionAnswer>(`/batches/${batchId}/dispositions`, request, { idempotencyKey })
export const openDeviation = (batchId: string, request: OpenDeviation, idempotencyKey: string) =>
  api.post<DeviationAnswer>(`/batches/${batchId}/deviations`, request, { idempotencyKey })
export const closeDeviation = (id: string, request: CloseDeviation, idempotencyKey: string) =>
  api.post<DeviationAnswer>(`/deviations/${id}/closure`, request, { idempotencyKey })
export const setAssay = (batchId: string, request: { version: number; assayPercent: number; reason: string }) =>
  api.put<BatchAnswer>(`/batches/${batchId}/assay`, request)
export const downloadRecord = (batchId: string, form: 'pdf' | 'json') => api.download(`/batches/${batchId}/record.${form}`)
