import { z } from 'zod'
import { Id } from '#shared/schemas/field.ts'
import {
  AddReviewAction,
  CloseReviewAction,
  FreezeReview,
  ReviewActionAnswer,
  ReviewAnswer,
  ReviewQuery,
  Week,
} from '#shared/schemas/review.ts'
import { endpoint } from '../http/endpoint.ts'
import { addAction, closeAction, freezeReview, readReview } from '../services/review/week-review.ts'

const WeekPlace = z.object({ week: Week })
const ActionId = z.object({ actionId: Id })

/** The weekly meeting: figures, frozen when it wants, and actions carried over until they are closed. */
export const reviewEndpoints = [
  endpoint({
    method: 'get',
    path: '/reviews/:week',
    summary: 'The week in figures with its actions',
    allow: 'record:read',
    params: WeekPlace,
    query: ReviewQuery,
    answer: { status: 200, schema: ReviewAnswer },
    problems: [404],
    handle: ({ actor, params, query }) => readReview(actor, query.siteId, params.week),
  }),
  endpoint({
    method: 'post',
    path: '/reviews/:week/freeze',
    summary: 'Keep the figures of the week as they are',
    allow: 'review:freeze',
    idempotent: true,
    params: WeekPlace,
    body: FreezeReview,
    answer: { status: 200, schema: ReviewAnswer },
    problems: [404, 409],
    handle: ({ actor, params, body }) => freezeReview(actor, body.siteId, params.week),
  }),
  endpoint({
    method: 'post',
    path: '/reviews/:week/actions',
    summary: 'Add an action',
    allow: 'review:act',
    idempotent: true,
    params: WeekPlace,
    body: AddReviewAction,
    answer: { status: 201, schema: ReviewActionAnswer },
    problems: [404],
    handle: ({ actor, params, body }) => addAction(actor, params.week, body),
  }),
  endpoint({
    method: 'post',
    path: '/review-actions/:actionId/closure',
    summary: 'Close an action and say whether it helped',
    allow: 'review:act',
    idempotent: true,
    params: ActionId,
    body: CloseReviewAction,
    answer: { status: 200, schema: ReviewActionAnswer },
    problems: [404, 409],
    handle: ({ actor, params, body }) => closeAction(actor, params.actionId, body),
  }),
]
