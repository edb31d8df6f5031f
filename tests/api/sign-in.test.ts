import request from 'supertest'
import { beforeAll, describe, expect, test } from 'vitest'
import { REFRESH_COOKIE } from '#server/http/express-client.ts'
import { Session } from '#server/models/session.ts'
import type { Site } from '#server/models/site.ts'
import { User } from '#server/models/user.ts'
import { buildSite, buildUser, PASS_PHRASE } from '../build.ts'
import { startApi, type Api } from './harness.ts'

let api: Api
let site: Site
beforeAll(async () => {
  api = await startApi()
  site = await buildSite()
})

const signIn = (email: string, password: string) => request(api.app).post('/api/auth/sign-in').send({ email, password })

function refreshCookie(response: request.Response): string {
  const cookies = response.get('Set-Cookie') ?? []
  return cookies.find((cookie) => cookie.startsWith(REFRESH_COOKIE))?.split(';')[0] ?? ''
}

const refresh = (cookie: string) => request(api.app).post('/api/auth/refresh').set('Cookie', cookie).set('X-Scruple-Refresh', '1')

describe('signing in', () => {
  test('an unknown address and a wrong pass-phrase are refused alike', async () => {
    const user = await buildUser({ site, roles: ['operator'], passPhrase: PASS_PHRASE })
    const unknown = await signIn('nobody@ashlarfen.example', PASS_PHRASE)
    const wrong = await signIn(user.email, 'not the right phrase')
    expect(unknown.status).toBe(401)
    expect(wrong.status).toBe(401)
    expect({ ...unknown.body, requestId: '' }).toEqual({ ...wrong.body, requestId: '' })
  })

  test('after five failures in a row the account has to wait, even with the right pass-phrase', async () => {
    const user = await buildUser({ site, roles: ['operator'], passPhrase: PASS_PHRASE })
    for (let failure = 1; failure <= 5; failure++) await signIn(user.email, 'not the right phrase')
    const blocked = await signIn(user.email, PASS_PHRASE)
    expect(blocked.status).toBe(429)
    expect(Number(blocked.get('Retry-After'))).toBeGreaterThan(0)
  })

  test('a deactivated account cannot sign in', async () => {
    const user = await buildUser({ site, roles: ['operator'], passPhrase: PASS_PHRASE })
    await user.update({ isActive: false })
    expect((await signIn(user.email, PASS_PHRASE)).status).toBe(401)
  })

  test('the answer names the person and the roles; the cookie is Secure, HttpOnly, SameSite=Strict and for this host alone', async () => {
    const user = await buildUser({ site, roles: ['qa', 'viewer'], passPhrase: PASS_PHRASE })
    const response = await signIn(` ${user.email.toUpperCase()} `, PASS_PHRASE)
    expect(response.status).toBe(200)
    expect(response.body.user).toMatchObject({ id: user.id, sites: [{ id: site.id, roles: ['qa', 'viewer'] }] })
    expect(response.get('Set-Cookie')?.[0]).toMatch(/^__Host-scruple-refresh=.+; Path=\/; Expires=.+; HttpOnly; Secure; SameSite=Strict$/)
    expect(JSON.stringify(response.body)).not.toContain('efresh')
  })
})

