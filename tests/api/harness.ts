import { randomUUID } from 'node:crypto'
import { mkdirSync } from 'node:fs'
import type { Express } from 'express'
import { pino } from 'pino'
import request, { type Test } from 'supertest'
import { inject } from 'vitest'
import { createApp } from '#server/app.ts'
import { loadConfig, type Config } from '#server/config.ts'
import { connectDatabase } from '#server/database/database.ts'
import { issueAccessToken } from '#server/http/access-token.ts'
import { newId } from '#server/models/new-id.ts'
import { Session } from '#server/models/session.ts'
import type { Site } from '#server/models/site.ts'
import type { User } from '#server/models/user.ts'
import type { Role } from '#shared/permissions.ts'
import { buildUser } from '../build.ts'

/** A person's way to the API: every request carries their token, every POST a fresh idempotency key unless one is given. */
export interface Caller {
  user: User
  get(path: string): Test
  post(path: string, body?: object, idempotencyKey?: string): Test
  put(path: string, body?: object): Test
  patch(path: string, body?: object): Test
  delete(path: string): Test
}

export interface Api {
  app: Express
  config: Config
  /** A new person with these roles at the site, signed in. */
  as(site: Site, ...roles: Role[]): Promise<Caller>
  /** The same person again, in a new session. */
  signIn(user: User): Promise<Caller>
  anonymous: Omit<Caller, 'user'>
}

let shared: Api | undefined

function callerFor(app: Express, token: string | undefined): Omit<Caller, 'user'> {
  const authorised = (test: Test): Test => (token === undefined ? test : test.set('Authorization', `Bearer ${token}`))
  return {
    get: (path) => authorised(request(app).get(path)),
    post: (path, body, key = randomUUID()) => authorised(request(app).post(path)).set('Idempotency-Key', key).send(body),
    put: (path, body) => authorised(request(app).put(path)).send(body),
    patch: (path, body) => authorised(request(app).patch(path)).send(body),
    delete: (path) => authorised(request(app).delete(path)),
  }
}

async function startSession(user: User): Promise<string> {
  const id = newId()
  const now = new Date()
  const times = { rotatedAt: now, startedAt: now, lastUsedAt: now, expiresAt: new Date(now.getTime() + 3_600_000) }
  await Session.create({ id, userId: user.id, refreshHash: '0'.repeat(64), address: '127.0.0.1', device: 'test', ...times })
  return id
}

/** The application on the real database, once for all test files of a run. */
export function startApi(): Promise<Api> {
  shared ??= createApi()
  return Promise.resolve(shared)
}

function createApi(): Api {
  const config = loadConfig(inject('environment'))
  mkdirSync(`${config.dataDirectory}/uploads`, { recursive: true })
  connectDatabase(config.database)
  const app = createApp(config, pino({ level: config.logLevel }))
  const signIn = async (user: User): Promise<Caller> => {
    const sessionId = await startSession(user)
    return { user, ...callerFor(app, issueAccessToken(config.accessTokenKeys, { userId: user.id, sessionId })) }
  }
  return {
    app,
    config,
    as: async (site, ...roles) => signIn(await buildUser({ site, roles })),
    signIn,
    anonymous: callerFor(app, undefined),
  }
}
