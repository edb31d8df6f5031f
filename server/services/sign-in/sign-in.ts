import type { SignedIn, SignIn } from '#shared/schemas/auth.ts'
import { inTransaction } from '../../database/in-transaction.ts'
import { SignInRefusedError } from '../../errors.ts'
import { issueAccessToken } from '../../http/access-token.ts'
import type { Client } from '../../http/client.ts'
import { newId } from '../../models/new-id.ts'
import { Session } from '../../models/session.ts'
import { User } from '../../models/user.ts'
import { appendAudit, chainOf } from '../audit.ts'
import { hashPassPhrase, pretendToVerify, verifyPassPhrase } from './pass-phrase-hash.ts'
import { newRefreshToken } from './refresh-token.ts'
import { presentSignedInUser } from './signed-in-user.ts'
import { countFailure, forgetFailures, refuseWhileBlocked, throttleSubjects } from './throttle.ts'

/** A shift: after this a person signs in again, however busy. */
const SESSION_LIFE_MS = 12 * 3_600_000

/** One spelling for one address. */
export function normaliseEmail(email: string): string {
  return email.normalize('NFC').trim().toLowerCase()
}

/** The active person whose pass-phrase this is; failures are counted and audited, and look alike for known and unknown addresses. */
async function verifiedUser({ email, password }: SignIn, client: Client): Promise<User> {
  const now = new Date()
  const subjects = throttleSubjects(normaliseEmail(email), client.address)
  await refuseWhileBlocked([subjects.account, subjects.address], now)
  const user = await User.findOne({ where: { email: normaliseEmail(email), isActive: true } })
  const { isRight, needsUpgrade } = user ? await verifyPassPhrase(password, user.passPhraseHash) : { isRight: false, needsUpgrade: false }
  if (!user) await pretendToVerify(password)
  if (!user || !isRight) {
    await inTransaction(async () => {
      await countFailure(subjects, now)
      await appendAudit({
        actor: unknownActor(client, user),
        chain: chainOf.signIns,
        action: 'sign-in:refused',
        record: { kind: 'user', id: user?.id ?? 'unknown' },
      })
    })
    throw new SignInRefusedError()
  }
  if (needsUpgrade) await user.update({ passPhraseHash: await hashPassPhrase(password) })
  await forgetFailures(subjects.account)
  return user
}

function unknownActor(client: Client, user: User | null): { userId: string | null; name: string; terminal: string; requestId: string } {
  return { userId: user?.id ?? null, name: user?.name ?? 'unknown', terminal: terminalOf(client), requestId: client.requestId }
}

export function terminalOf(client: Client): string {
  return `${client.address} ${client.device}`.slice(0, 200)
}

/** Starts a session: a refresh token in the cookie, an access token in the answer. */
export async function signIn(request: SignIn, client: Client, accessTokenKeys: readonly string[]): Promise<SignedIn> {
  const user = await verifiedUser(request, client)
  const sessionId = newId()
  const { token, hash } = newRefreshToken(sessionId)
  const now = new Date()
  const expiresAt = new Date(now.getTime() + SESSION_LIFE_MS)
  await inTransaction(async () => {
    await Session.create({
      id: sessionId,
      userId: user.id,
      refreshHash: hash,
      rotatedAt: now,
      startedAt: now,
      lastUsedAt: now,
      expiresAt,
      address: client.address,
      device: client.device,
    })
    const actor = { userId: user.id, name: user.name, terminal: terminalOf(client), requestId: client.requestId }
    await appendAudit({ actor, chain: chainOf.signIns, action: 'sign-in', record: { kind: 'session', id: sessionId } })
  })
  client.setRefreshToken(token, expiresAt)
  return { accessToken: issueAccessToken(accessTokenKeys, { userId: user.id, sessionId }), user: await presentSignedInUser(user) }
}
