import { createHash } from 'node:crypto'
import { ConflictError, SignedOutError } from '../errors.ts'
import type { Actor } from '../http/actor.ts'
import type { Client } from '../http/client.ts'
import { Session } from '../models/session.ts'
import { Signature } from '../models/signature.ts'
import { canonicalJson } from './canonical-json.ts'
import { requireOwnPassPhrase } from './sign-in/change-pass-phrase.ts'

const DOMAIN = 'scruple/signed-record/1'

/** The hash of what was shown when somebody signed: SHA-256 over a domain and the canonical text. */
export function contentHash(content: object): string {
  return createHash('sha256')
    .update(`${DOMAIN}\n${canonicalJson(content)}`)
    .digest('hex')
}

export interface SignRequest {
  siteId: string
  meaning: string
  reason?: string
  record: { kind: string; id: string }
  content: object
  password: string
  client: Client
}

/**
 * An electronic signature: the person's pass-phrase again, the meaning in words, and the hash of exactly what was
 * shown, so that a change of the record or a signature moved to another one is discovered (21 CFR 11.50, 11.70).
 */
export async function signRecord(
  actor: Actor,
  { siteId, meaning, reason = '', record, content, password, client }: SignRequest,
): Promise<Signature> {
  const user = await requireOwnPassPhrase(actor, password, '/password', client)
  if (user.mustChangePassPhrase) throw new ConflictError('first-pass-phrase', 'Choose a pass-phrase of your own before you sign anything.')
  const session = await Session.findByPk(actor.sessionId)
  if (!session || session.endedAt) throw new SignedOutError()
  const signedAt = new Date()
  await session.update({ signedAt })
  return Signature.create({
    siteId,
    userId: user.id,
    printedName: user.name,
    meaning,
    reason,
    recordKind: record.kind,
    recordId: record.id,
    contentHash: contentHash(content),
    signedAt,
    sessionId: session.id,
  })
}
