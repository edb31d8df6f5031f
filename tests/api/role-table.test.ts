import { beforeAll, describe, expect, test } from 'vitest'
import { allEndpoints } from '#server/routes/index.ts'
import { mayDo, ROLES, type Role } from '#shared/permissions.ts'
import { buildSite } from '../build.ts'
import { startApi, type Api, type Caller } from './harness.ts'

let api: Api
const callers = new Map<Role, Caller>()
beforeAll(async () => {
  api = await startApi()
  const site = await buildSite()
  for (const role of ROLES) callers.set(role, await api.as(site, role))
})

const NOWHERE = '018f0000-0000-7000-8000-000000000000'
const addressOf = (path: string): string => `/api${path.replace(/:ordinal/g, '1').replace(/:week/g, '2026-W01').replace(/:\w+/g, NOWHERE)}`

/** Known to vitest before the API runs, so the list is made without a configuration that matters here. */
const endpoints = allEndpoints({
  environment: 'test',
  http: { host: '127.0.0.1', port: 1, publicOrigin: undefined, trustProxy: false },
  database: { host: '', port: 1, name: '', ssl: false, run: { user: '', password: '' }, migrate: { user: '', password: '' } },
  accessTokenKeys: [],
  isDemo: false,
  dataDirectory: '',
  smtp: undefined,
  mailFrom: '',
  isMailCatcherOn: false,
  logLevel: 'silent',
})

/** Ending one's own session would take the caller away from the tests that follow. */
const guarded = endpoints.filter(({ allow, path }) => allow !== 'anyone' && path !== '/auth/sign-out')

describe.each(guarded.map((endpoint) => [endpoint.method, endpoint.path, endpoint] as const))('%s %s', (method, path, endpoint) => {
  test('refuses who is signed out', async () => {
    expect((await api.anonymous[method](addressOf(path))).status).toBe(401)
  })

  test.each(ROLES)('lets %s in or not, as the permission table says', async (role) => {
    const caller = callers.get(role)
    if (!caller) throw new Error(`No caller for ${role}.`)
    const { status } = await caller[method](addressOf(path))
    const isAllowed = endpoint.allow === 'signed-in' || endpoint.allow === 'anyone' || mayDo([role], endpoint.allow)
    expect(status === 403).toBe(!isAllowed)
    expect(status).not.toBe(401)
    expect(status).toBeLessThan(500)
  })
})

test('only sign-in, refresh, health and the program’s name answer without a session', () => {
  const open = endpoints.filter(({ allow }) => allow === 'anyone').map(({ path }) => path)
  expect(open.sort()).toEqual(['/about', '/auth/refresh', '/auth/sign-in', '/health/live', '/health/ready'])
})
