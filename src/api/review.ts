import type { AddReviewAction, CloseReviewAction, ReviewActionAnswer, ReviewAnswer } from '#shared/schemas/review.ts'
import type { CaughtMail } from '#shared/schemas/mail.ts'
import { api } from './client.ts'

export const fetchReview = (siteId: string, week: string, signal?: AbortSignal) =>
  api.get<ReviewAnswer>(`/reviews/${week}`, { query: { siteId }, ...(signal ? { signal } : {}) })
export const freezeReview = (siteId: string, week: string, idempotencyKey: string) =>
  api.post<ReviewAnswer>(`/reviews/${week}/freeze`, { siteId }, { idempotencyKey })
export const addReviewAction = (week: string, request: AddReviewAction, idempotencyKey: string) =>
  api.post<ReviewActionAnswer>(`/reviews/${week}/actions`, request, { idempotencyKey })
export const closeReviewAction = (id: string, request: CloseReviewAction, idempotencyKey: string) =>
  api.post<ReviewActionAnswer>(`/review-actions/${id}/closure`, request, { idempotencyKey })
export const fetchCaughtMail = (signal?: AbortSignal) => api.get<CaughtMail[]>('/caught-mail', signal ? { signal } : {})
