import { beforeAll, expect, test } from 'vitest'
import { AuditEntry } from '#server/models/audit-entry.ts'
import { IdempotencyKey } from '#server/models/idempotency-key.ts'
import type { Site } from '#server/models/site.ts'
import { UserRole } from '#server/models/user-role.ts'
import { buildSite, buildUser } from '../build.ts'
import { startApi, type Api, type Caller } from './harness.ts'

let api: Api
let site: Site
let administrator: Caller
beforeAll(async () => {
  api = await startApi()
  site = await buildSite()
  administrator = await api.as(site, 'administrator')
})

let last = 0
const newEmail = (): string => `p${String((last += 1))}-${String(Date.now())}@ashlarfen.example`
const person = (fields: object = {}) => ({ siteId: site.id, email: newEmail(), name: 'Operator 9', roles: ['operator'], ...fields })

test.each([
  [{ email: 'nobody' }, '/email'],
  [{ roles: [] }, '/roles'],
  [{ roles: ['operator', 'operator'] }, '/roles'],
  [{ roles: ['owner'] }, '/roles/0'],
  [{ name: ' ' }, '/name'],
  [{ isActive: true }, '/'],
])('%j is refused at %s', async (fields, pointer) => {
  const response = await administrator.post('/api/users', person(fields))
  expect(response.status).toBe(422)
  expect(response.body.issues.map((issue: { pointer: string }) => issue.pointer)).toEqual([pointer])
})

test('an address belongs to one person, however it is typed', async () => {
  const email = newEmail()
  const made = await administrator.post('/api/users', person({ email: ` ${email.toUpperCase()} ` }))
  expect(made.body.user.email).toBe(email)
  // The full-width letter p is the same letter after compatibility normalisation.
  const again = await administrator.post('/api/users', person({ email: email.replace('p', 'ｐ') }))
  expect(again.status).toBe(409)
  expect(again.body.issues[0].pointer).toBe('/email')
})

test('the first pass-phrase signs in, and is kept nowhere', async () => {
  const made = await administrator.post('/api/users', person())
  expect(made.status).toBe(201)
  const { user, firstPassPhrase } = made.body as { user: { id: string; email: string }; firstPassPhrase: string }
  expect(user).toMatchObject({ mustChangePassPhrase: true, isActive: true })
  const signedIn = await api.anonymous.post('/api/auth/sign-in', { email: user.email, password: firstPassPhrase })
  expect(signedIn.status).toBe(200)
  const kept = JSON.stringify(await IdempotencyKey.findAll({ where: { userId: administrator.user.id } }))
  const audited = JSON.stringify(await AuditEntry.findAll({ where: { recordId: user.id } }))
  expect(`${kept}${audited}`).not.toContain(firstPassPhrase)
})

test('new roles end the sessions of the person and hold at the next sign-in', async () => {
  const user = await buildUser({ site, roles: ['operator'] })
  const caller = await api.signIn(user)
  expect((await caller.get('/api/machines')).status).toBe(200)
  const path = `/api/users/${user.id}/roles`
  const change = { siteId: site.id, roles: ['fitter', 'viewer'], version: 1 }
  expect((await administrator.put(path, { ...change, reason: ' ' })).status).toBe(422)
  const answer = await administrator.put(path, { ...change, reason: 'moved to the workshop' })
  expect(answer.body).toMatchObject({ version: 2, openSessions: 0, sites: [{ siteId: site.id, roles: ['fitter', 'viewer'] }] })
  expect((await caller.get('/api/machines')).status).toBe(401)
  const stale = await administrator.put(path, { ...change, reason: 'a second time' })
  expect(stale.status).toBe(409)
  expect(JSON.stringify(stale.body)).not.toMatch(/passPhraseHash/i)
  const entry = await AuditEntry.findOne({ where: { recordId: user.id, action: 'user:set-roles' } })
  expect(entry).toMatchObject({ chain: 'people', oldValues: { roles: ['operator'] }, newValues: { roles: ['fitter', 'viewer'] } })
})

test('an administrator gives roles only where they administer', async () => {
  const elsewhere = await buildSite()
  const user = await buildUser({ site, roles: ['operator'] })
  const body = { siteId: elsewhere.id, roles: ['administrator'], version: 1, reason: 'a way in' }
  expect((await administrator.put(`/api/users/${user.id}/roles`, body)).status).toBe(404)
  expect((await administrator.post('/api/users', person({ siteId: elsewhere.id }))).status).toBe(404)
  const stranger = await buildUser({ site: elsewhere, roles: ['operator'] })
  expect((await administrator.put(`/api/users/${stranger.id}/roles`, { ...body, siteId: site.id })).status).toBe(404)
  const listed = (await administrator.get('/api/users')).body as { id: string }[]
  expect(listed.map(({ id }) => id)).not.toContain(stranger.id)
})

test('who works at a second site too is not deactivated, renamed or reset from one of them', async () => {
  const elsewhere = await buildSite()
  const user = await buildUser({ site, roles: ['operator'] })
  await UserRole.create({ userId: user.id, siteId: elsewhere.id, role: 'operator' })
  const change = { version: 1, reason: 'left the site' }
  expect((await administrator.put(`/api/users/${user.id}/activity`, { ...change, isActive: false })).status).toBe(403)
  expect((await administrator.put(`/api/users/${user.id}/name`, { ...change, name: 'Else' })).status).toBe(403)
  expect((await administrator.post(`/api/users/${user.id}/first-pass-phrase`, change)).status).toBe(403)
})

test('a deactivated person is out at once, is kept, and can come back', async () => {
  const user = await buildUser({ site, roles: ['operator'] })
  const caller = await api.signIn(user)
  const path = `/api/users/${user.id}/activity`
  const out = await administrator.put(path, { isActive: false, version: 1, reason: 'left the site' })
  expect(out.body).toMatchObject({ isActive: false, openSessions: 0 })
  expect((await caller.get('/api/machines')).status).toBe(401)
  const back = await administrator.put(path, { isActive: true, version: 2, reason: 'came back' })
  expect(back.body).toMatchObject({ isActive: true, sites: [{ roles: ['operator'] }] })
})

test('nobody locks themselves out: not by activity, not by roles, not by a new first pass-phrase', async () => {
  const own = await api.as(site, 'administrator')
  const path = `/api/users/${own.user.id}`
  const change = { version: 1, reason: 'for the test' }
  expect((await own.put(`${path}/activity`, { ...change, isActive: false })).body.type).toBe('/problems/own-account')
  expect((await own.put(`${path}/roles`, { ...change, siteId: site.id, roles: ['viewer'] })).body.type).toBe('/problems/own-role')
  expect((await own.post(`${path}/first-pass-phrase`, change)).body.type).toBe('/problems/own-account')
  expect((await own.get('/api/users')).status).toBe(200)
})

test('a replaced pass-phrase ends every session', async () => {
  const user = await buildUser({ site, roles: ['operator'] })
  const caller = await api.signIn(user)
  const answer = await administrator.post(`/api/users/${user.id}/first-pass-phrase`, { version: 1, reason: 'forgotten' })
  expect(answer.status).toBe(200)
  expect((answer.body.firstPassPhrase as string).length).toBeGreaterThanOrEqual(15)
  expect((await caller.get('/api/machines')).status).toBe(401)
})

test('without the role nobody sees the people', async () => {
  const engineer = await api.as(site, 'engineer')
  expect((await engineer.get('/api/users')).status).toBe(403)
})
