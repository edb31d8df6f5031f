import { z } from 'zod'
import { Id } from '#shared/schemas/field.ts'
import { AcknowledgeSignal, CloseSignal, SignalAnswer, SignalQuery } from '#shared/schemas/signals.ts'
import { endpoint } from '../http/endpoint.ts'
import { acknowledgeSignal, closeSignal, listSignals } from '../services/signals/answer-signal.ts'

const SignalId = z.object({ signalId: Id })

/** What needs somebody, and what was done about it. */
export const signalEndpoints = [
  endpoint({
    method: 'get',
    path: '/signals',
    summary: 'Signals of your sites, newest first',
    allow: 'record:read',
    query: SignalQuery,
    answer: { status: 200, schema: z.array(SignalAnswer) },
    handle: ({ actor, query }) => listSignals(actor, query),
  }),
  endpoint({
    method: 'post',
    path: '/signals/:signalId/acknowledgement',
    summary: 'Say that you have seen a signal and act',
    allow: 'signal:acknowledge',
    idempotent: true,
    params: SignalId,
    body: AcknowledgeSignal,
    answer: { status: 200, schema: SignalAnswer },
    problems: [404, 409],
    handle: ({ actor, params, body }) => acknowledgeSignal(actor, params.signalId, body),
  }),
  endpoint({
    method: 'post',
    path: '/signals/:signalId/closure',
    summary: 'Close a signal with its cause and what was done',
    allow: 'signal:close',
    idempotent: true,
    params: SignalId,
    body: CloseSignal,
    answer: { status: 200, schema: SignalAnswer },
    problems: [404, 409],
    handle: ({ actor, params, body }) => closeSignal(actor, params.signalId, body),
  }),
]