describe('the life of a session', () => {
  test('a refresh needs the header that a foreign page cannot send', async () => {
    const user = await buildUser({ site, roles: ['qa'], passPhrase: PASS_PHRASE })
    const cookie = refreshCookie(await signIn(user.email, PASS_PHRASE))
    expect((await request(api.app).post('/api/auth/refresh').set('Cookie', cookie)).status).toBe(403)
  })

  test('a refresh rotates the token; the old one used later ends the whole family', async () => {
    const user = await buildUser({ site, roles: ['qa'], passPhrase: PASS_PHRASE })
    const first = refreshCookie(await signIn(user.email, PASS_PHRASE))
    const refreshed = await refresh(first)
    const second = refreshCookie(refreshed)
    expect(refreshed.status).toBe(200)
    expect(second).not.toBe(first)
    await Session.update({ rotatedAt: new Date(Date.now() - 60_000) }, { where: { userId: user.id } })
    expect((await refresh(first)).status).toBe(401)
    expect((await refresh(second)).status).toBe(401)
    const me = await request(api.app).get('/api/auth/sessions').set('Authorization', `Bearer ${String(refreshed.body.accessToken)}`)
    expect(me.status).toBe(401)
  })

  test('two tabs that refresh at the same moment both stay signed in', async () => {
    const user = await buildUser({ site, roles: ['qa'], passPhrase: PASS_PHRASE })
    const cookie = refreshCookie(await signIn(user.email, PASS_PHRASE))
    const both = await Promise.all([refresh(cookie), refresh(cookie)])
    expect(both.map(({ status }) => status)).toEqual([200, 200])
  })

  test('an hour without a sign of life ends it', async () => {
    const user = await buildUser({ site, roles: ['qa'], passPhrase: PASS_PHRASE })
    const cookie = refreshCookie(await signIn(user.email, PASS_PHRASE))
    await Session.update({ lastUsedAt: new Date(Date.now() - 3_700_000) }, { where: { userId: user.id } })
    expect((await refresh(cookie)).status).toBe(401)
  })

  test('own sessions are seen and ended, those of others are not', async () => {
    const mine = await api.as(site, 'engineer')
    const elsewhere = await api.signIn(mine.user)
    const other = await api.as(site, 'engineer')
    const sessions = (await mine.get('/api/auth/sessions')).body as { id: string; isCurrent: boolean }[]
    expect(sessions).toHaveLength(2)
    const second = sessions.find(({ isCurrent }) => !isCurrent)?.id ?? ''
    expect((await other.delete(`/api/auth/sessions/${second}`)).status).toBe(404)
    expect((await mine.delete(`/api/auth/sessions/${second}`)).status).toBe(204)
    expect((await elsewhere.get('/api/auth/sessions')).status).toBe(401)
    expect((await mine.get('/api/auth/sessions')).status).toBe(200)
  })

  test('signing out takes effect at the next request', async () => {
    const caller = await api.as(site, 'engineer')
    expect((await caller.post('/api/auth/sign-out')).status).toBe(204)
    expect((await caller.get('/api/auth/sessions')).status).toBe(401)
  })
})

describe('changing the pass-phrase', () => {
  test.each([
    ['too short', 'short phrase', /at least 15 characters; this one has 12/],
    ['too long', 'x1 '.repeat(43), /at most 128 characters/],
    ['too common', 'correct horse battery staple', /most common/],
    ['repeating', 'aaaaaaaaaaaaaaaaaaaa', /too few different/],
  ])('%s is refused with its reason', async (_why, next, reason) => {
    const user = await buildUser({ site, roles: ['engineer'], passPhrase: PASS_PHRASE })
    const caller = await api.signIn(user)
    const response = await caller.put('/api/auth/pass-phrase', { current: PASS_PHRASE, next })
    expect(response.status).toBe(422)
    expect(response.body.issues).toEqual([{ pointer: '/next', message: expect.stringMatching(reason) as string }])
  })

  test('needs the present one, and ends every other session', async () => {
    const user = await buildUser({ site, roles: ['engineer'], passPhrase: PASS_PHRASE })
    const here = await api.signIn(user)
    const elsewhere = await api.signIn(user)
    const next = 'seven sieves were shaken'
    expect((await here.put('/api/auth/pass-phrase', { current: 'not the right phrase', next })).status).toBe(422)
    expect((await here.put('/api/auth/pass-phrase', { current: PASS_PHRASE, next })).status).toBe(204)
    expect((await elsewhere.get('/api/auth/sessions')).status).toBe(401)
    expect((await here.get('/api/auth/sessions')).status).toBe(200)
    expect((await signIn(user.email, next)).status).toBe(200)
    expect((await User.findByPk(user.id))?.passPhraseHash).not.toContain(next)
  })
})

test('a token signed with another key, or with none, is refused', async () => {
  const header = Buffer.from('{"alg":"none","typ":"JWT"}').toString('base64url')
  const payload = Buffer.from(JSON.stringify({ sub: site.id, sid: site.id, aud: 'scruple-api', iss: 'scruple', exp: 4_000_000_000 })).toString('base64url')
  const response = await request(api.app).get('/api/auth/sessions').set('Authorization', `Bearer ${header}.${payload}.x`)
  expect(response.status).toBe(401)
})
