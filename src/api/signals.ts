import type { CloseSignal, SignalAnswer } from '#shared/schemas/signals.ts'
import { api } from './client.ts'

export const fetchSignals = (query: { batchId?: string; siteId?: string; state?: string }, signal?: AbortSignal) =>
  api.get<SignalAnswer[]>('/signals', { query, ...(signal ? { signal } : {}) })
export const acknowledgeSignal = (id: string, version: number, idempotencyKey: string) =>
  api.post<SignalAnswer>(`/signals/${id}/acknowledgement`, { version }, { idempotencyKey })
export const closeSignal = (id: string, request: CloseSignal, idempotencyKey: string) =>
  api.post<SignalAnswer>(`/signals/${id}/closure`, request, { idempotencyKey })
