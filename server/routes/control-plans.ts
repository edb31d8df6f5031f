import { z } from 'zod'
import {
  ApproveControlPlan,
  ControlPlanAnswer,
  ControlPlanId,
  ControlPlanQuery,
  ProposeControlPlan,
  WithdrawControlPlan,
} from '#shared/schemas/control-plans.ts'
import { endpoint } from '../http/endpoint.ts'
import { listControlPlans, readControlPlan } from '../services/masters/control-plans.ts'
import { approveControlPlan, proposeControlPlan, withdrawControlPlan } from '../services/masters/decide-control-plan.ts'

/** Control plans: proposed by one person, approved by another. */
export const controlPlanEndpoints = [
  endpoint({
    method: 'get',
    path: '/control-plans',
    summary: 'Control plans of your sites, newest version first',
    allow: 'record:read',
    query: ControlPlanQuery,
    answer: { status: 200, schema: z.array(ControlPlanAnswer) },
    problems: [404],
    handle: ({ actor, query }) => listControlPlans(actor, query),
  }),
  endpoint({
    method: 'get',
    path: '/control-plans/:controlPlanId',
    summary: 'One control plan',
    allow: 'record:read',
    params: ControlPlanId,
    answer: { status: 200, schema: ControlPlanAnswer },
    problems: [404],
    handle: ({ actor, params }) => readControlPlan(actor, params.controlPlanId),
  }),
  endpoint({
    method: 'post',
    path: '/control-plans',
    summary: 'Propose the next version of a plan',
    allow: 'control-plan:propose',
    idempotent: true,
    body: ProposeControlPlan,
    answer: { status: 201, schema: ControlPlanAnswer },
    problems: [404],
    handle: ({ actor, body }) => proposeControlPlan(actor, body),
  }),
  endpoint({
    method: 'post',
    path: '/control-plans/:controlPlanId/approval',
    summary: 'Approve a proposed plan by signature',
    allow: 'control-plan:approve',
    idempotent: true,
    params: ControlPlanId,
    body: ApproveControlPlan,
    answer: { status: 200, schema: ControlPlanAnswer },
    problems: [404, 409, 429],
    handle: ({ actor, params, body, client }) => approveControlPlan(actor, params.controlPlanId, body, client),
  }),
  endpoint({
    method: 'post',
    path: '/control-plans/:controlPlanId/withdrawal',
    summary: 'Take a proposed or approved plan back',
    allow: 'record:read',
    idempotent: true,
    params: ControlPlanId,
    body: WithdrawControlPlan,
    answer: { status: 200, schema: ControlPlanAnswer },
    problems: [404, 409],
    handle: ({ actor, params, body }) => withdrawControlPlan(actor, params.controlPlanId, body),
  }),
]
