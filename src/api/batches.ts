import type { ApproveStartUp, BatchAnswer, BatchList, EndBatch, PlanBatch } from '#shared/schemas/batches.ts'
import type { MachineEventAnswer, RecordEvent } from '#shared/schemas/machine-events.ts'
import type { BatchState } from '#shared/vocabulary.ts'
import { api } from './client.ts'

export interface BatchFilter {
  siteId?: string | undefined
  state?: BatchState | undefined
  search?: string | undefined
  limit?: number | undefined
}

export const fetchBatches = (filter: BatchFilter, signal?: AbortSignal) =>
  api.get<BatchList>('/batches', { query: { ...filter }, ...(signal ? { signal } : {}) })
export const fetchBatch = (id: string, signal?: AbortSignal) => api.get<BatchAnswer>(`/batches/${id}`, signal ? { signal } : {})
export const planBatch = (request: PlanBatch, idempotencyKey: string) => api.post<BatchAnswer>('/batches', request, { idempotencyKey })
export const startBatch = (id: string, version: number, idempotencyKey: string) =>
  api.post<BatchAnswer>(`/batches/${id}/start`, { version }, { idempotencyKey })
export const endBatch = (id: string, request: EndBatch, idempotencyKey: string) =>
  api.post<BatchAnswer>(`/batches/${id}/end`, request, { idempotencyKey })
export const approveStartUp = (id: string, request: ApproveStartUp, idempotencyKey: string) =>
  api.post<BatchAnswer>(`/batches/${id}/start-up-approval`, request, { idempotencyKey })
export const fetchEvents = (batchId: string, signal?: AbortSignal) =>
  api.get<MachineEventAnswer[]>(`/batches/${batchId}/events`, signal ? { signal } : {})
export const recordEvent = (batchId: string, event: RecordEvent, idempotencyKey: string) =>
  api.post<MachineEventAnswer>(`/batches/${batchId}/events`, event, { idempotencyKey })
