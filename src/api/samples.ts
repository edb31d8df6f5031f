import type {
  CorrectWeighing,
  DueSample,
  OpenSample,
  PutWeighing,
  SampleAnswer,
  SampleListItem,
  WeighingKept,
} from '#shared/schemas/samples.ts'
import type { PublishWeighingFile, WeighingFileAnswer, WeighingFilePreviewed } from '#shared/schemas/weighing-files.ts'
import { api } from './client.ts'

/** A request as a person makes it: fields with a default may be left out. */
type Given<T, Optional extends keyof T> = Omit<T, Optional> & Partial<Pick<T, Optional>>

export const fetchDueSamples = (siteId: string | undefined, signal?: AbortSignal) =>
  api.get<DueSample[]>('/due-samples', { query: { siteId }, ...(signal ? { signal } : {}) })
export const fetchSamples = (batchId: string, signal?: AbortSignal) =>
  api.get<SampleListItem[]>(`/batches/${batchId}/samples`, signal ? { signal } : {})
export const fetchSample = (id: string, signal?: AbortSignal) => api.get<SampleAnswer>(`/samples/${id}`, signal ? { signal } : {})
export const openSample = (batchId: string, request: Given<OpenSample, 'firstSegment' | 'dueAt' | 'entry'>, idempotencyKey: string) =>
  api.post<SampleAnswer>(`/batches/${batchId}/samples`, request, { idempotencyKey })
export const putWeighing = (sampleId: string, ordinal: number, request: Given<PutWeighing, 'isConfirmed' | 'entry' | 'deviceTime'>) =>
  api.put<WeighingKept>(`/samples/${sampleId}/weighings/${ordinal}`, request)
export const correctWeighing = (sampleId: string, ordinal: number, request: CorrectWeighing, idempotencyKey: string) =>
  api.post<SampleAnswer>(`/samples/${sampleId}/weighings/${ordinal}/corrections`, request, { idempotencyKey })
export const completeSample = (sampleId: string, idempotencyKey: string) =>
  api.post<SampleAnswer>(`/samples/${sampleId}/completion`, {}, { idempotencyKey })
export const abandonSample = (sampleId: string, reason: string, idempotencyKey: string) =>
  api.post<SampleAnswer>(`/samples/${sampleId}/abandonment`, { reason }, { idempotencyKey })

export function uploadWeighingFile(file: File, batchId: string, balanceId: string): Promise<WeighingFilePreviewed> {
  const form = new FormData()
  form.set('batchId', batchId)
  form.set('balanceId', balanceId)
  form.set('file', file)
  return api.upload<WeighingFilePreviewed>('/weighing-files', form)
}
export const publishWeighingFile = (id: string, request: PublishWeighingFile, idempotencyKey: string) =>
  api.post<WeighingFileAnswer>(`/weighing-files/${id}/publication`, request, { idempotencyKey })
