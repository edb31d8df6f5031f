import type { SessionSummary, SignedIn } from '#shared/schemas/auth.ts'
import { inTransaction } from '../../database/in-transaction.ts'
import { NotFoundError, SignedOutError } from '../../errors.ts'
import { issueAccessToken } from '../../http/access-token.ts'
import type { Actor } from '../../http/actor.ts'
import type { Client } from '../../http/client.ts'
import { Session } from '../../models/session.ts'
import { User } from '../../models/user.ts'
import { appendAudit, chainOf } from '../audit.ts'
import { isSameHash, newRefreshToken, refreshTokenHash, sessionOfToken } from './refresh-token.ts'
import { terminalOf } from './sign-in.ts'
import { presentSignedInUser } from './signed-in-user.ts'

/** Two tabs of one browser share the cookie and may refresh at the same moment; the one that comes second is not a thief. */
const SAME_MOMENT_MS = 10_000
/** After an hour without a sign of life the session is over (requirement E15). */
const IDLE_LIMIT_MS = 3_600_000

async function endSession(session: Session, reason: string, client: Client): Promise<void> {
  await session.update({ endedAt: new Date(), endReason: reason })
  const user = await User.findByPk(session.userId)
  const actor = { userId: session.userId, name: user?.name ?? 'unknown', terminal: terminalOf(client), requestId: client.requestId }
  await appendAudit({ actor, chain: chainOf.signIns, action: `session:${reason}`, record: { kind: 'session', id: session.id } })
}

type Rotation = { kind: 'refused' } | { kind: 'rotated'; session: Session; token: string } | { kind: 'same-moment'; session: Session }

async function rotate(token: string, client: Client): Promise<Rotation> {
  const sessionId = sessionOfToken(token)
  if (sessionId === undefined) return { kind: 'refused' }
  return inTransaction(async (transaction) => {
    const session = await Session.findByPk(sessionId, { lock: transaction.LOCK.UPDATE })
    const now = new Date()
    if (!session || session.endedAt !== null || session.expiresAt <= now) return { kind: 'refused' }
    const hash = refreshTokenHash(token)
    const isPrevious = isSameHash(hash, session.previousRefreshHash)
    if (isPrevious && now.getTime() - session.rotatedAt.getTime() <= SAME_MOMENT_MS) return { kind: 'same-moment', session }
    if (!isSameHash(hash, session.refreshHash)) {
      // An old token means that somebody has a copy: nobody keeps the family.
      await endSession(session, 'token-reused', client)
      return { kind: 'refused' }
    }
    if (now.getTime() - session.lastUsedAt.getTime() > IDLE_LIMIT_MS) {
      await endSession(session, 'idle', client)
      return { kind: 'refused' }
    }
    const next = newRefreshToken(session.id)
    await session.update({ previousRefreshHash: session.refreshHash, refreshHash: next.hash, rotatedAt: now, lastUsedAt: now })
    return { kind: 'rotated', session, token: next.token }
  })
}

/** Exchanges the refresh token of the cookie for a new one and a new access token; an old one ends the whole family. */
export async function refreshSession(client: Client, accessTokenKeys: readonly string[]): Promise<SignedIn> {
  const rotation: Rotation = client.refreshToken === undefined ? { kind: 'refused' } : await rotate(client.refreshToken, client)
  const user = rotation.kind === 'refused' ? null : await User.findOne({ where: { id: rotation.session.userId, isActive: true } })
  if (rotation.kind === 'refused' || !user) {
    client.clearRefreshToken()
    throw new SignedOutError()
  }
  if (rotation.kind === 'rotated') client.setRefreshToken(rotation.token, rotation.session.expiresAt)
  const accessToken = issueAccessToken(accessTokenKeys, { userId: user.id, sessionId: rotation.session.id })
  return { accessToken, user: await presentSignedInUser(user) }
}

/** Ends the session of the caller. */
export async function signOut(actor: Actor, client: Client): Promise<void> {
  client.clearRefreshToken()
  await endOwnSession(actor, actor.sessionId, client, 'signed-out')
}

/** The caller's sessions that still live, newest first. */
export async function listOwnSessions(actor: Actor): Promise<SessionSummary[]> {
  const sessions = await Session.findAll({ where: { userId: actor.userId, endedAt: null }, order: [['startedAt', 'DESC']] })
  const now = new Date()
  return sessions
    .filter(({ expiresAt }) => expiresAt > now)
    .map(({ id, startedAt, lastUsedAt, address, device }) => ({
      id,
      startedAt: startedAt.toISOString(),
      lastUsedAt: lastUsedAt.toISOString(),
      address,
      device,
      isCurrent: id === actor.sessionId,
    }))
}

/** Ends one of the caller's own sessions, on whatever device it is. */
export async function endOwnSession(actor: Actor, sessionId: string, client: Client, reason = 'ended-by-owner'): Promise<void> {
  await inTransaction(async () => {
    const session = await Session.findOne({ where: { id: sessionId, userId: actor.userId, endedAt: null } })
    if (!session) throw new NotFoundError('session', sessionId)
    await endSession(session, reason, client)
  })
}

/** Ends every session of a person, but for one that may stay (after a change of pass-phrase). */
export async function endSessionsOf(userId: string, reason: string, client: Client, exceptSessionId?: string): Promise<void> {
  const sessions = await Session.findAll({ where: { userId, endedAt: null } })
  for (const session of sessions) if (session.id !== exceptSessionId) await endSession(session, reason, client)
}
