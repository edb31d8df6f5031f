import { z } from 'zod'
import {
  ChangeoverAnswer,
  ChangeoverListItem,
  ChangeoverQuery,
  ChangeoverReading,
  CheckChangeover,
  FinishChangeover,
  StartChangeover,
  UpdateStep,
} from '#shared/schemas/changeovers.ts'
import { Id } from '#shared/schemas/field.ts'
import { sitesWith } from '../http/actor.ts'
import { endpoint } from '../http/endpoint.ts'
import { presentChangeover, presentChangeovers } from '../services/changeovers/present-changeover.ts'
import {
  addReading,
  checkChangeover,
  findChangeover,
  finishChangeover,
  listChangeovers,
  startChangeover,
  updateStep,
} from '../services/changeovers/record-changeover.ts'

const ChangeoverId = z.object({ changeoverId: Id })
const StepPlace = z.object({ changeoverId: Id, ordinal: z.coerce.number().int().min(1).max(1_000) })

/** A change of tooling from the cautions to the second person's check. */
export const changeoverEndpoints = [
  endpoint({
    method: 'get',
    path: '/changeovers',
    summary: 'Changes of tooling at your sites, newest first',
    allow: 'record:read',
    query: ChangeoverQuery,
    answer: { status: 200, schema: z.array(ChangeoverListItem) },
    handle: async ({ actor, query: { siteId, limit, ...where } }) => {
      const own = sitesWith(actor, 'record:read').filter((id) => siteId === undefined || id === siteId)
      return presentChangeovers(await listChangeovers(own, where, limit))
    },
  }),
  endpoint({
    method: 'post',
    path: '/changeovers',
    summary: 'Begin a change of tooling',
    allow: 'changeover:record',
    idempotent: true,
    body: StartChangeover,
    answer: { status: 201, schema: ChangeoverAnswer },
    problems: [404],
    handle: ({ actor, body }) => startChangeover(actor, body),
  }),
  endpoint({
    method: 'get',
    path: '/changeovers/:changeoverId',
    summary: 'One change of tooling',
    allow: 'record:read',
    params: ChangeoverId,
    answer: { status: 200, schema: ChangeoverAnswer },
    problems: [404],
    handle: async ({ actor, params }) => presentChangeover(await findChangeover(actor, 'record:read', params.changeoverId)),
  }),
  endpoint({
    method: 'put',
    path: '/changeovers/:changeoverId/steps/:ordinal',
    summary: 'Mark a step as done, or take that back',
    allow: 'changeover:record',
    params: StepPlace,
    body: UpdateStep,
    answer: { status: 200, schema: ChangeoverAnswer },
    problems: [404, 409],
    handle: ({ actor, params, body }) => updateStep(actor, params.changeoverId, params.ordinal, body),
  }),
  endpoint({
    method: 'post',
    path: '/changeovers/:changeoverId/readings',
    summary: 'Add a reading',
    allow: 'changeover:record',
    idempotent: true,
    params: ChangeoverId,
    body: ChangeoverReading,
    answer: { status: 201, schema: ChangeoverAnswer },
    problems: [404, 409],
    handle: ({ actor, params, body }) => addReading(actor, params.changeoverId, body),
  }),
  endpoint({
    method: 'post',
    path: '/changeovers/:changeoverId/end',
    summary: 'End the work',
    allow: 'changeover:record',
    idempotent: true,
    params: ChangeoverId,
    body: FinishChangeover,
    answer: { status: 200, schema: ChangeoverAnswer },
    problems: [404, 409],
    handle: ({ actor, params, body }) => finishChangeover(actor, params.changeoverId, body),
  }),
  endpoint({
    method: 'post',
    path: '/changeovers/:changeoverId/check',
    summary: 'Sign that the change was checked, as a second person',
    allow: 'changeover:check',
    idempotent: true,
    params: ChangeoverId,
    body: CheckChangeover,
    answer: { status: 200, schema: ChangeoverAnswer },
    problems: [404, 409, 429],
    handle: ({ actor, params, body, client }) => checkChangeover(actor, params.changeoverId, body, client),
  }),
]
