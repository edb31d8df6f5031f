import type { BatchCapability, BatchChart, BatchPositions } from '#shared/schemas/batch-chart.ts'
import type { ChartKind } from '#shared/vocabulary.ts'
import { api } from './client.ts'

export const fetchBatchChart = (batchId: string, chart: ChartKind | undefined, signal?: AbortSignal) =>
  api.get<BatchChart>(`/batches/${batchId}/chart`, { query: { chart }, ...(signal ? { signal } : {}) })
export const fetchBatchCapability = (batchId: string, signal?: AbortSignal) =>
  api.get<BatchCapability>(`/batches/${batchId}/capability`, signal ? { signal } : {})
export const fetchBatchPositions = (batchId: string, signal?: AbortSignal) =>
  api.get<BatchPositions>(`/batches/${batchId}/positions`, signal ? { signal } : {})
