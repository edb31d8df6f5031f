import type {
  ChangeoverAnswer,
  ChangeoverListItem,
  ChangeoverReading,
  FinishChangeover,
  StartChangeover,
} from '#shared/schemas/changeovers.ts'
import { api } from './client.ts'

export const fetchChangeovers = (siteId: string | undefined, signal?: AbortSignal) =>
  api.get<ChangeoverListItem[]>('/changeovers', { query: { siteId }, ...(signal ? { signal } : {}) })
export const fetchChangeover = (id: string, signal?: AbortSignal) =>
  api.get<ChangeoverAnswer>(`/changeovers/${id}`, signal ? { signal } : {})
export const startChangeover = (request: StartChangeover, idempotencyKey: string) =>
  api.post<ChangeoverAnswer>('/changeovers', request, { idempotencyKey })
export const updateStep = (id: string, ordinal: number, isDone: boolean, remark: string) =>
  api.put<ChangeoverAnswer>(`/changeovers/${id}/steps/${ordinal}`, { isDone, remark })
export const addReading = (id: string, reading: ChangeoverReading, idempotencyKey: string) =>
  api.post<ChangeoverAnswer>(`/changeovers/${id}/readings`, reading, { idempotencyKey })
export const finishChangeover = (id: string, request: FinishChangeover, idempotencyKey: string) =>
  api.post<ChangeoverAnswer>(`/changeovers/${id}/end`, request, { idempotencyKey })
export const checkChangeover = (id: string, request: { version: number; password: string }, idempotencyKey: string) =>
  api.post<ChangeoverAnswer>(`/changeovers/${id}/check`, request, { idempotencyKey })
