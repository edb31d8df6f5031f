import { z } from 'zod'
import {
  CreateUser,
  FirstPassPhrase,
  RenameUser,
  ReplacePassPhrase,
  SetRoles,
  SetUserActive,
  UserAnswer,
  UserId,
} from '#shared/schemas/users.ts'
import { endpoint } from '../http/endpoint.ts'
import { renameUser, setRoles, setUserActive } from '../services/people/change-user.ts'
import { createUser, replacePassPhrase } from '../services/people/create-user.ts'
import { listUsers } from '../services/people/list-users.ts'

/** People, their roles by site, and their first pass-phrases. No answer that holds a pass-phrase is kept under an
 * idempotency key: a second try is refused by the unique address, or makes a new pass-phrase. */
export const userEndpoints = [
  endpoint({
    method: 'get',
    path: '/users',
    summary: 'People at the sites that you administer',
    allow: 'user:write',
    answer: { status: 200, schema: z.array(UserAnswer) },
    handle: ({ actor }) => listUsers(actor),
  }),
  endpoint({
    method: 'post',
    path: '/users',
    summary: 'Add a person; the answer shows the first pass-phrase once',
    allow: 'user:write',
    body: CreateUser,
    answer: { status: 201, schema: FirstPassPhrase },
    problems: [404, 409],
    handle: ({ actor, body }) => createUser(actor, body),
  }),
  endpoint({
    method: 'put',
    path: '/users/:userId/name',
    summary: 'Change the printed name of a person',
    allow: 'user:write',
    params: UserId,
    body: RenameUser,
    answer: { status: 200, schema: UserAnswer },
    problems: [404, 409],
    handle: ({ actor, params, body }) => renameUser(actor, params.userId, body),
  }),
  endpoint({
    method: 'put',
    path: '/users/:userId/roles',
    summary: 'Set all roles of a person at one site',
    allow: 'user:write',
    params: UserId,
    body: SetRoles,
    answer: { status: 200, schema: UserAnswer },
    problems: [404, 409],
    handle: ({ actor, params, body, client }) => setRoles(actor, params.userId, body, client),
  }),
  endpoint({
    method: 'put',
    path: '/users/:userId/activity',
    summary: 'Let a person sign in, or not',
    allow: 'user:write',
    params: UserId,
    body: SetUserActive,
    answer: { status: 200, schema: UserAnswer },
    problems: [404, 409],
    handle: ({ actor, params, body, client }) => setUserActive(actor, params.userId, body, client),
  }),
  endpoint({
    method: 'post',
    path: '/users/:userId/first-pass-phrase',
    summary: 'Replace a lost pass-phrase; the answer shows the new first one once',
    allow: 'user:write',
    params: UserId,
    body: ReplacePassPhrase,
    answer: { status: 200, schema: FirstPassPhrase },
    problems: [404, 409],
    handle: ({ actor, params, body, client }) => replacePassPhrase(actor, params.userId, body, client),
  }),
]
