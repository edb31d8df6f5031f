import { z } from 'zod'
import { BalanceAnswer, BalanceDetail, BalanceId, CreateBalance, RecordBalanceCheck, UpdateBalance } from '#shared/schemas/balances.ts'
import { SiteQuery } from '#shared/schemas/master-fields.ts'
import { endpoint } from '../http/endpoint.ts'
import { createBalance, listBalances, readBalance, updateBalance } from '../services/masters/balances.ts'
import { recordBalanceCheck } from '../services/masters/check-balance.ts'

/** Balances and their external checks. */
export const balanceEndpoints = [
  endpoint({
    method: 'get',
    path: '/balances',
    summary: 'Balances of your sites',
    allow: 'record:read',
    query: SiteQuery,
    answer: { status: 200, schema: z.array(BalanceAnswer) },
    problems: [404],
    handle: ({ actor, query }) => listBalances(actor, query),
  }),
  endpoint({
    method: 'get',
    path: '/balances/:balanceId',
    summary: 'One balance with its checks',
    allow: 'record:read',
    params: BalanceId,
    answer: { status: 200, schema: BalanceDetail },
    problems: [404],
    handle: ({ actor, params }) => readBalance(actor, params.balanceId),
  }),
  endpoint({
    method: 'post',
    path: '/balances',
    summary: 'Add a balance',
    allow: 'balance:write',
    idempotent: true,
    body: CreateBalance,
    answer: { status: 201, schema: BalanceAnswer },
    problems: [404, 409],
    handle: ({ actor, body }) => createBalance(actor, body),
  }),
  endpoint({
    method: 'put',
    path: '/balances/:balanceId',
    summary: 'Change a balance, take it out of use or bring it back',
    allow: 'balance:write',
    params: BalanceId,
    body: UpdateBalance,
    answer: { status: 200, schema: BalanceAnswer },
    problems: [404, 409],
    handle: ({ actor, params, body }) => updateBalance(actor, params.balanceId, body),
  }),
  endpoint({
    method: 'post',
    path: '/balances/:balanceId/checks',
    summary: 'Record an external check',
    allow: 'balance:check',
    idempotent: true,
    params: BalanceId,
    body: RecordBalanceCheck,
    answer: { status: 201, schema: BalanceDetail },
    problems: [404],
    handle: ({ actor, params, body }) => recordBalanceCheck(actor, params.balanceId, body),
  }),
]
