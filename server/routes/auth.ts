import { z } from 'zod'
import { ChangePassPhrase, SessionSummary, SignedIn, SignIn } from '#shared/schemas/auth.ts'
import type { Config } from '../config.ts'
import { ForbiddenError } from '../errors.ts'
import { endpoint, openEndpoint, type Endpoint } from '../http/endpoint.ts'
import { changePassPhrase } from '../services/sign-in/change-pass-phrase.ts'
import { endOwnSession, listOwnSessions, refreshSession, signOut } from '../services/sign-in/sessions.ts'
import { signIn } from '../services/sign-in/sign-in.ts'

const SessionId = z.object({ sessionId: z.uuid() })

/** Sign-in, the life of a session, and one's own pass-phrase. */
export function authEndpoints({ accessTokenKeys }: Config): Endpoint[] {
  return [
    openEndpoint({
      method: 'post',
      path: '/auth/sign-in',
      summary: 'Start a session',
      body: SignIn,
      answer: { status: 200, schema: SignedIn },
      problems: [401, 429],
      handle: ({ body, client }) => signIn(body, client, accessTokenKeys),
    }),
    openEndpoint({
      method: 'post',
      path: '/auth/refresh',
      summary: 'Exchange the refresh cookie for a new access token',
      answer: { status: 200, schema: SignedIn },
      problems: [401, 403],
      handle: ({ client }) => {
        // A cookie alone proves nothing about who sent the request; a foreign page cannot add this header.
        if (!client.isOwnPage) throw new ForbiddenError('own-record')
        return refreshSession(client, accessTokenKeys)
      },
    }),
    endpoint({
      method: 'post',
      path: '/auth/sign-out',
      summary: 'End this session',
      allow: 'signed-in',
      answer: { status: 204 },
      handle: async ({ actor, client }) => {
        await signOut(actor, client)
        return undefined
      },
    }),
    endpoint({
      method: 'get',
      path: '/auth/sessions',
      summary: 'Your own sessions that still live',
      allow: 'signed-in',
      answer: { status: 200, schema: z.array(SessionSummary) },
      handle: ({ actor }) => listOwnSessions(actor),
    }),
    endpoint({
      method: 'delete',
      path: '/auth/sessions/:sessionId',
      summary: 'End one of your own sessions',
      allow: 'signed-in',
      params: SessionId,
      answer: { status: 204 },
      problems: [404],
      handle: async ({ actor, params, client }) => {
        await endOwnSession(actor, params.sessionId, client)
        return undefined
      },
    }),
    endpoint({
      method: 'put',
      path: '/auth/pass-phrase',
      summary: 'Change your own pass-phrase',
      allow: 'signed-in',
      body: ChangePassPhrase,
      answer: { status: 204 },
      problems: [429],
      handle: async ({ actor, body, client }) => {
        await changePassPhrase(actor, body, client)
        return undefined
      },
    }),
  ]
}
